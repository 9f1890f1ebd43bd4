echo '{"septum":"brief/1","units":"si","code":"ibc","only":["frame:wood-89"]}' >free.json
$SEPTUM ladder free.json --metric Rw --from 45 --to 50
