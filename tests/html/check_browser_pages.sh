#!/bin/sh
# Pages in a browser: nothing wider than the window at 400 and 1280 px, in light and dark; in print nothing beyond the paper, in A4
# and Letter. Usage: check_browser_pages.sh SOURCE BUILD
set -eu
python=${PYTHON:-/usr/bin/python3}
browser=${CHROMIUM:-$(command -v chromium || true)}
if [ -z "$browser" ] || ! command -v pdftotext >/dev/null 2>&1; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "chromium and pdftotext are needed here" >&2
    exit 1
  fi
  echo "skipped: no chromium or no pdftotext"
  exit 0
fi
unset SEPTUM_DATA
export PYTHONDONTWRITEBYTECODE=1
exec "$python" "$1/tests/html/browser.py" "$1" "$2" "$browser"
