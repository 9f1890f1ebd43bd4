#!/bin/sh
# JSON answers against their schemas, and against themselves: lines of the takeoff add up, text and JSON say the same, text fits
# its page, and pick agrees with rate. Usage: check_answers.sh SOURCE BUILD
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
exec "$python" "$1/tests/cli/answers.py" "$1" "$2"
