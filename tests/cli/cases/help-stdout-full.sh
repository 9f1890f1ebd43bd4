$SEPTUM --help >/dev/full
