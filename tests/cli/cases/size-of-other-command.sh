$SEPTUM ladder "$EXAMPLES/corridor.json" --doors 1
