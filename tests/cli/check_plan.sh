#!/bin/sh
# The plan from outside: every row has one type, every wall keeps what its row asks, money adds up, and other solvers agree:
# plan.py. Usage: check_plan.sh SOURCE BUILD
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
exec "$python" "$1/tests/cli/plan.py" "$1" "$2"
