$SEPTUM plan
