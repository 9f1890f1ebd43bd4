#!/bin/sh
# Golden answers: text and JSON of `pick` for the demo briefs; drawings of four walls, pages. After a change that is meant: rewrite.sh,
# then review the diff.
# Usage: check_golden.sh SOURCE BUILD
set -u
source=$1
build=$2
. "$source/tests/golden/golden.sh"
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
bad=0
for brief in $briefs; do
  for extension in txt json; do
    answer "$brief" "$extension" >"$work/found" || bad=1
    diff -u "$source/tests/golden/$brief.$extension" "$work/found" || bad=1
  done
done
for name in $sections; do
  section "$name" >"$work/found" || bad=1
  diff -u "$source/tests/golden/$name.svg" "$work/found" || bad=1
done
for name in $pages; do
  page "$name" >"$work/found" || bad=1
  diff -u "$source/tests/golden/$name.html" "$work/found" || bad=1
done
[ "$bad" = 0 ] || echo "if this change is meant: sh tests/golden/rewrite.sh BUILD, then review the diff"
exit $bad
