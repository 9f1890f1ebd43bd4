$SEPTUM pick a.json b.json
