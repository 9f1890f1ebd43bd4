cd $TMP
printf '{"septum": "price-book/1", "name": "a", "base": "b.json", "place": "p", "date": "d", "source": "s"}' >a.json
printf '{"septum": "price-book/1", "name": "b", "base": "a.json", "place": "p", "date": "d", "source": "s"}' >b.json
$SEPTUM rate 'typex-16 | wood-89@406 | typex-16' --prices a.json
