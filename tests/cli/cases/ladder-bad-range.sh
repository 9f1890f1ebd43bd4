$SEPTUM ladder "$EXAMPLES/party-wall.json" --from 55 --to 50
