$SEPTUM ladder --help
