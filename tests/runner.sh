#!/bin/sh
# The runner of the suites in C tells good cases from bad ones, and its own trouble from both.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"

# gives STATUS NAME [OPERAND...]: the runner must end with STATUS.
gives() {
  want=$1
  name=$2
  shift 2
  said=$(tests/runner "$@" 2>&1)
  status=$?
  tell "$([ "$status" = "$want" ] || echo "status $status, not $want:
$said")" "$name"
}

# shows LINE NAME: a line of what the runner said last must be LINE.
shows() {
  tell "$(printf '%s\n' "$said" | grep -qxF -e "$1" || printf 'no line "%s" in\n%s\n' "$1" "$said")" \
    "$2"
}

if [ ! -x tests/runner ]; then
  skip "CUnit is not there" "the runner"
  finish
fi

gives 0 "a good case alone" good
shows "ok 1 - good" "a good case is told as good"
shows "1..1" "the plan is told"

for case in condition "far off" "no number" "other text" "null text" "other int" leaves nothing \
    "no file"; do
  gives 1 "fails: $case" "$case"
  shows "not ok 1 - $case" "is told as failed: $case"
done

gives 1 "all cases, without operands"
shows "1..10" "all are planned"
shows "ok 1 - good" "one is good"
tell "$([ "$(printf '%s\n' "$said" | grep -c '^not ok')" = 9 ] || echo "$said")" "nine have failed"
tell "$([ "$(printf '%s\n' "$said" | grep -c '^ok')" = 1 ] || echo "$said")" \
  "a text with a line that looks like a result is no result"

gives 1 "a case with a label" "far off"
tell "$(printf '%s\n' "$said" | grep -q '^#  *in seed 41$' || echo "$said")" "the label is told"

gives 99 "a name that is no case" nonsense
gives 99 "two cases of one name" --twice
gives 99 "a suite without cases" --none
gives 0 "the list" -l
tell "$([ "$(printf '%s\n' "$said" | wc -l)" = 10 ] || echo "$said")" "the list has every case"
finish
