printf '{"septum":"brief/1","code":"ibc","target":{"metric":"STC","value":62,"evidence":"published"},"reports":["%s/test-reports.json"]}' "$EXAMPLES" >b.json
$SEPTUM rate "2x 5/8X | 2x4@16, R13 | clip@24 | 2x 5/8X" --brief b.json
