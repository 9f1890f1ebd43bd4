"$SEPTUM" check --html page.html "$EXAMPLES/party-wall.json"
