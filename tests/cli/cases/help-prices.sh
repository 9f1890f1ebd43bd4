$SEPTUM prices --help
