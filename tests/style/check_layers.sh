#!/bin/sh
# Layers: a folder of src/ includes itself and what stands to its left; acoustics and checks never meet; the command sees only
# the public header.
set -eu
src=$1/src
bad=0
left=""
for layer in base input wall acoustics checks search select explain report api; do
  left="$left $layer"
  for file in "$src/$layer"/*.[ch]; do
    [ -e "$file" ] || continue
    for used in $(sed -n 's/^#include "\([a-z]*\)\/.*/\1/p' "$file" | sort -u); do
      case " $left " in
        *" $used "*) ;;
        *) echo "$file includes $used/, which stands to the right of $layer"; bad=1 ;;
      esac
      case "$layer-$used" in
        acoustics-checks | checks-acoustics) echo "$file: $layer may not include $used"; bad=1 ;;
      esac
    done
  done
done
if grep -n '#include "[a-z]*/' "$src"/cli/*.[ch]; then
  echo "the command may include septum.h and its own headers only"; bad=1
fi
exit $bad
