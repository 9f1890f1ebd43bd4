$SEPTUM ladder "$EXAMPLES/party-wall.json" --from 90
