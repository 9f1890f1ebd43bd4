$SEPTUM prices --to-csv - --prices $TMP/none.json
