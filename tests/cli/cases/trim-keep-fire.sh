printf '{"septum":"brief/1","code":"ibc"}' >b.json
$SEPTUM trim b.json --spec "2x 5/8X | 3-5/8 25ga@16, R13 | 2x 5/8X" --rating 50 --keep fire,frame --count 3
