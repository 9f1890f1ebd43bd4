$SEPTUM trim "$EXAMPLES/party-wall.json"
