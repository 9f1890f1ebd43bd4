$SEPTUM rate
