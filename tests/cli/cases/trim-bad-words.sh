$SEPTUM trim $EXAMPLES/party-wall.json --spec $EXAMPLES/specified-party-wall.json --allow thinner-studs,thiner --keep frames
