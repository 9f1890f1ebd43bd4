$SEPTUM rate nothing.json
