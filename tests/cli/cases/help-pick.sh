$SEPTUM --help pick
