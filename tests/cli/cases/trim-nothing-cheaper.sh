echo '{"septum":"brief/1","code":"ibc","wall":{"length_m":6,"height_m":2.4},"only":["gyp-13","steel-92-18","glass-89"],"without":["rc","clip"]}' >own.json
$SEPTUM trim own.json --spec 'gyp-13 | steel-92-18@610 | gyp-13' --json
