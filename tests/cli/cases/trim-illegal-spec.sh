$SEPTUM trim "$EXAMPLES/party-wall.json" --spec 'typex-16 | rc@610 | wood-89@406 | rc@610 | typex-16'
