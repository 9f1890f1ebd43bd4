$SEPTUM ladder "$EXAMPLES/party-wall.json" --metric STX
