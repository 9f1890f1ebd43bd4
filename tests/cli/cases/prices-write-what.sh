$SEPTUM prices --to-csv - --write x
