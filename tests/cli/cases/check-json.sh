cd $EXAMPLES && $SEPTUM check --json one-hour.json
