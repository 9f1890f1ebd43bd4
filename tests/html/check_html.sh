#!/bin/sh
# Pages (--html): strict HTML and XML, nothing from outside, an order that a screen reader can follow, and the facts of --json;
# texts of the user's files stay text. Usage: check_html.sh SOURCE BUILD
set -eu
python=${PYTHON:-/usr/bin/python3}
if ! "$python" -c 'import html5lib' 2>/dev/null; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "python3 with html5lib is needed here" >&2
    exit 1
  fi
  echo "skipped: no python3 with html5lib"
  exit 0
fi
unset SEPTUM_DATA
export PYTHONDONTWRITEBYTECODE=1
for part in answers hostile plans; do "$python" "$1/tests/html/$part.py" "$1" "$2"; done
