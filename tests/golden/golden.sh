# Shared by check_golden.sh and rewrite.sh: the briefs that have golden answers, and how an answer is made.
# Sets $briefs; `answer BRIEF EXTENSION` writes the answer to stdout.
briefs="heavy-fastening one-hour thin-wall tall-wall impossible specified-party-wall ladder-one-hour"
unset SEPTUM_DATA
# A specified wall is trimmed under the brief whose name follows, a ladder climbed under it; a brief is picked for.
answer() {
  status=0
  file=$source/docs/examples/$1.json
  json=
  [ "$2" = json ] && json=--json
  case $1 in
    specified-*)
      "$build/bin/septum" trim $json "$source/docs/examples/${1#specified-}.json" --spec "$file" --count 3 2>/dev/null ||
        status=$? ;;
    ladder-*) "$build/bin/septum" ladder $json "$source/docs/examples/${1#ladder-}.json" 2>/dev/null || status=$? ;;
    *) "$build/bin/septum" pick $json "$file" 2>/dev/null || status=$? ;;
  esac
  # No wall fits the impossible brief; every other has an answer.
  want=0
  [ "$1" = impossible ] && want=1
  [ "$status" = "$want" ] || { echo "$1.$2: exit $status, expected $want" >&2; return 1; }
}
