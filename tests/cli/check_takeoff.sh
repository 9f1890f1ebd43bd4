#!/bin/sh
# Takeoff files read back by other programs: takeoff.py. Usage: check_takeoff.sh SOURCE BUILD
set -eu
python=${PYTHON:-/usr/bin/python3}
if ! "$python" -c 'import openpyxl' 2>/dev/null; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "python3 with openpyxl is needed here" >&2
    exit 1
  fi
  echo "skipped: no python3 with openpyxl"
  exit 0
fi
unset SEPTUM_DATA
exec "$python" -B "$1/tests/cli/takeoff.py" "$1" "$2"
