#!/bin/sh
# Files and functions stay small enough to be read, and look as the style asks.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
cd "$top" || exit 99

code=$(find src -name '*.c' | LC_ALL=C sort)
headers=$(find src -name '*.h' | LC_ALL=C sort)
tests=$(find tests -name '*.[ch]' | LC_ALL=C sort)

# Prints the files of more than $1 lines.
longer() {
  most=$1
  shift
  LC_ALL=C awk -v most="$most" '
    FNR == 1 && file != "" && lines > most { print file ": " lines " lines" }
    { file = FILENAME; lines = FNR }
    END { if (lines > most) print file ": " lines " lines" }' "$@" /dev/null
}

# Prints "FILE:LINE LENGTH DEPTH" for every function: the lines from its '{' to its '}', both in the
# first column, and the deepest block in it, counted by indentation of two.
functions() {
  LC_ALL=C awk '
    /^\{/ { start = FNR; deepest = 0; inside = 1; next }
    /^\}/ && inside { print FILENAME ":" start, FNR - start + 1, deepest; inside = 0; next }
    inside && /^ *(if|for|while|do|switch|else|\} else)[ ({].*\{$/ {
      match($0, /^ */)
      depth = RLENGTH / 2
      if (depth > deepest) deepest = depth
    }' "$@"
}

# shellcheck disable=SC2086  # no file of ours has a blank in its name
{
  tell "$(longer 600 $code)" "a .c file has at most 600 lines"
  tell "$(longer 250 $headers)" "a .h file has at most 250 lines"
  made=$(functions $code)
  tell "$(echo "$made" | awk '$2 > 80 { print $1 ": a function of " $2 " lines" }')" \
    "a function has at most 80 lines"
  tell "$(echo "$made" | awk '
    $2 >= 35 { long++; at = at "\n" $1 ": " $2 }
    END { if (long * 10 > NR) print long " of " NR " functions have 35 lines or more" at }')" \
    "nine functions in ten have under 35 lines"
  tell "$(echo "$made" | awk '$3 > 4 { print $1 ": blocks " $3 " deep" }')" \
    "blocks nest at most 4 deep"
  # Bytes that go on a character are not counted, as not every awk knows UTF-8.
  tell "$(LC_ALL=C awk '
    { line = $0; gsub(/[\200-\277]/, "", line) }
    length(line) > 100 { print FILENAME ":" FNR ": " length(line) " characters" }' \
    $code $headers $tests)" "a line has at most 100 characters"
  tell "$(grep -nE '	| $' $code $headers $tests)" "no tab and no blank at the end of a line"
  tell "$(for file in $code; do
    sed '/^ *$/d; /^#include/q' "$file" | grep -q '^#include "config.h"$' || echo "$file"
  done)" "every .c file includes config.h first"
  tell "$(for file in $headers; do
    guard=$(echo "${file#src/}" | tr 'a-z/.' 'A-Z__')
    grep -q "^#ifndef $guard\$" "$file" || echo "$file: no guard $guard"
  done)" "every header has the guard of its name"
  tell "$(grep -nE 'TO''DO|FIX''ME|XX''X|HA''CK|not imple''mented' $code $headers)" \
    "nothing is left unfinished"
}

# Nothing below the shell prints, exits, or asks clock, environment or locale.
below=$(find src -name '*.c' ! -path 'src/shell/*' | LC_ALL=C sort)
# shellcheck disable=SC2086
tell "$(grep -nE '(^|[^a-z_A-Z0-9])(printf|fprintf|puts|putchar|exit|getenv|setlocale|time|clock_gettime|localtime)[ ]?\(' \
  $below)" "nothing below the shell prints, exits or looks around"

# No variable that changes is shared between functions: no static or plain definition at file level
# that lacks const.
# shellcheck disable=SC2086
tell "$(grep -nE '^static [^(]*(;|=|\{)$|^static [^(]*=.*;$' $below | grep -v 'const' \
  | grep -vE ':static (inline )?[a-z_ ]*\*?[a-z_]+ \(')" "no shared variable changes below the shell"

# Every source file is built and every test is run.
tell "$(for file in src/*/*.[ch] src/*/*.def src/*/*/*.[ch]; do
  [ -e "$file" ] || continue
  layer=$(echo "$file" | cut -d/ -f2)
  grep -qE "(%D%|src/$layer)/${file#src/"$layer"/}( |\$)" "src/$layer/files.mk" || echo "$file"
done)" "every source file stands in its layer's files.mk"
tell "$(for file in tests/modules/*/t_*.c; do
  [ -e "$file" ] || continue
  name=$(basename "$file" .c)
  grep -qE "^suites \+= .*%D%/$name( |\$)|^ *%D%/$name( |\$)" "$(dirname "$file")/files.mk" \
    || echo "$file"
done)" "every suite stands in its files.mk"
tell "$(for file in tests/*.sh tests/*/*.sh; do
  case $file in tests/run.sh | tests/tap.sh | tests/bench/* | *\*) continue ;; esac
  grep -qE "%D%/(${file#tests/}|${file##*/})( |\$)" tests/files.mk "${file%/*}/files.mk" \
    2> /dev/null || echo "$file"
done)" "every test in shell stands in a files.mk"
finish
