$SEPTUM pick "$EXAMPLES/corridor.json" --length 1ft --height 2ft
