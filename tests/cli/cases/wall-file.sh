$SEPTUM rate $EXAMPLES/corridor-wall.json
