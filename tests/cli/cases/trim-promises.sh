$SEPTUM trim $EXAMPLES/party-wall.json --spec $EXAMPLES/specified-party-wall.json --rating 55 --fire 60 --design "X 101" --redesign 500 --count 1
