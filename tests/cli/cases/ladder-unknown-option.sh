$SEPTUM ladder "$EXAMPLES/party-wall.json" --slack 1in
