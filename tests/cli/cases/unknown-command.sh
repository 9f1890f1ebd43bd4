$SEPTUM picc x.json
