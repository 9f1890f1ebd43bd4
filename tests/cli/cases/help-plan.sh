$SEPTUM plan --help
