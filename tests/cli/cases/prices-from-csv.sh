cd $EXAMPLES && $SEPTUM prices --from-csv supplier-prices.csv --prices ../../prices/kestrel-yard.json --today 2031-07-01
