$SEPTUM check --json $EXAMPLES/one-hour.json | sed "s@\"/.*/@\"@"
