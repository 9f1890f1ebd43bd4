# Shared by check_golden.sh and rewrite.sh: the briefs that have golden answers, and how an answer is made.
# Sets $briefs; `answer BRIEF EXTENSION` writes the answer to stdout.
briefs="heavy-fastening one-hour thin-wall tall-wall impossible"
unset SEPTUM_DATA
answer() {
  status=0
  case $2 in
    txt) "$build/bin/septum" pick "$source/docs/examples/$1.json" 2>/dev/null || status=$? ;;
    json) "$build/bin/septum" pick --json "$source/docs/examples/$1.json" 2>/dev/null || status=$? ;;
  esac
  # No wall fits the impossible brief; every other has an answer.
  want=0
  [ "$1" = impossible ] && want=1
  [ "$status" = "$want" ] || { echo "$1.$2: exit $status, expected $want" >&2; return 1; }
}
