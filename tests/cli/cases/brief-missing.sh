$SEPTUM pick nothing.json
