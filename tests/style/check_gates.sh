#!/bin/sh
# One gate per outside thing, no risky calls, silent library, short files.
set -eu
src=$1/src
bad=0
# only PATTERN in FILES: nothing else in src/ may match.
only() {
  pattern=$1
  allowed=$2
  hits=$(grep -nE "$pattern" -r "$src" --include='*.[ch]' | grep -vE "$allowed" |
    grep -vE '^[^:]*:[0-9]*: *(/?\*|//)' || true) # comments may speak of them
  if [ -n "$hits" ]; then
    printf 'outside its gate (%s):\n%s\n' "$allowed" "$hits"
    bad=1
  fi
}
only 'cJSON_|<cjson/' 'src/input/json\.c:'
only '\bglp_[a-z]|<glpk' 'src/select/solver_glpk\.c:'
only '\b(lxw|workbook|worksheet|format)_[a-z]+\(|xlsxwriter\.h' 'src/report/report_xlsx\.c:'
only '\b(malloc|calloc|realloc|free)\(' 'src/base/arena\.c:|src/select/solver_glpk\.c:|src/input/json\.c:'
only '\b(sprintf|vsprintf|strcpy|strcat|atoi|atof|gets|setlocale)\(' 'nowhere'
only "\\b(printf|puts|putchar|fprintf|exit)\\(" "src/cli/"
only '0\.0254|0\.3048|25\.4|304\.8|47\.88|4\.882' 'src/base/units\.h:'
only '&(amp|lt|gt|quot);' 'src/report/markup\.c:'
for file in $(find "$src" -name '*.c'); do
  lines=$(wc -l <"$file")
  if [ "$lines" -gt 700 ]; then
    echo "$file has $lines lines: is it one thing?"
    bad=1
  fi
done
exit $bad
