#!/bin/sh
# The top level holds what the design names and nothing else; no words or paths that belong to no project.
set -eu
cd "$1"
bad=0
names=$(ls -1 | grep -vxE 'README\.md|DEVELOPERS\.md|LICENSE|CMakeLists\.txt|src|include|tests|prices|catalogs|docs|build.*' || true)
[ -n "$names" ] && { echo "not in the design: $names"; bad=1; }
for file in README.md DEVELOPERS.md LICENSE CMakeLists.txt .ci/run tests/run.sh docs/examples/run.sh; do
  [ -e "$file" ] || { echo "missing: $file"; bad=1; }
done
grep -q 'sh docs/examples/run.sh' README.md || { echo "README lacks the first command"; bad=1; }
grep -q 'sh tests/run.sh' README.md || { echo "README lacks the test command"; bad=1; }
marks='TO''DO|FIX''ME|XX''X|HA''CK'
grep -rnwE "$marks" src include tests docs catalogs && { echo "unfinished marks"; bad=1; }
exit $bad
