#!/bin/sh
# Every form of every hand-made result and fault is what golden/ says, in any locale; what is meant
# for machines reads as what it claims to be.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"

render=tests/renderings/render
golden=$top/tests/renderings/golden
work=tests/renderings/work.$$
mkdir -p "$work" || exit 99
trap 'rm -rf "$work"' EXIT

# Prints how the output of a case in a form differs from what it should be.
difference() {
  "$render" "$1" "$2" > "$work/$1.$2" || echo "render $1 $2 failed"
  diff "$golden/$1.$2" "$work/$1.$2" 2>&1
}

cases=$("$render" -l | tr ' ' '.') || exit 99
for case in $cases; do
  tell "$(difference "${case%.*}" "${case##*.}")" "$case is as it should be"
done

tell "$(for file in "$golden"/*; do
  echo "$cases" | grep -qxF "${file##*/}" || echo "${file##*/} belongs to no case"
done)" "every golden file belongs to a case"

tell "$(LC_ALL=C grep -l '[^ -~]' "$work"/*.text)" "text without a UTF-8 locale is plain ASCII"
tell "$(LC_ALL=C grep -n ' $' "$work"/*.text "$work"/*.prompt)" "no line ends in blanks"
tell "$(LC_ALL=C grep -l "$(printf '\033')" "$work"/*.text "$work"/*.prompt)" \
  "nothing steers the terminal"

if command -v python3 > "$work/python"; then
  tell "$(python3 "$top/tests/renderings/machine.py" "$work"/*.json "$work"/*.csv 2>&1)" \
    "JSON and CSV read as such, with the members that were promised"
else
  skip "no python3" "JSON and CSV read as such, with the members that were promised"
fi

# A locale with a decimal comma, made here unless the machine has none to make it from.
if localedef -i de_DE -f UTF-8 "$PWD/$work/de_DE.UTF-8" > "$work/localedef" 2>&1 \
  && [ "$(LOCPATH=$PWD/$work LC_ALL=de_DE.UTF-8 locale decimal_point 2>/dev/null)" = , ]; then
  tell "$(LOCPATH=$PWD/$work LC_ALL=de_DE.UTF-8
    export LOCPATH LC_ALL
    for case in $cases; do difference "${case%.*}" "${case##*.}"; done)" \
    "a decimal comma in the locale changes nothing"
else
  skip "no German locale can be made" "a decimal comma in the locale changes nothing"
fi
finish
