$SEPTUM plan "$EXAMPLES/party-wall.json"
