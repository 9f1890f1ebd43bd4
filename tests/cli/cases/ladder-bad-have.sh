$SEPTUM ladder "$EXAMPLES/party-wall.json" --have "typex-16 | wood-98@406 | typex-16"
