$SEPTUM pick "$EXAMPLES/corridor.json" --length 30ft --doors 2 --units us
