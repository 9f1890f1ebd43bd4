$SEPTUM pick $EXAMPLES/one-hour.json --save-model nowhere/m.lp
