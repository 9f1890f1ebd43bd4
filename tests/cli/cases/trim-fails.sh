$SEPTUM trim "$EXAMPLES/corridor.json" --spec "$EXAMPLES/corridor-wall.json" --count=1
