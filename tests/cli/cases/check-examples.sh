cd $EXAMPLES && $SEPTUM check *.json
