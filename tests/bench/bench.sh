#!/bin/sh
# Speed and memory of the program, run from the build folder: make bench
#
# Figures of a machine, not a test: the aims are printed beside them.
set -eu
program=${GASWRIGHT:-./gaswright}
measure=tests/bench/measure
equations=tests/bench/equations
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT

row() { printf '%-34s %14s   %s\n' "$1" "$2" "$3"; }

# least, median, memory of TIMES runs
# shellcheck disable=SC2046  # three words
set -- $("$measure" 51 /dev/null "$program" -e '850 Nm3/h of air in kg/h')
row "start to first answer, median" "$2 ms" "below 10 ms"
row "resident memory of that" "$3 kB" "below 8192 kB"
first=$2

statements=100000
{
  echo 'gas raw = CH4 58.2, CO2 rest, N2 1.4, O2 0.4, H2S 850 ppm mol% dry'
  awk -v n="$statements" 'BEGIN { while (n-- > 0) print "850 Nm3/h of raw in kg/h" }'
} > "$work/many"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 3 "$work/many" "$program")
row "$statements statements, least" "$1 ms" ""
row "statements in a second" \
  "$(awk -v n="$statements" -v t="$1" -v s="$first" 'BEGIN { printf "%.0f", n / (t - s) * 1000 }')" \
  "200000 or more"
row "resident memory of that" "$3 kB" "does not grow with the input"
"$equations"
