echo '{"septum": "project/1", "code": "ibc", "walls": "nowhere.csv"}' >project.json
$SEPTUM plan project.json
