$SEPTUM trim "$EXAMPLES/party-wall.json" --spec 'typex-16 | wood-98@406 | typex-16'
