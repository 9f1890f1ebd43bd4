$SEPTUM pick $EXAMPLES/party-wall.json --time-limit soon
