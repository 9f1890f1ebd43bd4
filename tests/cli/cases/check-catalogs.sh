$SEPTUM check $EXAMPLES/../../catalogs/*.json $EXAMPLES/../../prices/*.json
