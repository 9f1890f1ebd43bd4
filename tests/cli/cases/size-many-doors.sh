$SEPTUM pick "$EXAMPLES/corridor.json" --doors 1001
