#!/bin/sh
# The file that `plan --save-model` writes for a project, solved by cbc where it is installed, costs what `plan` says. Small projects with every
# rule on and off are compared with glpsol and cbc in tests/unit/test_select_plan_file.c; glpsol takes too long over this one.
# usage: check_plan_lp.sh SOURCE BUILD
set -eu
root=$1 septum=$2/bin/septum
[ -x "$septum" ] || { echo "no $septum: nothing to check"; exit 1; }
command -v cbc >/dev/null || {
  [ -n "${CI:-}" ] && { echo "no cbc: the plan is not checked by another solver"; exit 1; }
  echo "skipped: no cbc"; exit 0; }
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT INT TERM
project=$root/docs/examples/kestrel-yard.json
"$septum" plan "$project" --save-model "$work/plan.lp" --json >"$work/plan.json"
ours=$(awk -F'[:,]' '/^ *"cost_total":/ { printf "%.0f", $2 * 100; exit }' "$work/plan.json")
[ -n "$ours" ] || { echo "plan names no cost_total"; exit 1; }
cbc "$work/plan.lp" ratio 0 allow 0 solve solution "$work/cbc" >/dev/null
theirs=$(awk 'NR == 1 { printf "%.0f", $NF * 100 }' "$work/cbc")
off=$((ours > theirs ? ours - theirs : theirs - ours))
if [ "$off" -gt 1 ]; then # cents: the model buys fractions of cents, the answer rounds once
  echo "cbc finds $theirs, plan $ours"
  exit 1
fi
echo "$ours"
