#!/bin/sh
# The command from outside: every case of tests/cli/cases. A case is a folder-less set of files of one name:
#   NAME.sh       the command line, run by sh with $SEPTUM (the program), $EXAMPLES, $CASES and $TMP (an empty folder) set
#   NAME.exit     the exit status (0 without one)
#   NAME.out      stdout, exactly; NAME.outlike: each line stands somewhere in stdout
#   NAME.errlike  each line stands somewhere in stderr
# Exit 2 to 5 must say something on stderr; stderr of exit 0 must hold no error. Usage: check_cli.sh SOURCE BUILD [NAME...]
set -u
source=$1
build=$2
shift 2
CASES=$source/tests/cli/cases
EXAMPLES=$source/docs/examples
SEPTUM=$build/bin/septum
export CASES EXAMPLES SEPTUM
unset SEPTUM_DATA
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
failed=0
count=0
complain() {
  echo "case $name: $1"
  failed=$((failed + 1))
}
# Each line of file $1 stands in file $2.
holds() {
  while IFS= read -r line; do
    [ -z "$line" ] || grep -qF -e "$line" "$2" || complain "$3 lacks: $line"
  done <"$1"
}
[ $# -gt 0 ] || set -- $(cd "$CASES" && ls *.sh | sed 's/\.sh$//')
for name in "$@"; do
  case=$CASES/$name
  TMP=$work/tmp
  export TMP
  rm -rf "$TMP" && mkdir "$TMP"
  (cd "$TMP" && sh "$case.sh") >"$work/out" 2>"$work/err"
  status=$?
  want=0
  [ -e "$case.exit" ] && want=$(cat "$case.exit")
  count=$((count + 1))
  if [ "$status" != "$want" ]; then
    complain "exit $status, expected $want"
    cat "$work/err"
  fi
  [ "$want" -ge 2 ] && [ ! -s "$work/err" ] && complain "exit $want without a word on stderr"
  [ "$want" = 0 ] && grep -q 'error\[' "$work/err" && complain "an error on stderr of an answer"
  if [ -e "$case.out" ]; then diff -u "$case.out" "$work/out" || complain "stdout differs"; fi
  if [ -e "$case.outlike" ]; then holds "$case.outlike" "$work/out" stdout; fi
  if [ -e "$case.errlike" ]; then holds "$case.errlike" "$work/err" stderr; fi
done
echo "$count cases, $failed faults"
[ "$count" -gt 0 ] && [ "$failed" = 0 ]
