#!/bin/sh
# The workbook of plan read back by another program: plansheets.py. Usage: check_plan_sheets.sh SOURCE BUILD
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
exec "$python" -B "$1/tests/cli/plansheets.py" "$1" "$2"
