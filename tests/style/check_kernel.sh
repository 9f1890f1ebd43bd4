#!/bin/sh
# check_kernel.sh SOURCE BUILD: the kernel's loops over lanes run in vectors with gcc and with clang (as their reports say), and the
# kernel calls nothing: no library of mathematics, no memory.
source=$1
cc=$(sed -n 's/^CMAKE_C_COMPILER:[A-Z]*=//p' "$2/CMakeCache.txt")
work=$(mktemp -d) || exit 1
trap 'rm -rf "$work"' EXIT
kernel=$source/src/acoustics/kernel.c
failed=0

# As CMakeLists.txt compiles it.
flags="-std=c11 -O3 -fno-trapping-math -fno-math-errno -ffp-contract=off -fPIC -D_POSIX_C_SOURCE=200809L -DSEPTUM_SIMD=1"
for flag in -fno-trapping-math -O3; do
  grep -q -e "$flag" "$source/CMakeLists.txt" || { echo "CMakeLists.txt no longer has $flag for the kernel"; failed=1; }
done
wide=no
[ "$(uname -m)" = x86_64 ] && wide=yes

# Lines of loops over lanes; one that only clears becomes a call of memset, which is as good.
loops=$(grep -n 'for (int j = l\.from; j < l\.to; j++)' "$kernel" | grep -v '= 0\.0;$' | cut -d: -f1)
[ "$(echo "$loops" | wc -l)" -ge 10 ] || { echo "$kernel: loops over lanes not found"; failed=1; }

# vectorised COMPILER REPORT_OPTION PATTERN: each loop stands in the report, at 32 bytes or more where there is AVX2.
vectorised() {
  "$1" $flags "$2" -I"$source/src" -I"$source/include" -c "$kernel" -o "$work/kernel.o" 2>"$work/report" || {
    echo "$1 does not compile the kernel"; cat "$work/report"; failed=1; return; }
  for line in $loops; do
    grep "kernel\.c:$line:" "$work/report" | grep -q -e "$3" || {
      echo "$1 does not run kernel.c:$line in vectors: $(sed -n "${line}p" "$kernel")"; failed=1; }
  done
  # What the object asks of others: tables, memory set and copied, words compared (kernel_use), and what the compiler brings for __builtin_cpu_supports.
  nm -u "$work/kernel.o" | awk '{print $NF}' | grep -v -x -e kernel_core_band -e rating_stc_contour -e rating_rw_contour \
    -e memset -e memcpy -e strcmp -e __cpu_model -e __cpu_indicator_init -e _GLOBAL_OFFSET_TABLE_ >"$work/calls"
  [ -s "$work/calls" ] && { echo "the kernel by $1 calls:"; cat "$work/calls"; failed=1; }
}

gcc_pattern='loop vectorized'
clang_pattern='vectorized loop'
[ $wide = yes ] && gcc_pattern='loop vectorized using 32 byte vectors' && clang_pattern='vectorized loop (vectorization width: 4'
tried=0
for compiler in "$cc" gcc clang; do
  command -v "$compiler" >/dev/null 2>&1 || continue
  case $("$compiler" --version | head -1) in
    *clang*) vectorised "$compiler" -Rpass=loop-vectorize "$clang_pattern" ;;
    *gcc* | *GCC* | cc*) vectorised "$compiler" -fopt-info-vec-optimized "$gcc_pattern" ;;
    *) continue ;;
  esac
  tried=$((tried + 1))
done
[ $tried -gt 0 ] || { echo "neither gcc nor clang"; exit 1; }

# No loop over lanes may stop early.
awk '/for \(int j = l\.from/ {inside = 1; depth = 0}
     inside {depth += gsub(/{/, "{") - gsub(/}/, "}"); if ($0 ~ /(break|return|goto|continue);/) print FILENAME ":" FNR ": " $0
             if (depth <= 0) inside = 0}' "$kernel" >"$work/exits"
[ -s "$work/exits" ] && { echo "a loop over lanes stops early:"; cat "$work/exits"; failed=1; }
exit $failed
