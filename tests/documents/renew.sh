#!/bin/sh
# Writes the documents anew after a change of what the program prints: the sessions in README.md and
# gaswright.7, the pages of help in gaswright.7, and what the demo prints.  Read the difference
# before it is committed: this makes the test pass, not the program right.
#
#   GASWRIGHT=/path/to/gaswright sh tests/documents/renew.sh
set -eu
LC_ALL=C.UTF-8
export LC_ALL
here=$(cd "$(dirname "$0")" && pwd -P)
top=${here%/tests/documents}
awk=${AWK:-awk}
work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
cd "$work"

# replay DOCUMENT BEGIN END [OPTION...]
replay() {
  document=$1 begin=$2 end=$3
  shift 3
  LC_ALL=C "$awk" -v begin="$begin" -v end="$end" "$@" -f "$here/replay.awk" "$document" > new
  cat new > "$document"
}

cp "$top"/tables/demo/* .
LC_ALL=C "$awk" -f "$top/man/topics.awk" "$top/src/language/topics.def" "$top/man/gaswright.7" > page
cat page > "$top/man/gaswright.7"
replay "$top/man/gaswright.7" .EX .EE -v roff=1
replay "$top/README.md" '```gaswright' '```'
for demo in header morning upgrading week; do
  "$GASWRIGHT" $demo.gw > $demo.out
  cat $demo.out > "$here/$demo.golden"
done
for quarrel in "$top"/tables/demo/quarrel_*.gw; do
  cp "$quarrel" .
  "$GASWRIGHT" "${quarrel##*/}"
done > quarrels.out
cat quarrels.out > "$here/quarrels.golden"
