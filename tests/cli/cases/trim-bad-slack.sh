$SEPTUM trim "$EXAMPLES/party-wall.json" --spec 'typex-16 | wood-89@406 | typex-16' --slack thick
