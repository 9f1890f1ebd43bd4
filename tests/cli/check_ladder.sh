#!/bin/sh
# The ladder from outside: each rung against a pick at its rating, text and CSV against JSON, JSON against its schema.
# Usage: check_ladder.sh SOURCE BUILD
set -eu
python=${PYTHON:-/usr/bin/python3}
if ! "$python" -c 'import jsonschema' 2>/dev/null; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "python3 with jsonschema is needed here" >&2
    exit 1
  fi
  echo "skipped: no python3 with jsonschema"
  exit 0
fi
unset SEPTUM_DATA
exec "$python" "$1/tests/cli/ladder.py" "$1" "$2"
