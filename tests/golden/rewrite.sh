#!/bin/sh
# Writes the golden answers anew. Usage: sh tests/golden/rewrite.sh BUILD
set -eu
source=$(cd "$(dirname "$0")/../.." && pwd)
build=$(cd "${1:-$source/build}" && pwd)
. "$source/tests/golden/golden.sh"
for brief in $briefs; do
  for extension in txt json; do
    answer "$brief" "$extension" >"$source/tests/golden/$brief.$extension.new"
    mv "$source/tests/golden/$brief.$extension.new" "$source/tests/golden/$brief.$extension"
  done
done
for name in $sections; do
  section "$name" >"$source/tests/golden/$name.svg.new"
  mv "$source/tests/golden/$name.svg.new" "$source/tests/golden/$name.svg"
done
for name in $pages; do
  page "$name" >"$source/tests/golden/$name.html.new"
  mv "$source/tests/golden/$name.html.new" "$source/tests/golden/$name.html"
done
SEPTUM_GOLDEN=write CK_FORK=no "$build/bin/test_report_chart_golden" >/dev/null
