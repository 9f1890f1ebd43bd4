$SEPTUM ladder "$EXAMPLES/corridor.json" --have "$EXAMPLES/corridor-wall.json" --to 60
