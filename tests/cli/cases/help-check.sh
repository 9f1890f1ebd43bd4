$SEPTUM check --help
