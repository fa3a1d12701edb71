#!/bin/sh
# The tables of facts have their form, and a table that has not stops the build.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
cd "$top" || exit 99
awk=${AWK:-awk}

embed() { LC_ALL=C "$awk" -f src/support/rows.awk -f src/support/embed.awk "$@"; }

# What the program says of the table $1 (in printf's notation) must be $2.
refuses() {
  mkdir -p "$work/tables"
  # shellcheck disable=SC2059  # the table is the format
  printf "$1" > "$work/tables/try.tsv"
  said=$(cd "$work" && LC_ALL=C "$awk" -f "$top/src/support/rows.awk" \
         -f "$top/src/support/embed.awk" tables/try.tsv 2>&1 >/dev/null)
  status=$?
  tell "$([ "$status" != 0 ] && [ "$said" = "$2" ] || echo "status $status: $said")" "refused: $2"
}

tell "$(embed tables/*.tsv 2>&1 >/dev/null)" "every table can be embedded"

refuses 'name\tsource\na\tx\nb\t\n' 'tables/try.tsv:3: no source'
refuses 'name\tsource\na\tx\nb\t  \n' 'tables/try.tsv:3: no source'
refuses '# remark\nname\tvalue\tsource\na\t1\tx\nb\tx\n' \
  'tables/try.tsv:4: 2 columns where there are 3'
refuses 'name\tsource\nb\tx\na\tx\n' "tables/try.tsv:3: 'a' stands behind 'b'"
refuses 'name\tsource\n10\tx\n9\tx\n8\tx\n' "tables/try.tsv:4: '8' stands behind '9'"
refuses 'name\tsource\na\tx\na\tx\n' "tables/try.tsv:3: a second row for 'a'"
refuses '# order: as written\nname\tsource\nb\tx\na\tx\nb\tx\n' \
  "tables/try.tsv:5: a second row for 'b'"
refuses 'name\tsource\n\tx\n' 'tables/try.tsv:2: no key in the first column'
refuses 'name\tvalue\na\t1\n' "tables/try.tsv:1: the last column is not 'source'"
refuses 'name\tsource\r\na\tx\r\n' 'tables/try.tsv:1: the line ends in a carriage return'
refuses '# nothing\n' 'tables/try.tsv:1: no line names the columns'

tell "$(printf '# order: as written\nname\tsource\nb\tx\na\tx\n' > "$work/tables/try.tsv"
  embed "$work/tables/try.tsv" 2>&1 >/dev/null)" "a table may keep the order it is written in"

tell "$(LC_ALL=C awk '
  { line = $0 } gsub(/[\001-\010\013-\037\177]/, "", line) { print FILENAME ":" FNR ": a control character" }
  ' tables/*.tsv)" "no control characters in tables"
tell "$(for file in tables/*.tsv; do
  iconv -f UTF-8 -t UTF-8 "$file" > /dev/null 2>&1 || echo "$file"
done)" "every table is UTF-8"
tell "$(for file in tables/*.tsv tables/demo/*; do
  [ -e "$file" ] || continue
  grep -qE "%D%/${file#tables/}( |\$)" tables/files.mk || echo "$file"
done)" "every table stands in tables/files.mk"

# Messages: what the code can say and what the table says are the same.
tell "$(LC_ALL=C awk -F '\t' '!/^#/ && $1 != "kind" {
    kind = toupper($1); gsub(/-/, "_", kind); print "MESSAGE_" kind }' tables/messages.tsv |
  while read -r kind; do
    grep -rqE "(^|[^A-Z_])$kind([^A-Z_]|\$)" src --include='*.[ch]' --include='*.def' || echo "$kind"
  done)" "every kind of message is used in src"
tell "$(LC_ALL=C awk -F '\t' '!/^#/ && ($3 $4) ~ /\{([^1-4]|[1-4][^}])/ {
    print FILENAME ":" FNR ": " $3 " / " $4 }' tables/messages.tsv)" "places for facts are {1} to {4}"
tell "$(LC_ALL=C awk -F '\t' '!/^#/ && $2 == "error" && $3 ~ /(syntax error|invalid)/ {
    print FILENAME ":" FNR ": " $3 }' tables/messages.tsv)" "errors are in the words of the trade"
# Readings: what every row must have; that its change can be read, a suite tells.
tell "$(LC_ALL=C awk -F '\t' '!/^#/ && $1 != "reading" {
    if ($4 !~ /^(computed|stated|either|both)$/) print FILENAME ":" FNR ": side " $4
    if ($5 !~ /^[123]$/) print FILENAME ":" FNR ": cost " $5
    if ($3 ~ /^unit / && $2 !~ /\{2\}/) print FILENAME ":" FNR ": does not say the unit"
    if (split($3, words, " ") < 1 || $2 == "") print FILENAME ":" FNR ": says or changes nothing"
  }' tables/readings.tsv)" "every reading has a side, a cost and a sentence"
finish
