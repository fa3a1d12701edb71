#!/bin/sh
# Builds gaswright in a scratch folder and runs its tests: sh tests/run.sh [TEST...]
#
# The source tree is only read.  TEST is a name as in `make check TESTS=...`, for example
# tests/modules/units/t_unit; without one, all run.  The last line is the count.
set -u
umask 022

here=$(cd "$(dirname "$0")" && pwd -P) || exit 1
top=$(dirname "$here")
# shellcheck source=src/house.sh
. "$top/src/house.sh"

# Ends with the count when there is nothing to count.
give_up() {
  say "$1"
  echo "0 passed, 1 failed"
  exit 1
}

need_for_build
must_have=$needed
need_for_prompt
need_for_tests
need_for_references
install_needed || [ -z "$must_have" ] || give_up "the tests cannot be built"

scratch=$(mktemp -d /tmp/gaswright-tests.XXXXXX) || give_up "no scratch folder"
trap 'rm -rf "$scratch"' EXIT
trap 'exit 1' HUP INT TERM

mirror "$top" "$scratch/source" || give_up "cannot copy the source"
build "$scratch/source" "$scratch/build" || give_up "the build failed"
cd "$scratch/build" || exit 1

if [ $# -gt 0 ]; then
  make -k -j"$(processors)" check TESTS="$*" < /dev/null > check.log 2>&1
else
  make -k -j"$(processors)" check < /dev/null > check.log 2>&1
fi
status=$?

# What automake's harness wrote down for each test: one line a result.
find tests -name '*.trs' | LC_ALL=C sort > results
# A suite with a failed case also ends with an error; that is counted only where no case failed.
# shellcheck disable=SC2016  # the program is for awk
count() {
  tr '\n' '\0' < results | xargs -0 -n 1 awk -v want="^($1)\$" '
    $1 == ":test-result:" { result[++n] = $2; if ($2 == "FAIL") failed = 1 }
    END {
      for (i = 1; i <= n; i++)
        if (result[i] ~ want && !(failed && result[i] == "ERROR")) print
    }' | wc -l
}
passed=$(count 'PASS|XFAIL')
failed=$(count 'FAIL|XPASS|ERROR')
skipped=$(count 'SKIP')

# The bad results with the remarks behind them, and what was skipped.
while IFS= read -r result; do
  log=${result%.trs}.log
  if grep -qE '^:test-result: (FAIL|XPASS|ERROR)' "$result"; then
    echo "== ${result%.trs}"
    awk '/^(PASS|FAIL|SKIP|XFAIL|XPASS|ERROR): / { next }
      /^not ok/ { show = 1 } /^(ok|1\.\.)/ { show = 0 } /^Bail out/ { print } show' "$log"
    if ! grep -q '^not ok' "$log"; then tail -n 30 "$log"; fi
  elif grep -q '^:test-result: SKIP' "$result"; then
    grep -E '^ok .*# SKIP|^1\.\.0' "$log" | sed "s|^|${result%.trs}: |"
  fi
done < results

if [ "$status" -ne 0 ] && [ "$failed" -eq 0 ]; then
  tail -n 40 check.log
  failed=1
fi
if [ "$skipped" -gt 0 ]; then
  echo "$passed passed, $failed failed, $skipped skipped"
else
  echo "$passed passed, $failed failed"
fi
[ "$failed" -eq 0 ] && [ "$passed" -gt 0 ]
