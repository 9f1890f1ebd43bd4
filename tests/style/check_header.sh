#!/bin/sh
# The public header compiles alone, as C11 and as C++, and every declaration in it has a comment.
set -eu
header=$1/include/septum.h
cc=${CC:-cc}
"$cc" -std=c11 -Wall -Wextra -Wpedantic -Werror -fsyntax-only -x c "$header"
for cxx in ${CXX:-c++ g++ clang++}; do
  command -v "$cxx" >/dev/null || continue
  "$cxx" -std=c++11 -Wall -Wextra -Wpedantic -Werror -fsyntax-only -x c++ "$header"
  found=$cxx
  break
done
if [ -z "${found:-}" ]; then
  [ -n "${CI:-}" ] && { echo "no C++ compiler: the header is not proven to compile as C++"; exit 1; }
  echo "no C++ compiler here: that half is skipped"
fi
# A declaration at the left margin follows a comment, or another declaration that one comment covers.
awk '
  /^$/ { covered = 0 }
  /\*\/$/ || /^\/\*/ { covered = 1 }
  /^(typedef|septum|void|const|extern|#define SEPTUM_V)/ && !/extern "C"/ && !/SEPTUM_VERSION/ && !covered {
    print FILENAME ":" NR ": no comment: " $0; bad = 1 }
  END { exit bad }' "$header"
