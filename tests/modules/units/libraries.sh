#!/bin/sh
# Factors of units agree with two libraries of units, where these are installed.  Entries in which a
# library is itself off are named in the column `off` of numbers/units.tsv: udunits2 for torr, the US
# gallon, the barrel, the slug and the horsepower; pint for the 15 degC calorie and the ton of
# refrigeration; both for columns of mercury and water at 39 and 60 degF.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
rows=$top/tests/numbers/units.tsv
script=$top/tests/modules/units/libraries.py

# A python that has the library of that name, or any.
python=
for module in pint ctypes; do
  for candidate in python3 /usr/bin/python3; do
    [ -z "$python" ] && "$candidate" -c "import $module" 2> /dev/null && python=$candidate
  done
done

factors=$(grep -v '^#' "$rows" | cut -f 2 | tests/modules/units/factors) || exit 99

for library in pint udunits; do
  name="factors agree with $library"
  if [ -z "$python" ]; then
    skip "python3 is not installed" "$name"
    continue
  fi
  wrong=$(printf '%s\n' "$factors" | "$python" "$script" "$library" "$rows" 2>&1)
  status=$?
  case $status in
    0) tell "$wrong" "$name" ;;
    77) skip "$library is not installed" "$name" ;;
    *) tell "status $status: $wrong" "$name" ;;
  esac
done
finish
