#!/bin/sh
# Installs what is missing, builds into build/, and runs every test through ctest with gcc; then builds with clang under the
# address and undefined-behaviour sanitizers and runs them again.
#   sh tests/run.sh [ctest options]      SEPTUM_QUICK=1: the first round only
set -eu
root=$(cd "$(dirname "$0")/.." && pwd)
. "$root/docs/examples/setup.sh"

septum_install test
jobs=$(nproc 2>/dev/null || echo 2)

# Each test program runs in one process: forking for every case costs a third of the time.
export CK_FORK=no
septum_build
ctest --test-dir "$build" --output-on-failure -j "$jobs" "$@"
[ -n "${SEPTUM_QUICK:-}" ] && exit 0

# Tests labelled `once` do not depend on the compiler, or start a foreign program for most of their time.
build=$build-clang
septum_build -DCMAKE_C_COMPILER=clang -DSEPTUM_SANITIZE=address,undefined
ASAN_OPTIONS=detect_leaks=1 UBSAN_OPTIONS=print_stacktrace=1 SEPTUM_TEST_SHARE=10 \
  ctest --test-dir "$build" --output-on-failure -j "$jobs" -LE once "$@"
