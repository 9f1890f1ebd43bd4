sed 's/"stc": 62/"stc": 66/' "$EXAMPLES/test-reports.json" >t.json
printf '{"septum":"brief/1","target":{"metric":"STC","value":50},"reports":["t.json"]}' >b.json
$SEPTUM rate "2x 5/8X | clip@24 | 2x4@16, R13 | 2x 5/8X" --brief b.json
