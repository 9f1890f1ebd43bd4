$SEPTUM --version
