$SEPTUM prices
