$SEPTUM pick $EXAMPLES/impossible.json
