#!/bin/sh
# Installs what is missing, builds into build/, and runs every test through ctest; then once more under the address and
# undefined-behaviour sanitizers, and a build with the other compiler.
#   sh tests/run.sh [ctest options]      SEPTUM_QUICK=1: the first round only
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
. "$root/docs/examples/setup.sh"

septum_install test
jobs=$(nproc 2>/dev/null || echo 2)

septum_build
ctest --test-dir "$build" --output-on-failure -j "$jobs" "$@"
[ -n "${SEPTUM_QUICK:-}" ] && exit 0

first=$build
build=$first-sanitize
septum_build -DSEPTUM_SANITIZE=address,undefined -DCMAKE_BUILD_TYPE=RelWithDebInfo
ASAN_OPTIONS=detect_leaks=1 UBSAN_OPTIONS=print_stacktrace=1 \
  ctest --test-dir "$build" --output-on-failure -j "$jobs" -LE once "$@"

build=$first-clang
septum_build -DCMAKE_C_COMPILER=clang -DSEPTUM_WERROR=ON
ctest --test-dir "$build" --output-on-failure -j "$jobs" -LE once "$@"
