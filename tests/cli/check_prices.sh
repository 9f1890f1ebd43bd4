#!/bin/sh
# Suppliers' lists from outside: prices.py. Usage: check_prices.sh SOURCE BUILD
set -eu
unset SEPTUM_DATA
exec "${PYTHON:-/usr/bin/python3}" "$1/tests/cli/prices.py" "$1" "$2"
