$SEPTUM pick $EXAMPLES/corridor-wall.json
