printf 'code,unit,price\ntypex-16,hogshead,1\ngyp-16,ft2,call\n' >$TMP/list.csv
cd $TMP && $SEPTUM prices --from-csv list.csv --write book.json
status=$?
[ -e book.json ] && echo "written in spite of faults"
exit $status
