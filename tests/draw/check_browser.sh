#!/bin/sh
# Labels as a browser sets them, with the fonts that are here: none on another, none out of its picture. All drawings stand on one
# page, so their ids must differ too. Usage: check_browser.sh SOURCE BUILD
set -eu
if ! command -v chromium >/dev/null 2>&1; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "chromium is needed here" >&2
    exit 1
  fi
  echo "skipped: no chromium"
  exit 0
fi
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
count=160
"$2/bin/draw_walls" --many "$work" "$count"
{
  echo '<!DOCTYPE html><html><head><meta charset="utf-8"/></head><body>'
  i=0
  while [ "$i" -lt "$count" ]; do
    sed 1d "$work/$i.svg" # without the line that begins a file of XML
    i=$((i + 1))
  done
  echo '<pre id="found"></pre><script>'
  cat "$1/tests/draw/browser.js"
  echo '</script></body></html>'
} >"$work/page.html"
timeout 300 chromium --headless --no-sandbox --disable-gpu --user-data-dir="$work/profile" --dump-dom "file://$work/page.html" \
  >"$work/dom" 2>/dev/null || { echo "chromium failed"; exit 1; }
sed -n '/<pre id="found">/,/<\/pre>/p' "$work/dom" | sed 's/<[^>]*>//g'
grep -q "$count drawings, [0-9]* labels, 0 wrong" "$work/dom"
