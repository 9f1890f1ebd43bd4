$SEPTUM prices --from-csv $EXAMPLES/supplier-prices.csv --write $TMP/none/book.json
