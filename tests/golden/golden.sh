# Shared by check_golden.sh and rewrite.sh: the briefs that have golden answers, the walls that have golden drawings, the pages, and
# how they are made. Sets $briefs, $sections and $pages; `answer BRIEF EXTENSION`, `section NAME` and `page NAME` write to stdout.
briefs="heavy-fastening one-hour thin-wall tall-wall impossible kitchen-stretch specified-party-wall ladder-one-hour plan-kestrel-yard"
unset SEPTUM_DATA
# A specified wall is trimmed under the brief whose name follows, a ladder climbed under it, a project planned; a
# brief is picked for.
answer() {
  status=0
  file=$source/docs/examples/$1.json
  json=
  [ "$2" = json ] && json=--json
  case $1 in
    specified-*)
      "$build/bin/septum" trim $json "$source/docs/examples/${1#specified-}.json" --spec "$file" --count 3 2>/dev/null ||
        status=$? ;;
    plan-*)
      # Of JSON the head: what it costs and how that was proved. The rest stands in the text.
      "$build/bin/septum" plan $json "$source/docs/examples/${1#plan-}.json" 2>/dev/null >"${TMPDIR:-/tmp}/plan.$$" || status=$?
      sed '/^ *"types": \[/q' "${TMPDIR:-/tmp}/plan.$$"
      rm -f "${TMPDIR:-/tmp}/plan.$$" ;;
    ladder-*) "$build/bin/septum" ladder $json "$source/docs/examples/${1#ladder-}.json" 2>/dev/null || status=$? ;;
    *) "$build/bin/septum" pick $json "$file" 2>/dev/null || status=$? ;;
  esac
  # No wall fits the impossible brief; every other has an answer.
  want=0
  [ "$1" = impossible ] && want=1
  [ "$status" = "$want" ] || { echo "$1.$2: exit $status, expected $want" >&2; return 1; }
}
# Editions of the files that were read are not a matter of the page.
pages="page-rate page-pick"
page() {
  made=$(mktemp) || return 1
  case $1 in
    page-rate) "$build/bin/septum" rate --html "$made" --units si '2*typex-16 | rc@610 | steel-92-33@610, glass-89 | typex-16' ;;
    page-pick) "$build/bin/septum" pick --html "$made" "$source/docs/examples/one-hour.json" ;;
  esac >/dev/null 2>&1 || return 1
  sed 's/\(\.json\) [0-9A-F]\{8\}/\1 (CRC-32)/g' "$made"
  rm -f "$made"
}
sections="section-steel section-staggered section-two-rows section-on-sheathing"
section() {
  case $1 in
    section-steel) "$build/bin/draw_walls" 'typex-16 | steel-92-18@610, glass-89 | typex-16' us ;;
    section-staggered) "$build/bin/draw_walls" '2*typex-16 | wood-89-stag-140@406, glass-89 | typex-16' si ;;
    section-two-rows)
      "$build/bin/draw_walls" '2*typex-16 | wood-89-double@406, glass-89, stone-65 | typex-16 + osb-11' us ;;
    section-on-sheathing) "$build/bin/draw_walls" 'typex-16 | rc@610 | on osb-11 | wood-89@406, cell-89 | typex-16' si ;;
  esac
}
