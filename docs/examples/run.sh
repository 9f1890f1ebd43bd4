#!/bin/sh
# Installs what is missing, builds into build/, picks the cheapest wall for a brief of the demo and plans the wall types of its
# whole project.
#   sh docs/examples/run.sh [BRIEF [options of `septum pick`] | PROJECT [options of `septum plan`]]
# Runs as root or with sudo, any number of times. CC picks the compiler, SEPTUM_BUILD the build folder.
set -eu
root=$(cd "$(dirname "$0")/../.." && pwd)
. "$root/docs/examples/setup.sh"

septum_install build
septum_build

if [ $# -eq 0 ]; then
  "$build/bin/septum" pick "$root/docs/examples/party-wall.json"
  printf '\n'
  exec "$build/bin/septum" plan "$root/docs/examples/kestrel-yard.json"
fi
command=pick
if grep -q '"septum": *"project/1"' "$1" 2>/dev/null; then command=plan; fi
exec "$build/bin/septum" "$command" "$@"
