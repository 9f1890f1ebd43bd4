$SEPTUM ladder "$EXAMPLES/party-wall.json" --from fifty
