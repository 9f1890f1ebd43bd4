$SEPTUM pick $EXAMPLES/one-hour.json --save-model m.lp >/dev/null && tail -1 m.lp
