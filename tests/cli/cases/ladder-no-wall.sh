echo '{"septum":"brief/1","fire_min":120,"code":"none","only":["gyp-13","wood-89"]}' >never.json
$SEPTUM ladder never.json --json
