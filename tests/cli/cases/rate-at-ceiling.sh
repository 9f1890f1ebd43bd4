# A wall that stops at the ceiling is capped by the path over it, whatever it is itself.
cat >b.json <<'J'
{"septum": "brief/1", "target": {"value": 50}, "wall": {"length_m": 4, "top": "ceiling", "ceiling_batts": true}}
J
wall='2*typex-16 | rc@610 | steel-92-18@610, glass-89 | typex-16'
$SEPTUM rate "$wall" --brief b.json --json 2>/dev/null | grep '"ceiling_path"' || exit 9
sed 's/"ceiling_batts": true/"ceiling_class": 25/' b.json >c.json
$SEPTUM rate "$wall" --brief c.json --json 2>/dev/null | grep '"ceiling_path"' || exit 8
sed 's/"ceiling_batts": true/"ceiling_class": 25/; s/50/30/' b.json >d.json
$SEPTUM rate "$wall" --brief d.json --json | grep '"ceiling_path"' || exit 7
$SEPTUM rate "$wall" --brief d.json | grep -A 2 'stops at the ceiling' || exit 6
$SEPTUM rate "$wall" --brief d.json --json | grep -c '"field"'
$SEPTUM rate "$wall" --json | grep -c '"ceiling_path"'
exit 0
