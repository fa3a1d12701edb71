#!/bin/sh
# Requests for memory that fail, one run a request: the program ends as it says, whole answers are
# printed, and no file is spoilt or left lying about.  $EVERY=1 tries each request, else some.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
case $GASWRIGHT in
  /*) ;;
  *) GASWRIGHT=$PWD/$GASWRIGHT ;;
esac
demo=$top/tables/demo
source=$top/tests/shell/exhausted.c
shim=$work/exhausted.so
HOME=$work LC_ALL=C
export HOME LC_ALL
if nm -D "$GASWRIGHT" 2> /dev/null | grep -q __asan_init; then
  skip "built with its own malloc" "requests for memory fail in turn"
  finish
fi
if ! ${CC:-cc} -shared -fPIC -o "$shim" "$source" > "$work/said" 2>&1 \
   || ! LD_PRELOAD=$shim FAIL_COUNT=$work/count "$GASWRIGHT" -e '1 kg in g' > "$work/said" 2>&1 \
   || [ ! -s "$work/count" ]; then
  skip "no C library that can be stood before" "requests for memory fail in turn"
  finish
fi

cat > "$work/all.gw" << 'END'
gas lab from "digester.csv" sample "D-103" mol% dry
gas raw = lab normalised
wobbe of raw in MJ/m3
trend CH4 of raw in mol%
balance plant
  mix      dosing:    biogas + recycle = mixed
  separate membrane:  mixed = sweet + rich
  split    purge-tee: rich = vent + recycle
  known biogas = 850 ± 9 Nm3/h of (CH4 60, CO2 40 mol%)
  known CO2 of rich = 98 % of CO2 of mixed
  known vent = 50 % of rich
  known CH4 of sweet = 97.2 ± 0.2 mol%
  known sweet = 476 ± 5 Nm3/h
end
solve plant in kg/h
workings
show plant as picture "plant.svg"
sheet offer of air; inlet: 1057 ft3/min at 32 degC; duty: 1000 scfm; end
check offer
check 86 Nm3/h of CO2 against 160 kg/h
let lpg = 10 kg/h
stream grid = 100 Sm3/h of raw + lpg of C3H8
trim lpg so wobbe of grid = 30 MJ/m3
density of raw at 20 degC, 5 bar(g) in kg/m3
note "note.html"
note "note.md"
save "session.gw"
END

set_up() { # a folder with the files of a day before
  rm -rf "${work:?}/day" && mkdir "$work/day" && cp "$demo/digester.csv" "$work/day" \
    && for file in plant.svg note.html note.md session.gw; do echo old > "$work/day/$file"; done
}

set_up
(cd "$work/day" && LD_PRELOAD=$shim FAIL_COUNT=$work/count "$GASWRIGHT" "$work/all.gw" \
  > "$work/whole" 2> "$work/err") || cat "$work/err"
mv "$work/day" "$work/good"
requests=$(cat "$work/count")

# Runs with the request N failing, HOW: AT it or FROM it on; tells what is not as it should be.
trouble() { # HOW N
  set_up
  status=0
  (cd "$work/day" && env LD_PRELOAD="$shim" "FAIL_$1=$2" "$GASWRIGHT" "$work/all.gw" \
    > "$work/out" 2> "$work/err") || status=$?
  [ "$status" -le 1 ] || echo "$1 $2: status $status: $(head -c 300 "$work/err")"
  [ "$status" = 0 ] || [ -s "$work/err" ] || echo "$1 $2: nothing is said"
  for file in "$work/day"/* "$work/day"/.[!.]*; do
    name=${file##*/}
    case $name in
      digester.csv | '.[!.]*') ;;
      plant.svg | note.html | note.md | session.gw)
        echo old | cmp -s - "$file" || cmp -s "$work/good/$name" "$file" \
          || echo "$1 $2: $name is neither old nor new" ;;
      *) echo "$1 $2: $name is left" ;;
    esac
  done
  head -c "$(wc -c < "$work/out")" "$work/whole" | cmp -s - "$work/out" \
    || echo "$1 $2: what is printed is not the beginning of the answers"
}

if [ "${EVERY:-0}" = 1 ]; then stride=1; else stride=$((requests / 40 + 1)); fi
for how in FROM AT; do
  n=1
  while [ "$n" -le "$requests" ]; do
    trouble "$how" "$n"
    n=$((n + stride))
  done > "$work/troubles"
  tell "$(head -20 "$work/troubles")" "requests for memory that fail, $how one in $stride of $requests"
done
set_up
(cd "$work/day" && LD_PRELOAD=$shim FAIL_FROM=$((requests - 3)) "$GASWRIGHT" "$work/all.gw" \
  > "$work/out" 2> "$work/err")
tell "$(grep -q 'there is not enough memory' "$work/err" || echo "not said"
  grep -q MJ/m3 "$work/out" || echo "the answers before are lost")" \
  "what was answered before memory ran out is printed"
finish
