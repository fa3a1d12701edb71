#!/bin/sh
# Speed and memory of the program, run from the build folder: make bench
#
# Figures of a machine, not a test: the aims are printed beside them.
set -eu
program=${GASWRIGHT:-./gaswright}
measure=tests/bench/measure
equations=tests/bench/equations
networks=tests/bench/networks
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

# trims NAME DEFINITIONS TRIM...: time of one of them, each run a hundred times over
trims() {
  name=$1
  shift
  printf '%s\n' "$1" > "$work/defined"
  shift
  awk -v n=100 'BEGIN { while (n-- > 0) for (i = 1; i < ARGC; i++) print ARGV[i] }' "$@" \
    | cat "$work/defined" - > "$work/trims"
  # shellcheck disable=SC2046  # three words
  set -- $# $("$measure" 5 "$work/trims" "$program")
  row "$name" "$(awk -v n="$1" -v t="$2" -v s="$first" 'BEGIN { printf "%.3f", (t - s) / n / 100 }') ms" \
    "$trim_aim"
}
trim_aim="below 5 ms"
blend='gas base = CH4 95, CO2 3, N2 2 mol%
let dose = 10 Sm3/h; let inert = 10 Sm3/h
stream mix = 800 Sm3/h of base + dose of C3H8 + inert of N2'
trims "a trim of a blend to its wobbe" "$blend" \
  'trim dose so wobbe of mix = 52 MJ/m3' 'trim dose so wobbe of mix = 54 MJ/m3'
trim_aim=""
trims "a trim of two with a best" "$blend" \
  'trim dose, inert so wobbe of mix within 50 .. 51 MJ/m3, N2 of mix at most 3 mol% with least dose'\
  'trim dose, inert so wobbe of mix within 50 .. 51 MJ/m3, N2 of mix at most 3 mol% with most inert'

# Nothing explains these: all readings alone, two at a time, and what would have to be true instead.
checks=200
{
  echo 'gas sales = CH4 91, C2H6 4.3, C3H8 1.2, CO2 1.5, N2 1.2, nC4H10 0.5, iC4H10 0.3 mol%'
  echo 'stream line = 185_000 Nm3/h of sales at 38 degC, 60 bar(g), water 0.1 mol%'
  awk -v n="$checks" 'BEGIN {
    while (n-- > 0) print "check line in m3/h at 20 degC, 40 bar(g) against " 6000 + n ".37 m3/h" }'
} > "$work/checks"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 3 "$work/checks" "$program")
row "a check through GERG-2008" \
  "$(awk -v n="$checks" -v t="$1" -v s="$first" 'BEGIN { printf "%.2f", (t - s) / n }') ms" \
  "below 50 ms"
row "resident memory of $checks" "$3 kB" "does not grow with the input"
# A laboratory's file: read, scaled, and shown with calorific values; one figure of each asked.
samples=20000
awk -v n="$samples" 'BEGIN {
  srand(1)
  print "sample,date,CH4 [mol%],C2H6 [mol%],C3H8 [mol%],CO2 [mol%],N2 [mol%],O2 [mol%],H2S [ppm]"
  for (i = 1; i <= n; i++)
    printf "S-%d,2026-11-02,%.3f,%.3f,%.3f,%.3f,2.5,0.1,%.1f\n", i, 89 + 2 * rand(), 4 + rand(),
      1 + rand() / 5, 1.5 + rand() / 5, 10 * rand() }' > "$work/samples.csv"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 5 /dev/null "$program" -e "show samples of \"$work/samples.csv\" normalised")
row "a table of $samples samples, least" "$1 ms" "below 1000 ms"
row "resident memory of that" "$3 kB" ""
# shellcheck disable=SC2046  # three words
set -- $("$measure" 5 /dev/null "$program" \
  -e "gas lab from \"$work/samples.csv\" sample \"S-7\" normalised; trend wobbe of lab in MJ/m3")
row "a trend over $samples samples, least" "$1 ms" "below 1000 ms"

# Uncertain: 21 parts, the barometer, six figures of the flow, temperature and pressure.
answers=1000
cat > "$work/uncertain" << 'END'
gas g = CH4 80.0 +/- 0.1, N2 3.0 +/- 0.01, CO2 3.0 +/- 0.01, C2H6 4.0 +/- 0.01,
C3H8 2.0 +/- 0.01, iC4H10 0.5 +/- 0.01, nC4H10 0.5 +/- 0.01, iC5H12 0.2 +/- 0.01,
nC5H12 0.2 +/- 0.01, nC6H14 0.1 +/- 0.01, nC7H16 0.1 +/- 0.01, nC8H18 0.1 +/- 0.01,
nC9H20 0.1 +/- 0.01, nC10H22 0.1 +/- 0.01, H2 2.0 +/- 0.01, O2 0.5 +/- 0.01, CO 1.0 +/- 0.01,
H2O 0.1 +/- 0.01, H2S 0.5 +/- 0.01, He 1.0 +/- 0.01, Ar 1.0 +/- 0.01 mol%
set site pressure 1.01 +/- 0.002 bar
let a = 100 +/- 1; let b = 10 +/- 0.1; let c = 20 +/- 0.1; let d = 2 +/- 0.1; let e = 1 +/- 0.01; let f = 1 +/- 0.01
END
asked='((a + b + c + d) * e * f * (1 m3/h)) of g at 20 +/- 0.2 degC, 40 +/- 0.05 bar(g) in kg/h'
awk -v n="$answers" -v asked="$asked" 'BEGIN { while (n-- > 0) print asked }' \
  | cat "$work/uncertain" - > "$work/answers"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 5 "$work/answers" "$program")
row "30 uncertain inputs, GERG-2008" \
  "$(awk -v n="$answers" -v t="$1" -v s="$first" 'BEGIN { printf "%.3f", (t - s) / n }') ms" \
  "below 1 ms"
{
  cat "$work/uncertain"
  echo 'montecarlo 100000 wobbe of g'
} > "$work/trials"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 3 "$work/trials" "$program")
row "100000 trials of a wobbe, 21 parts" \
  "$(awk -v t="$1" -v s="$first" 'BEGIN { printf "%.0f", t - s }') ms" "about 1000 ms"

# network NAME AIM ARGUMENT...: what solving one takes
network() {
  name=$1
  aim=$2
  shift 2
  # shellcheck disable=SC2046  # five words
  set -- $("$networks" "$@")
  row "a network of $1 units$name" "$3 ms, $4 kB" "$aim"
}

network "" "below 5 ms" 3
network "" "below 50 ms" 33
network "" "below 500 ms" 333
network "" "below 5000 ms" 3333
network ", short by 3" "" 333 3
network " that clashes" "" 333 0 3 0.01
network ", 20 shares unknown" "below 100 ms" 33 0 0 0 20
network ", 20 shares from fractions" "" 33 0 0 0 20 20

# Both shares of every split, which add up to 100.2 %: they agree within their digits.
splits=150
awk -v n="$splits" 'BEGIN {
  print "balance line"
  for (i = 1; i <= n; i++)
    print "split t" i ": s" i - 1 " = s" i " + v" i "\nknown s" i " = 97 % of s" i - 1 "\nknown v" i \
      " = 3.2 % of s" i - 1
  print "known s0 = 850 kmol/h of (CH4 60, CO2 30, N2 10 mol%)\nend\nsolve line" }' > "$work/splits"
# shellcheck disable=SC2046  # three words
set -- $("$measure" 5 "$work/splits" "$program")
row "$splits splits typed coarsely" "$1 ms, $3 kB" "below 500 ms"

# typed WAY UNITS AIM: a balance read, solved and printed; see typed.awk
typed() {
  awk -v units="$2" -v way="$1" -f "$(dirname "$0")/typed.awk" > "$work/typed"
  # shellcheck disable=SC2046  # three words
  set -- "$@" $("$measure" 3 "$work/typed" "$program")
  row "$2 units typed, $1" "$4 ms, $6 kB" "$3"
  took=$4
  held=$6
}

# growth UNITS: of what was typed last over what took SHORT and SMALL with a hundredth of the units
growth() {
  row "  grows with the units to the power" \
    "$(awk -v a="$short" -v b="$took" 'BEGIN { printf "%.2f", log(b / a) / log(100) }')" \
    "1.2 at most"
  row "  memory a unit" \
    "$(awk -v a="$small" -v b="$held" -v n="$1" 'BEGIN { printf "%.1f", (b - a) / (0.99 * n) }') kB" \
    "does not grow"
}

# All six components.
typed known 10 "below 5 ms"
typed known 100 "below 50 ms"
short=$took small=$held
typed known 1000 "below 500 ms"
typed known 10000 "below 5000 ms"
growth 10000
typed spare 1000 "below 500 ms"
typed gas 10 "below 5 ms"
typed gas 100 "below 50 ms"
short=$took small=$held
typed gas 1000 "below 500 ms"
typed gas 10000 "below 5000 ms"
growth 10000
# One.
typed flows 100 "below 50 ms"
short=$took small=$held
typed flows 1000 "below 500 ms"
typed flows 10000 "below 5000 ms"
growth 10000
"$equations"
