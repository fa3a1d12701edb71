#!/bin/sh
# The prompt, through a pseudo-terminal: what is typed, what the screen shows.
set -u
# shellcheck source=tests/tap.sh
. "${srcdir:-.}/tests/tap.sh"

typist=$PWD/tests/shell/typist
work=$(mktemp -d) || exit 99
trap 'rm -rf "$work"' EXIT
case $GASWRIGHT in
  /*) ;;
  *) GASWRIGHT=$PWD/$GASWRIGHT ;;
esac
cd "$work" || exit 99
# No settings of the user, a terminal known everywhere, and what leaks at the end is not asked for:
# the library keeps memory of its own.
HOME=$work TERM=vt100 INPUTRC=/dev/null PAGER='sed s/^/paged:/'
XDG_CONFIG_HOME=$work/config XDG_STATE_HOME=$work/state
ASAN_OPTIONS=${ASAN_OPTIONS:-exitcode=99}:detect_leaks=0
export HOME TERM INPUTRC PAGER XDG_CONFIG_HOME XDG_STATE_HOME ASAN_OPTIONS
unset NO_COLOR
history=$work/state/gaswright/history

# plays NAME [ARGUMENT...] < STEPS: each step must go well.  $screen is the size.
screen=24x80
plays() {
  name=$1
  shift
  tell "$("$typist" -s "$screen" "$GASWRIGHT" "$@" 2>&1 || echo "status $?")" "$name"
}

if "$GASWRIGHT" --help > out 2>&1 && ! ldd "$GASWRIGHT" 2> out | grep -q libreadline; then
  plays "a plain prompt" << 'END'
see gaswright
see gas | 
type 12 kg in g\r
see 12000.0  g
see gas | 
type 12 kg \\\r
see     | 
type in mg\r
see 12000000
see gas | 
type 12 kg in\x03
see gas | 
type 7 kg in zz\r
see         '
see error: no unit is called 'zz'
see | 
type \x04
end 0
END
  finish
fi

plays "a block has a rail of its own, keeps what is right, and Ctrl-C drops it" << 'END'
see gas | 
type sheet offer of air\r
see    || 
type inlet: 1057 ft3/min at 32 degC\r
see    || 
type 3 kg\r
see error: one is a flow and another an amount
see    || 
type duty: 1000 scfm\r
see    || 
type end\r
see gas | 
type check offer\r
see 2 OF 2 AGREE
see gas | 
type sheet other of air\r
see    || 
type \x03
see gas | 
type list\r
see offer
see gas | 
type \x04
end 0
END

plays "an end that fails costs one line and no more; undo takes lines back" << 'END'
see gas | 
type let kept = 3 kg/h\r
see gas | 
type balance tee\r
see    || 
type split fork: main = east + west\r
see    || 
type known mein = 7 kg/h\r
see    || 
type help known\r
see _/ known
see    || 
type end\r
see known mein = 7 kg/h
see error: the balance has nothing called 'mein'
see note: tee stays open, without that line: type it anew
see    || 
type known main = 7 kg/h\r
see    || 
type known west = 5 kg/h\r
see    || 
type undo\r
see note: taken back: known west = 5 kg/h
see    || 
type known east = 3 kg/h\r
see    || 
type end\r
see gas | 
type solve in kg/h\r
see west .....   4.00000
see gas | 
type balance tin\r
see    || 
type undo\r
see note: taken back: balance tin
see gas | 
type note "open.md"\r
see written
see gas | 
type \x04
end 0
END
sed -n 's/^    //p' open.md > open.gw
tell "$(printf '%s\n' 'let kept = 3 kg/h' 'balance tee' 'split fork: main = east + west' \
        'known main = 7 kg/h' 'known east = 3 kg/h' 'end' 'solve in kg/h' | diff - open.gw)" \
  "a note has the lines that were taken, and can be run again"

plays "opening line, prompt, answer, end of input" << 'END'
see gaswright 0.1   barometer 1.01325 bar (standard)   volumes ideal-gas   F1 help\n\ngas | 
type 12 kg in g\r
see 12 kg in g\n\n      12000.0  g\n\ngas | 
type \x04
end 0
END
tell "$(find state/gaswright -type d ! -perm 700; find "$history" ! -perm 600)" \
  "the folder of the history is 0700, the file 0600"
tell "$(grep -qx '12 kg in g' "$history" || cat "$history")" "the history has the line"
tell "$(grep -qE '^#[0-9]+$' "$history" || cat "$history")" "and when it was typed"

plays "a mistake is marked under the typed words" << 'END'
see gas | 
type 12 kg in zz\r
see 12 kg in zz\n               ''\n  x   error: no unit is called 'zz'
type quit\r
end 0
END

plays "a line goes on; a mistake in it quotes its line" << 'END'
see gas | 
type 850 Nm3/h of CO2 \\\r
see     | 
type in kg/h,\r
see     | 
type kmol/h\r
see 1668.
see kmol/h
see gas | 
type 12 zz \\\r
see     | 
type in g\r
see \n      12 zz
see '
see error: no unit is called 'zz'
see | 
type \x04
end 0
END

plays "a setting that is not as shipped shows in the prompt" << 'END'
see gas | 
type set digits 4\r
see gas*| 
type 12 kg in g\r
see 12000  g
type undo\r
see gas | 
type \x04
end 0
END

plays "names, units and words are completed" << 'END'
see gas | 
type gas larkmoor = CH4 60, CO2 40 mol% dry\r
see gas | 
type 3 kg of lark\t in mo\t\r
see larkmoor  in mol
see mol
see gas | 
type densi\tof lark\tat 20 deg\x09\x09
see degC
see degF
type C, 1 bar(a)\r
see kg/m3
type set gas mod\tPeng\t\r
see gas*| 
type forget la\t\r
see larkmoor
type show larkmoor\r
see nothing is called 'larkmoor'
see | 
type \x04
end 0
END

plays "a name of several words is completed, in quotes or without" << 'END'
see gas | 
type 3 kg of carbon diox\tin g\r
see 3000.00  g
see gas | 
type 3 kg of "carbon diox\tin g\r
see 3 kg of "carbon dioxide" in g
see 3000.00  g
see | 
type \x04
end 0
END

plays "Ctrl-C gives up the line and nothing else" << 'END'
see gas | 
type let q = 12 kg\r
see gas | 
type q in zz\x03
see gas | 
type q in g\r
see 12000.0  g
see gas | 
type q \\\r
see     | 
type in zz\x03
see gas | 
type q in mg\r
see 12000000
never error
see | 
type \x04
end 0
END

plays "Ctrl-C gets out of an open question of completion" << 'END'
see gas | 
type 3 kg of \x09\x09
see possibilities
type \x03
see gas | 
type 3 kg of C\x09\x09
see More
type \x03
see gas | 
type 12 kg in g\r
see 12000.0  g
see | 
type \x04
end 0
END

# A run without end: a pipe that always has another line, as the file of own settings.
without_end() {
  { printf 'let q = 12 kg\n11 kg in g\n'; exec yes 'let q = 12 kg'; } > config/gaswright/init 2> out &
  writer=$!
}
mkdir -p config/gaswright
if mkfifo config/gaswright/init; then
  without_end
  plays "Ctrl-C ends a run and leaves the session" << 'END'
see 11000.0  g
type \x03
see gas | 
type q in g\r
see 12000.0  g
see gas | 
type \x04
end 0
END
  kill "$writer" 2> out
  without_end
  plays "without a prompt Ctrl-C ends the program by its signal" config/gaswright/init << 'END'
see 11000.0  g
type \x03
end 1002
END
  kill "$writer" 2> out
  rm config/gaswright/init
else
  skip "no pipe can be made" "Ctrl-C ends a run and leaves the session"
fi

# long WHAT: trunk.gw, whose balance takes minutes, ends at Ctrl-C with all as it was before.
long() {
  plays "Ctrl-C ends $1 of a balance and leaves the session" << 'END'
see gas | 
type let q = 12 kg\r
see gas | 
type open "trunk.gw"\r
pause 500
type \x03
see stopped by the user; nothing was changed
see gas | 
type q in g\r
see 12000.0  g
see gas | 
type show trunk\r
see nothing is called 'trunk'
see gas | 
type \x04
end 0
END
}
# A line of units of which little is known.
awk 'BEGIN {
  print "let q = 13 kg\nbalance trunk\ncomponents CH4, CO2, N2, H2, O2, Ar\nknown m0 = 1000 kmol/h"
  for (u = 1; u <= 400; u++) printf "separate u%d: m%d = s%d + m%d\n", u, u - 1, u, u
  for (u = 1; u <= 400; u += 5) printf "known CH4 of s%d = %d mol%%\n", u, 10 + u % 70
  print "end" }' > trunk.gw
long "the ranges"
# Meters of which one in ten is far off, left out one after the other.
awk 'BEGIN {
  print "let q = 13 kg\nbalance trunk"
  srand(4); t = 400000
  for (u = 1; u <= 9000; u++) printf "separate u%d: m%d = s%d + m%d\n", u, u - 1, u, u
  for (u = 1; u <= 9000; u++) {
    s = 10 + 20 * rand(); t -= s
    printf "known s%d = %.6g +/- %.6g kmol/h\n", u, s * (u % 10 ? 1 : 1.3), 0.01 * s
    printf "known m%d = %.6g +/- %.6g kmol/h\n", u, t, 0.001 * t }
  print "end" }' > trunk.gw
long "the reconciliation"
# A block of very many lines.
awk 'BEGIN {
  print "let q = 13 kg\nbalance trunk"
  for (u = 1; u <= 120000; u++) printf "separate u%d: m%d = s%d + m%d\n", u, u - 1, u, u
  for (u = 1; u <= 120000; u++) printf "known s%d = %d kmol/h\n", u, u % 90 + 1
  print "end" }' > trunk.gw
long "the reading"

printf 'let q = 12 kg\nq in zz\nset digits 3\n' > config/gaswright/init
plays "own settings are run first; a bad line costs only itself" << 'END'
see /config/gaswright/init:2:6: no unit is called 'zz'
see gas*| 
type q in g\r
see 12000
see | 
type \x04
end 0
END
plays "--no-init leaves them out" --no-init << 'END'
see gas | 
type q in g\r
see nothing is called 'q'
see | 
type \x04
end 0
END
rm config/gaswright/init

rm "$history"
plays "a paste of ten lines runs as one" << 'END'
see gas | 
type \e[200~let q = 1 kg\n11 kg in g\n12 kg in g\n13 kg in g\n14 kg in g\n15 kg in zz\n16 kg in g\n17 kg \\\nin g\nq in g\e[201~\r
see 11000.0  g
see 12000.0  g
see 13000.0  g
see 14000.0  g
see \n      15 kg in zz\n               ''\n
see error: no unit is called 'zz'
see 16000.0  g
see 17000.0  g
see 1000.00  g
see gas | 
type \e[A\x03
see gas | 
type \x04
end 0
END
tell "$([ "$(grep -cE '^#[0-9]+$' "$history")" = 1 ] || cat "$history")" "it is one entry of the history"

plays "a piece of a session is pasted without its rails and answers" << 'END'
see gas | 
type \e[200~gas | 12 kg in g\n\n      12000.0  g\n\ngas*| 13 kg \\\n    | in g\n\n      99 kg in g\e[201~\r
see note: 2 printed lines among the pasted ones left out
see 12000.0  g
see 13000.0  g
see gas | 
never error
type gas | 14 kg in g\r
see 14000.0  g
type gas | 14 kg in zz\r
see \n      14 kg in zz\n               ''
see | 
type \x04
end 0
END

plays "a line that wrapped is quoted again" << 'END'
see gas | 
type 12 kg                                                                              in zz\r
see \n      12 kg
see ''\n  x   error: no unit is called 'zz'
see | 
type \x04
end 0
END

rm "$history"
plays "F1 shows help and restores the line" << 'END'
see gas | 
type 12 kg in g\eOP
see _/ g \\
see gas | 12 kg in g
type \r
see 12000.0  g
see gas | 
type \eOP
see help
see gas | 
type undo\x01\eOP
see gas | undo
type \x03
see | 
type \x04
end 0
END
tell "$([ "$(grep -cvE '^#[0-9]+$' "$history")" = 1 ] || cat "$history")" "and leaves no trace in the history"

rm "$history"
plays "what is kept of lines" << 'END'
see gas | 
type 12 kg in g\r
see 12000.0
type 12 kg in g\r
see 12000.0
type  13 kg in g\r
see 13000.0
type 14 kg in g\r
see 14000.0
see | 
type \x04
end 0
END
tell "$([ "$(grep -vE '^#[0-9]+$' "$history" | tr '\n' ,)" = '12 kg in g,14 kg in g,' ] \
  || cat "$history")" "no repeated neighbour, none that begins with a blank"
plays "an earlier session's lines are called back" << 'END'
see gas | 
type \x10\r
see 14000.0  g
see gas | 
type \x10\x10\r
see 12000.0  g
see | 
type \x04
end 0
END

plays "the size of the terminal may change" << 'END'
see gas | 
size 30x120
type 12 kg in g\r
see 12000.0  g
see | 
type \x04
end 0
END

screen=12x80
plays "a listing longer than the screen goes to the pager" << 'END'
see gas | 
type list components\r
see paged:      _/ components
see gas | 
type 12 kg in g\r
see \n      12000.0  g
see | 
type \x04
end 0
END
PAGER=/nonexistent/pager
plays "or is printed if there is no pager" << 'END'
see gas | 
type list components\r
see \n      _/ components
see gas | 
type \x04
end 0
END
screen=24x80

plays "JSON may be asked for at the prompt" --format=json << 'END'
see gas | 
type 12 kg in g\r
see "value":12000
see | 
type \x04
end 0
END
plays "bold and dim at a terminal, none if it is refused" --color=never << 'END'
see gas | 
type 12 kg in g\r
see 12000.0  g
see | 
type \x04
end 0
END

# Prompts go to standard error where only standard input is a terminal.
cat > beside << END
#!/bin/sh
exec "$GASWRIGHT" > "$work/answers"
END
chmod +x beside
GASWRIGHT=$work/beside
plays "standard output elsewhere" << 'END'
see gas | 
type 12 kg in g\r
see gas | 
never 12000
type \x04
end 0
END
tell "$(diff answers - << 'END'
      12000.0  g
END
)" "answers alone go there"
finish
