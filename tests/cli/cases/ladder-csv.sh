$SEPTUM ladder "$EXAMPLES/one-hour.json" --csv rungs.csv >/dev/null
head -n 1 rungs.csv | tr -d "\r"
cut -d , -f 1-4 rungs.csv | sed -n 2,3p
