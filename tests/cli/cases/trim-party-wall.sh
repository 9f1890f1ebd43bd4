$SEPTUM trim "$EXAMPLES/party-wall.json" --spec "$EXAMPLES/specified-party-wall.json" --count 2
