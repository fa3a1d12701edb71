#!/bin/sh
# Files, standard input, -e, output and exit statuses, as a script sees them.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"

work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
case $GASWRIGHT in
  /*) ;;
  *) GASWRIGHT=$PWD/$GASWRIGHT ;;
esac
cd "$work" || exit 99
unset NO_COLOR
XDG_CONFIG_HOME=$work/config
export XDG_CONFIG_HOME

# runs STATUS NAME [ARGUMENT...]: the program, with its input from the file "in", must end so; what
# it says goes to "out" and "err".
runs() {
  want=$1
  name=$2
  shift 2
  "$GASWRIGHT" "$@" < in > out 2> err
  status=$?
  tell "$([ "$status" = "$want" ] || { echo "status $status, not $want"; cat err; })" "$name"
}

# has FILE TEXT NAME, lacks FILE TEXT NAME: is TEXT in the file?
has() { tell "$(grep -qF -e "$2" "$1" || { echo "no '$2' in $1:"; cat "$1"; })" "$3"; }
lacks() { tell "$(! grep -F -e "$2" "$1" || echo "'$2' is in $1")" "$3"; }
# is FILE TEXT NAME: is TEXT all there is in the file?
is() {
  printf '%s' "$2" > wanted
  tell "$(diff wanted "$1" 2>&1)" "$3"
}

: > in
good='12 kg in g'
bad='12 kg in zz'

# Ways in.
runs 0 "a statement of the command line" -e "$good"
has out "12000.0  g" "it is answered"
is err "" "nothing is said beside"
printf '%s\n' "$good" > in
runs 0 "statements from standard input"
has out "12000.0  g" "they are answered"
printf 'let a = 3 kg\n' > a.gw
printf 'a in g\r\n' > b.gw
runs 0 "files in their order, in one session" a.gw b.gw
has out "3000.00  g" "the second knows the names of the first; a line may end in CR LF"
printf 'a in mg' > in
runs 0 "standard input among the files; statements behind them" a.gw - --evaluate='a in t'
has out "3000000" "standard input stands where '-' does, its last line without an end"
has out "0.00300000  t" "-e runs after the files"
runs 0 "several -e run in their order" -e 'let c = 2 kg' -e 'c in g' -k
has out "2000.00  g" "the second knows the name of the first"
runs 0 "options may stand behind operands" a.gw -e 'a in g' --format csv
has out "statement,what," "they count"
cp a.gw ./-odd
runs 0 "'--' ends the options" -- -odd
: > in
runs 0 "nothing to do is no mistake"
is out "" "and says nothing"
runs 0 "an -e of nothing" -e '' -e '# a remark'
mkdir -p config/gaswright
echo 'let zz = 1 kg' > config/gaswright/init
runs 1 "the file of own settings counts at a prompt only" -e 'zz in g'
printf 'let a = 5 kg;\\\n a in g\n' > in
runs 0 "a line goes on behind a backslash"
has out "5000.00  g" "and is one line"
printf '1 kg in g\nquit\n%s\n' "$bad" > in
runs 0 "quit ends the run" - a.gw -e "$bad"
has out "1000.00  g" "what stood before it was answered"
: > in

# Mistakes.
runs 1 "a statement that fails" -e "$good" -e "$bad" -e "$good"
tell "$([ "$(grep -c 12000 out)" = 1 ] || cat out)" "the first mistake ends the run"
has err "-e:2:10: no unit is called 'zz'" "place and reason go to standard error"
runs 1 "a statement that fails, with --keep-going" -k -e "$bad" -e "$good"
has out 12000 "what follows is answered"
printf '%s\n\n%s\n' "$bad" "$good" > mixed.gw
runs 1 "a mistake in a file ends the run" mixed.gw a.gw -e "$good"
lacks out 12000 "nothing behind it ran"
has err "mixed.gw:1:10: no unit is called 'zz'" "the file is named"
runs 1 "a mistake in a file, with --keep-going" --keep-going mixed.gw
has out 12000 "the rest of the file ran"
runs 1 "a mistake inside a line, with --keep-going" -k -e "$bad; 13 kg in g"
has out 13000 "the rest of the line ran"
runs 1 "a mistake of another kind inside a line, with --keep-going" -k -e "zz in g; 13 kg in g"
has out 13000 "the rest of the line ran then too"
runs 1 "a mistake inside a line" -e "$bad; 13 kg in g"
lacks out 13000 "the rest of the line did not run"
runs 1 "a file that is not there" absent.gw -e "$good"
has err "gaswright: absent.gw cannot be used: there is no such file" "it is named"
lacks out 12000 "the run ends"
runs 1 "a file that is not there, with --keep-going" -k absent.gw -e "$good"
has out 12000 "the run goes on"
runs 1 "a folder is no file of statements" .
has err ". cannot be used: it is a folder" "that is said"
runs 1 "no tables where they shall be" --tables absent.gw -e "$good"
has err "absent.gw cannot be used" "that is said too"
printf '1 kg in g\n12 kg in \377\n' > in
runs 1 "text that is not UTF-8"
has err -:2: "its line is told"
: > in
runs 2 "an unknown option" --nonsense
has err "there is no option '--nonsense'" "it is named"
is out "" "and nothing goes to standard output"
runs 2 "an unknown letter" -x
has err "there is no option '-x'" "it is named"
runs 2 "an option without what it needs" -e
has err "--evaluate needs a STATEMENT" "that is said"
runs 2 "an option that takes nothing" --keep-going=yes
runs 2 "a form that does not exist" --format=xml
has err "--format cannot be 'xml'" "that is said"
runs 2 "a colour that does not exist" --color=red
runs 2 "rows are no option of this version" --rows a.csv

# A file without an end is not read for ever, nor one that fills the memory.
if [ -r /dev/zero ]; then
  runs 1 "a file of analyses that has no end" -e 'gas a from "/dev/zero"'
  has err "it is larger than 16 MB" "is refused"
  runs 1 "a file of statements that has none" -e 'open "/dev/zero"'
  has err "it is larger than 16 MB" "is refused too"
else
  skip "no /dev/zero" "a file of analyses that has no end"
fi

# Order, forms, colour.
"$GASWRIGHT" -k -e "$good" -e "$bad" -e '7 kg in g' > both 2>&1
order=$(awk '/12000/ { print "first" } /no unit/ { print "mistake" } /7000/ { print "second" }' both |
  tr '\n' ' ')
tell "$([ "$order" = "first mistake second " ] || cat both)" \
  "captured together, answers and mistakes stand in the order of the statements"
runs 1 "mistakes in JSON" -f json -k -e "$bad" -e "$good" absent.gw
is err "" "nothing goes to standard error"
has out '"kind":"unit-unknown"' "a mistake is an object on standard output"
has out '"line":1,"column":10' "with its place"
has out '"kind":"file","message":"absent.gw cannot be used' "a file that is not there is one too"
if command -v python3 > found; then
  tell "$(python3 -c 'import json, sys
for line in open("out"): json.loads(line)' 2>&1)" "every line is JSON"
else
  skip "no python3" "every line is JSON"
fi
runs 1 "mistakes in CSV" -f csv -k -e "$good" -e "$bad" -e "$good"
tell "$([ "$(grep -c '^statement,' out)" = 1 ] || cat out)" "the heading is written once"
has err "no unit is called" "mistakes go to standard error"
escape=$(printf '\033')
runs 0 "no colour where it ends in a file" -e "$good"
lacks out "$escape" "by itself"
runs 0 "colour where it is asked for" --color=always -e "$good"
has out "$escape" "even in a file"
runs 0 "no colour is no colour" --color=never -e "$good"
lacks out "$escape" "when it shall never be"

# Standard output that cannot be written.
if [ -w /dev/full ]; then
  for arguments in "-e 1kg" --help --version; do
    # shellcheck disable=SC2086  # two words
    "$GASWRIGHT" $arguments > /dev/full 2> err < in
    status=$?
    tell "$([ "$status" = 1 ] || echo "status $status")" "a full device: $arguments"
    has err "no space is left" "it is said: $arguments"
  done
  yes "$good" | head -n 20000 > in
  "$GASWRIGHT" -k > /dev/full 2> err < in
  tell "$([ "$(wc -l < err)" = 1 ] || head -n 3 err)" "it is said once, however long the run"
  : > in
else
  skip "no /dev/full" "a full device"
fi
"$GASWRIGHT" -e "$good" >&- 2> err
tell "$([ $? = 1 ] || echo "status $?")" "closed standard output"
has err "standard output cannot be written" "is said"
tell "$("$GASWRIGHT" a.gw <&- 2>&1 || echo failed)" "closed standard input does no harm to a file"
yes "$good" | "$GASWRIGHT" 2> err | head -n 1 > out
tell "$(cat err)" "whoever reads may leave early, and nothing is said"

# An output file.
echo old > result
runs 0 "an output file" -o result -e "$good"
has result 12000 "has the answers"
is out "" "standard output has none"
tell "$([ "$(find . -name '.result*' | wc -l)" = 0 ] || ls -a)" "nothing is left beside it"
runs 2 "an output file that is an input" -o ./a.gw a.gw
is a.gw "let a = 3 kg
" "is not touched"
ln -s a.gw link.gw
runs 2 "nor by another name" --output=a.gw link.gw
runs 1 "an output file where none can be" -o absent/result -e "$good"
chmod 640 result
runs 0 "an output file again" -o result -e "$good"
tell "$(find result ! -perm 640)" "keeps its rights"
runs 1 "the answers before a mistake are kept" -o result -e '9 kg in g' -e "$bad"
has result "9000.00" "in the output file"
echo old > real.gw
chmod 640 real.gw
ln -s real.gw kept.gw
runs 0 "a session is kept where a link leads" -e 'let a = 5' -e 'save "kept.gw"'
has real.gw "let a = 5" "in the file it leads to"
tell "$([ -h kept.gw ] || echo "a file of its own")$(find real.gw ! -perm 640)" "which stays, as do rights"
runs 1 "no session is kept where no file can be" -e 'save "absent/kept.gw"'

# Whoever gives statements one by one has its answers.
if mkfifo questions answers; then
  "$GASWRIGHT" < questions > answers &
  program=$!
  exec 7> questions 8< answers
  echo "$good" >&7
  IFS= read -r line <&8
  tell "$(case $line in *12000*) ;; *) echo "$line" ;; esac)" "an answer comes before the next question"
  kill -TERM "$program"
  exec 7>&-                             # whoever lost the signal ends too, and is found out
  wait "$program" 2> found
  status=$?
  tell "$([ "$status" = 143 ] || echo "status $status")" \
    "a signal to end has its usual status"
  exec 8<&-

  # Nobody reads: what does not fit in the pipe is waited for, until the signal comes.
  yes "$good" | head -n 20000 > many
  "$GASWRIGHT" -k many > answers 2> err &
  program=$!
  exec 8< answers
  sleep 0.3
  kill -TERM "$program"
  (sleep 20; kill -KILL "$program") > found 2>&1 &
  watch=$!
  wait "$program" 2> found
  status=$?
  tell "$([ "$status" = 143 ] || echo "status $status")" \
    "so has one while an answer waits for its reader"
  kill -KILL "$watch" 2> found
  exec 8<&-

  # Nobody writes: a pipe that is only opened.
  "$GASWRIGHT" questions > out 2> err &
  program=$!
  sleep 0.5
  kill -TERM "$program"
  exec 7<> questions
  exec 7>&-
  wait "$program" 2> found
  status=$?
  tell "$([ "$status" = 143 ] || echo "status $status")" \
    "and one before anybody writes"

  "$GASWRIGHT" -o result questions &
  program=$!
  exec 7> questions
  echo "77 kg in g" >&7
  tries=0
  until [ "$(find . -name '.result*' | wc -l)" = 1 ] || [ "$tries" = 100 ]; do
    tries=$((tries + 1))
    sleep 0.05
  done
  kill -TERM "$program"
  exec 7>&-
  wait "$program" 2> found
  has result "9000.00" "a run that is broken off leaves the old output file"
  tell "$(find . -name '.result*')" "and nothing beside it"
else
  skip "no pipes can be made" "an answer comes before the next question"
fi

# Help and version.
runs 0 "--help" --help
has out "Usage: gaswright [OPTION...] [FILE...]" "says how to call it"
tell "$(awk 'length($0) > 90' out)" "in lines that fit"
runs 0 "--version" -V
has out "GPL-3.0-or-later" "names the licence"
tell "$(grep -qE '^Data tables: edition [0-9a-f]{8}, ' out || cat out)" "and the edition of the tables"

# A locale with a decimal comma changes nothing; one without UTF-8 the printed signs alone.
if localedef -i de_DE -f UTF-8 "$work/de_DE.UTF-8" > found 2>&1 \
  && [ "$(LOCPATH=$work LC_ALL=de_DE.UTF-8 locale decimal_point 2> found)" = , ]; then
  runs 0 "a figure" -e '2.5 kg in g' -f text
  cp out plain
  LOCPATH=$work LC_ALL=de_DE.UTF-8 "$GASWRIGHT" -e '2.5 kg in g' > out 2>&1
  tell "$(diff plain out)" "reads and prints the same under a German locale"
else
  skip "no German locale can be made" "a figure reads and prints the same under a German locale"
fi
LC_ALL=C "$GASWRIGHT" -e '2 µg in ng' > out 2>&1
has out 2000 "signs outside ASCII are read in any locale"
tell "$(LC_ALL=C grep '[^ -~]' out)" "and not printed where they cannot be shown"
finish
