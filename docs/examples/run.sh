#!/bin/sh
# Installs what is missing, builds into build/, and picks the cheapest wall for a brief of the demo.
#   sh docs/examples/run.sh [BRIEF] [options of `septum pick`]
# Runs as root or with sudo, any number of times. CC picks the compiler, SEPTUM_BUILD the build folder.
set -eu
root=$(cd "$(dirname "$0")/../.." && pwd)
. "$root/docs/examples/setup.sh"

septum_install build
septum_build

if [ $# -eq 0 ]; then set -- "$root/docs/examples/party-wall.json"; fi
exec "$build/bin/septum" pick "$@"
