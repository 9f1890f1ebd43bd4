echo '{"septum": "project/1", "code": "ibc", "walls": "walls.csv", "types": {"P1": "typex-16 | wood-89@406 | nothing-16"}}' >project.json
cat >walls.csv <<'END'
id,storey,length,height,target,existing type
A1,1,24ft,9ft,STC 50,P1
A1,1,24ft,9ft,STC 50,P2
A2,1,-3,9ft,STC 50,
A3,1,20ft,9ft,loud,
END
$SEPTUM plan project.json --csv out.csv --json || status=$?
[ ! -e out.csv ] || echo "a file in spite of faults"
exit $status
