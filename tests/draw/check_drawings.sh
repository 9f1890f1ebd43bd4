#!/bin/sh
# Many drawings of seeded walls: read by a strict parser, labels apart, everything to scale. Usage: check_drawings.sh SOURCE BUILD
set -eu
python=${PYTHON:-/usr/bin/python3}
if ! "$python" -c 'import xml.etree.ElementTree' 2>/dev/null; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "python3 is needed here" >&2
    exit 1
  fi
  echo "skipped: no python3"
  exit 0
fi
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
"$2/bin/draw_walls" --many "$work" 600
"$python" "$1/tests/draw/drawings.py" "$1" "$2" "$work"
