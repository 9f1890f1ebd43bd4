#!/bin/sh
# The code-table rows of catalogs/fire.json and catalogs/published.json are those of the tables in this folder.
# Published source: National Building Code of Canada 2020, Table 9.10.3.1.-A.
exec /usr/bin/python3 "$1/tests/data/rows.py" check "$1"
