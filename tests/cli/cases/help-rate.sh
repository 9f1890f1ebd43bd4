$SEPTUM rate --help
