printf "{\"septum\":\"project/1\"}" >p.json; printf "{\"septum\":\"breif/1\"}" >q.json; printf "{\"septum\":\"brief/2\"}" >r.json; printf "[]" >s.json; $SEPTUM check p.json q.json r.json s.json
