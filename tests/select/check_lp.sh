#!/bin/sh
# The file of --save-model, solved by glpsol and cbc where they are installed, costs what `pick` says. usage: check_lp.sh SOURCE BUILD
set -eu
root=$1 septum=$2/bin/septum
[ -x "$septum" ] || { echo "no $septum: nothing to check"; exit 1; }
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT INT TERM
status=0

# The objective that a solver writes, in cents; "none" when it finds no solution.
glpsol_cents() {
  glpsol --lp "$1" -o "$work/glpsol" >/dev/null
  if grep -q 'INTEGER OPTIMAL' "$work/glpsol"; then
    awk '/^Objective:/ { printf "%.0f", $4 * 100 }' "$work/glpsol"
  else echo none; fi
}
cbc_cents() {
  cbc "$1" solve solution "$work/cbc" >/dev/null
  if grep -qi infeasible "$work/cbc"; then echo none; else
    awk 'NR == 1 { printf "%.0f", $NF * 100 }' "$work/cbc"
  fi
}

for brief in "$root"/docs/examples/*.json; do
  grep -q '"brief/1"' "$brief" || continue
  name=$(basename "$brief" .json)
  code=0
  "$septum" pick "$brief" --save-model "$work/$name.lp" --json >"$work/$name.json" || code=$?
  case $code in
    0) ours=$(awk -F'[:,]' '/"objective":/ { printf "%.0f", $2 * 100; exit }' "$work/$name.json") ;;
    1) ours=none ;;
    *) echo "$name: pick ended with $code"; status=1; continue ;;
  esac
  for solver in glpsol cbc; do
    command -v $solver >/dev/null || continue
    theirs=$(${solver}_cents "$work/$name.lp")
    if [ "$ours" != "$theirs" ]; then
      echo "$name: $solver finds $theirs, pick $ours"
      status=1
    fi
  done
  echo "$name: $ours"
done
exit $status
