#!/bin/sh
# Molar masses against python3-periodictable, which reads formulas by code of its own.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
python=${PYTHON:-/usr/bin/python3}
printer=${PRINT_MASSES:-./tests/modules/gas/print_masses}
ours=$("$printer") || { echo "Bail out! $printer does not run"; exit 99; }

# Lines of OURS that the library gives otherwise.  HOW "read": the library's atoms, our atomic
# weights, equal but for rounding.  HOW "weighed": the library's weights too.  Those are of 1999 with
# the changes of 2001 (Coplen 2001); up to 2021 those of zinc moved by 4.4e-4, of S, Ge, Se and Li by
# 1.6e-4 at most, of all others by less.  One hydrogen too many in the heaviest component moves 2e-3.
differing() { # HOW
  printf '%s\n' "$ours" | "$python" -c '
import sys
from math import isclose
from periodictable import formula
how, path, count = sys.argv[1], sys.argv[2], 0
rows = [line.rstrip("\n").split("\t") for line in open(path) if line[0] != "#"]
weight = {row[0]: float(row[3]) for row in rows[1:]}
for line in sys.stdin:
    text, mass = line.split()
    count += 1
    read = formula(text)
    if how == "read":
        want, rel = sum(weight[str(a)] * n for a, n in read.atoms.items()), 1e-12
    else:
        want, rel = read.mass, 4e-4 if "Zn" in text else 1.7e-4
    if not isclose(float(mass), want, rel_tol=rel):
        print(f"{text}: {mass} g/mol, the library has {want}")
if count < 250:
    print(f"{count} lines, too few")
' "$1" "$top/tables/elements.tsv" 2>&1
}

for how in read weighed; do
  name="formulas as the library has them $how"
  if "$python" -c 'import periodictable' 2>/dev/null; then
    tell "$(differing "$how")" "$name"
  else
    skip "python3-periodictable is not installed" "$name"
  fi
done
finish
