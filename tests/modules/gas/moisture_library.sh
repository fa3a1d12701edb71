#!/bin/sh
# Saturation pressures of water against the same equations in python3-iapws.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
python=${PYTHON:-/usr/bin/python3}
printer=${PRINT_PRESSURES:-./tests/modules/gas/print_pressures}
ours=$("$printer") || { echo "Bail out! $printer does not run"; exit 99; }

# Lines of OURS of a phase that the library gives otherwise, by more than rounding.
differing() { # PHASE
  printf '%s\n' "$ours" | "$python" -c '
import sys
from math import isclose
from iapws._iapws import _Sublimation_Pressure
from iapws.iapws95 import IAPWS95
phase, count = sys.argv[1], 0
for line in sys.stdin:
    name, T, p = line.split()
    T, p = float(T), float(p)
    if name != phase:
        continue
    count += 1
    want = 1e6 * (_Sublimation_Pressure(T) if phase == "ice" else IAPWS95._Vapor_Pressure(T))
    if not isclose(p, want, rel_tol=1e-12):
        print(f"{phase} at {T} K: {p} Pa, the library has {want} Pa")
if count != 250:
    print(f"{count} lines of 250")
' "$1" 2>&1
}

for phase in ice liquid; do
  name="water over $phase as the library has it"
  if "$python" -c 'import iapws' 2>/dev/null; then
    tell "$(differing "$phase")" "$name"
  else
    skip "python3-iapws is not installed" "$name"
  fi
done
finish
