#!/bin/sh
# The example of the README is real: its lines are the first lines that the command prints.
set -eu
root=$1
build=$2
here=$(mktemp -d)
trap 'rm -rf "$here"' EXIT
awk '/^```text$/{on=1; next} /^```$/{on=0} on' "$root/README.md" >"$here/readme"
lines=$(wc -l <"$here/readme")
[ "$lines" -ge 20 ] || { echo "the README shows no example"; exit 1; }
(cd "$root" && "$build/bin/septum" pick docs/examples/party-wall.json) | head -n "$lines" >"$here/real"
diff -u "$here/readme" "$here/real" || { echo "renew the example in README.md"; exit 1; }
# Every wall line shown in the README is one that the program reads.
grep -o "septum rate '[^']*'" "$root/README.md" | sed "s/^septum rate '//; s/'$//" | while IFS= read -r wall; do
  "$build/bin/septum" rate "$wall" >/dev/null || { echo "README: cannot rate $wall"; exit 1; }
done
