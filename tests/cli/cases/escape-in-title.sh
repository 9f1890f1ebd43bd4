sed 's/Kestrel Yard, storage/\\u001b[2Jstorage/' $EXAMPLES/one-hour.json >b.json
grep -q '"title": ".u001b' b.json || exit 9
$SEPTUM rate '2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16' --brief b.json >out || exit 8
grep -c "$(printf '\033')" out
exit 0
