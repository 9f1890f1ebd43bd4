$SEPTUM check nothing.json
