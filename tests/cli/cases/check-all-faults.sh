printf "{\"septum\":\"brief/1\",\"targit\":{},\n\"fire_min\":-1,\n\"code\":\"ubc\"}" >b.json; $SEPTUM check b.json $EXAMPLES/one-hour.json
