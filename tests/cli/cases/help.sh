$SEPTUM --help
