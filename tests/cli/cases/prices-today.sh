$SEPTUM prices --to-csv - --today tomorrow
