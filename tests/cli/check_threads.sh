#!/bin/sh
# check_threads.sh SOURCE BUILD: answers are the same bytes for one thread and for four.
source=$1
build=$2
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
unset SEPTUM_DATA
failed=0

# same NAME ARGUMENT...: what septum answers to these arguments.
same() {
  name=$1
  shift
  for threads in 1 4; do
    SEPTUM_THREADS=$threads "$build/bin/septum" "$@" --json >"$work/$threads" 2>"$work/$threads.err"
    status=$?
    [ $status -le 1 ] || { echo "$name with $threads threads: exit $status"; cat "$work/$threads.err"; failed=1; return; }
    [ -s "$work/$threads" ] || { echo "$name with $threads threads: no answer"; failed=1; return; }
    cmp "$work/1" "$work/$threads" || { echo "$name: $threads threads answer otherwise than one"; failed=1; }
  done
}

examples=$source/docs/examples
for brief in corridor heavy-fastening impossible music-school one-hour party-wall tall-wall thin-wall; do
  same "pick $brief" pick "$examples/$brief.json"
done
same "ladder one-hour" ladder "$examples/one-hour.json"
same "ladder party-wall" ladder "$examples/party-wall.json"
same "trim party-wall" trim "$examples/party-wall.json" --spec "$examples/specified-party-wall.json"
cat >"$work/several.json" <<'EOF'
{"septum":"brief/1","title":"several","code":"ibc","wall":{"length_m":6,"height_m":2.7},"only":["frame:steel-*"],
 "targets":[{"metric":"STC","value":50},{"metric":"Rw+Ctr","value":42},{"metric":"OITC","value":38}],
 "limits":{"thickness_mm":{"max":200},"mass_kg_m2":{"max":80}},"fire_min":60,"floor_area_value_per_m2":2000}
EOF
same "pick several targets" pick "$work/several.json"
exit $failed
