$SEPTUM trim --help
