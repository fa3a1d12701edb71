#!/bin/sh
# What the help, the manual pages and the README show runs, and prints what they say it prints.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"
work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
here=$top/tests/documents
awk=${AWK:-awk}
cd "$work" || exit 99
cp "$top"/tables/demo/* . || exit 99
# Whose own settings must not count.
HOME=$work
PATH=$work/bin:$PATH
export HOME PATH
mkdir bin && ln -s "$GASWRIGHT" bin/gaswright || exit 99

# Prints what goes wrong when the statements of file $1 are run behind the preamble.
fails() {
  cat "$here/preamble.gw" "$1" | "$GASWRIGHT" > out 2>&1 && return
  cat "$1" out
}

# ---- The pages of help ----

LC_ALL=C "$awk" -f "$top/man/topics.awk" "$top/src/language/topics.def" > topics
tell "$([ "$(wc -l < topics)" -gt 80 ] || echo "only $(wc -l < topics) entries")" \
  "topics.def can be read"
tell "$(cut -f 4 topics > lines
  : > shift.gw
  while IFS= read -r line; do
    printf '%s\n' "$line" > try.gw
    fails try.gw
  done < lines)" "every line the help offers runs"
tell "$(cut -f 1 topics | uniq | sort | uniq -d)" "entries of a topic stand together"
tell "$(cut -f 1 topics | uniq -c | awk '$1 < 2 || $1 > 6 { print $2 " has " $1 " entries" }')" \
  "a topic has 2 to 6 entries"
tell "$(awk -F '\t' '{ for (i = 2; i <= 4; i++) if (length($i) > 94) print $1 ": " $i }' topics)" \
  "no line of help is wider than a screen of 100"

# A topic for each word that opens a statement, or a word in the page that it does not run yet.
sed -n '/^\.SH .*NOT YET/,/^\.SH [^W]/p' "$top/man/gaswright.7" > not_yet
tell "$([ -s not_yet ] || echo "no such section"
  sed -n 's/^STATEMENT ([A-Z]*, "\([a-z]*\)".*/\1/p' "$top/src/language/statements.def" |
  while read -r word; do
    grep -q "^$word	" topics || grep -qw "$word" not_yet || echo "$word"
  done)" "every statement has a topic, or gaswright.7 says that it does not run yet"
tell "$(cut -f 1 topics | uniq | while read -r topic; do
  "$GASWRIGHT" -e "help $topic" > out 2>&1 || cat out
  grep -q '^get' out || echo "help $topic explains nothing"
done)" "'help' prints every topic"

# ---- gaswright.7 ----

# Whatever stands for a sign in the page as that sign.
plain() {
  sed 's/\\-/-/g; s/\\(aq/'\''/g; s/\\(dq/"/g; s/\\(ti/~/g; s/\\(ha/^/g; s/\\(+-/±/g; s/^\\&//; s/\\e/\\/g' "$1"
}

tell "$(LC_ALL=C "$awk" -f "$top/man/topics.awk" "$top/src/language/topics.def" \
  "$top/man/gaswright.7" | diff "$top/man/gaswright.7" - )" \
  "gaswright.7 has the pages of help (man/topics.awk renews them)"
tell "$(plain "$top/man/gaswright.7" | awk '/^\.\\" topics: begin/ { skip = 1 }
    /^\.\\" topics: end/ { skip = 0 } !skip' > page
  awk '/^\.EX/ { n++; inside = 1; name = "block" n; printf "" > name; next }
    /^\.EE/ { inside = 0; close(name); next } inside { print > name }' page
  for block in block*; do
    grep -q '^> ' "$block" || fails "$block"
    rm -f "$block"
  done)" "the examples of gaswright.7 run"
tell "$(LC_ALL=C "$awk" -v begin='.EX' -v end='.EE' -v roff=1 -f "$here/replay.awk" \
  "$top/man/gaswright.7" | diff "$top/man/gaswright.7" -)" "the sessions in gaswright.7 are what is printed"
tell "$(for list in settings properties; do
  sed -n 's/^[A-Z]* ([A-Z_0-9]*, "\([^"]*\)".*/\1/p' "$top/src/language/$list.def"
done | grep -vx composition | while read -r word; do
  grep -qF "$word" page || echo "$word"
done)" "gaswright.7 names every setting and property"

# ---- gaswright.1 ----

tell "$(plain "$top/man/gaswright.1" |
    awk '/^\.EX/ { inside = 1; next } /^\.EE/ { inside = 0; next } inside' > commands
  while IFS= read -r line; do
    eval "$line" > out 2>&1 < /dev/null || { echo "$line"; cat out; }
  done < commands
  [ -s commands ] || echo "no examples")" "the commands in gaswright.1 run"

# ---- gaswright-tables.5 ----

tell "$(for table in "$top"/tables/*.tsv; do
  grep -qF "${table##*/}" "$top/man/gaswright-tables.5" || echo "${table##*/}"
  LC_ALL=C awk -F '\t' '!/^#/ { for (i = 1; i <= NF; i++) print $i; exit }' "$table" |
    while read -r column; do
      plain "$top/man/gaswright-tables.5" | grep -qF "$column" ||
        echo "${table##*/}: column $column"
    done
done)" "gaswright-tables.5 names every table and column"

plain "$top/man/gaswright-tables.5" > page
mkdir -p tables
tell "$(awk '/^\.EX/ { n++ } /^\.EE/ { exit } n == 1 && !/^\.EX/' page > tables/references.tsv
  grep '^gaswright ' page > try.sh
  [ "$(wc -l < try.sh)" -eq 1 ] || cat try.sh
  sh try.sh > out 2>&1 || cat out
  grep -q '15 degC, 1 bar(a)' out || cat out)" "the table in gaswright-tables.5 is read"

# ---- README.md and the demo ----

tell "$(LC_ALL=C "$awk" -v begin='```gaswright' -v end='```' -f "$here/replay.awk" "$top/README.md" |
  diff "$top/README.md" -)" "the sessions in README.md are what is printed"
tell "$([ "$(grep -c '^```gaswright' "$top/README.md")" -ge 6 ] || echo "too few")" \
  "README.md has its sessions"
for demo in header morning upgrading week; do
  tell "$(LC_ALL=C.UTF-8 "$GASWRIGHT" $demo.gw > $demo.out 2> $demo.err || echo "exit status $?"
    cat $demo.err
    diff "$here/$demo.golden" $demo.out)" "the $demo at Larkmoor Works prints its answers"
  tell "$("$GASWRIGHT" --format json $demo.gw > $demo.json || echo "exit status $?"
    [ -s $demo.json ] || echo "nothing printed")" "the $demo runs in JSON"
done

tell "$(for quarrel in "$top"/tables/demo/quarrel_*.gw; do
    cp "$quarrel" . && "$GASWRIGHT" "${quarrel##*/}" || echo "exit status $?"
  done 2>&1 | diff "$here/quarrels.golden" -)" "the quarrels at Larkmoor Works end in their verdicts"
tell "$(for note in blower controller lpg permit; do
    grep -q 'Checked by' "$note.html" || echo "$note.html"
  done
  grep -q 'stands alone' blower.html || echo "no figure of the sheet in blower.html")" \
  "each files its note"
tell "$(for quarrel in quarrel_*.gw; do
    "$GASWRIGHT" "$quarrel" | awk -v name="$quarrel" '
      / READINGS? FITS? | HOLDS | NOTHING EXPLAINS IT / { lines = over = 0; seen = 1 }
      /^$/ { over = 1 } !over { lines++ }
      END { if (!seen || lines > 20) print name ": " lines " lines, verdict " seen + 0 }'
  done)" "each verdict takes one screen"

if command -v python3 > out 2>&1; then
  tell "$(PYTHONDONTWRITEBYTECODE=1 python3 "$here/morning.py" "$top" morning.json > said 2>&1 ||
    { echo "it failed"; grep -v '^ok' said; }
  grep -q '^ok' said || echo "nothing compared")" \
    "the morning's figures are those worked out apart from the program"
else
  skip "no python3" "the morning's figures are those worked out apart from the program"
fi

if command -v python3 > out 2>&1; then
  tell "$(PYTHONDONTWRITEBYTECODE=1 python3 "$here/demo_balances.py" upgrading.json header.json \
    > said 2>&1 || { echo "it failed"; grep -v '^ok' said; }
  grep -q '^ok' said || echo "nothing compared")" \
    "the demo's balances are those worked out apart from the program"
else
  skip "no python3" "the demo's balances are those worked out apart from the program"
fi
tell "$(for demo in header upgrading; do
    lines=$(wc -l < $demo.out)
    { [ "$lines" -ge 24 ] && [ "$lines" -le 40 ]; } || echo "$demo: $lines lines"
    [ -s $demo.svg ] || echo "$demo: no picture"
  done)" "each balance takes one screen and draws its picture"

# ---- DEVELOPERS.md ----

tell "$(while read -r layer; do
  grep -q "^\*\*$layer\*\* " "$top/DEVELOPERS.md" || echo "$layer"
done < "$top/src/layers")" "DEVELOPERS.md has a paragraph for each layer"
# shellcheck disable=SC2016  # the marks of a name, no command
tell "$(grep -o '`[a-z.][A-Za-z_./-]*/[A-Za-z_./-]*[a-z]`' "$top/DEVELOPERS.md" | tr -d '`' | grep -v NAME |
  while read -r name; do
    [ -e "$top/$name" ] || [ -e "$top/src/$name" ] || [ -e "$top/src/language/$name" ] ||
      [ "$name" = .ci/run ] || echo "$name"
  done)" "the files DEVELOPERS.md names exist"

# ---- Form ----

if command -v "${MANDOC:-mandoc}" > out 2>&1; then
  tell "$("${MANDOC:-mandoc}" -T lint -W warning "$top"/man/*.[1-9] 2>&1)" \
    "the manual pages have their form"
else
  skip "no mandoc" "the manual pages have their form"
fi
finish
