$SEPTUM trim "$EXAMPLES/party-wall.json" --spec "$EXAMPLES/specified-party-wall.json" --count 2 --csv log.csv >/dev/null
head -n 1 log.csv | tr -d '\r'
cut -c 1,2 log.csv | tail -n 2
