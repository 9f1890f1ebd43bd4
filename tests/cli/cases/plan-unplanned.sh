cat >project.json <<'END'
{"septum": "project/1", "code": "ibc", "walls": "walls.csv", "only": ["typex-16", "frame:wood-89", "glass-89", "rc"]}
END
printf 'id,length,height,target\nA1,24ft,9ft,STC 45\nA2,24ft,9ft,STC 90\n' >walls.csv
$SEPTUM plan project.json --csv plan.csv
status=$?
cat plan.csv
exit $status
