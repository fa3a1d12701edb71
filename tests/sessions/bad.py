"""Sessions of bad input (bad/*.txt): each fault is of the right kind, at the right place, says what
it should, leaves definitions and settings as they were, and the session goes on.

A file of sessions reads:

    # session: a unit misspelt
    > gas stack = N2 80, H2O 20 mol%           a line as typed
    > density of stack at 20 degC, 1 barr
    line 2, column 32: unit-unknown: bar       its faults: place, kind, a piece of what is said
    > 68 degF in degC
    = 20 degC                                  its figures; the last line of a session has some
    ~ barometer                                a piece of what stands under its answer

'>> ' opens a typed line with escapes: \\xHH, \\t, \\r, \\\\, and {TEXT*COUNT} for TEXT so many times.
'+ ' and '++ ' go on the line above, as a line that ends in a comma does.  'file NAME' makes a file
of the '| ' (with escapes: '|| ') lines below it; 'options: ...' are options of the program;
'refuses: kind: piece' says that the program does not start with them.  Other lines that begin with
'#' are comments.

Figures are good to 1e-9 (what is asked behind faults is exact or plain arithmetic)."""
import glob
import json
import os
import re
import shlex
import subprocess
import sys
import tempfile

import session

FOLDER = os.path.join(session.TOP, "tests", "sessions", "bad")
PROBE = b"list; set"
TOLERANCE = 1e-9
FAULT = re.compile(r"line (\d+), column (\d+): ([a-z-]+)(?:: (.*))?$")
ESCAPE = re.compile(rb"\\(x[0-9A-Fa-f]{2}|[tr\\])")
REPEAT = re.compile(r"\{([^{}]*)\*(\d+)\}")


def escaped(text):
    """The bytes that TEXT with escapes stands for."""
    def one(match):
        code = match.group(1)
        return bytes([int(code[1:], 16)]) if code[:1] == b"x" else {
            b"t": b"\t", b"r": b"\r", b"\\": b"\\"}[code]
    while REPEAT.search(text):
        text = REPEAT.sub(lambda match: match.group(1) * int(match.group(2)), text)
    return ESCAPE.sub(one, text.encode())


class Entry:
    """What is typed at once, and what is expected of it."""

    def __init__(self, text, first, number, probe=False):
        self.text, self.first, self.number, self.probe = text, first, number, probe
        self.faults, self.figures, self.said = [], [], []
        self.objects = []

    def waits(self):
        """May one more statement of it answer?"""
        return self.text.count(b";") + 1 > max(len(self.faults), len(self.objects))

    def lines(self):
        """How many physical lines."""
        return self.text.count(b"\n") + 1


class Session:
    """One session: its title, what is typed, files and options."""

    def __init__(self, title, place):
        self.title, self.place = title, place
        self.entries, self.files, self.options, self.refuses = [], {}, [], None

    def typed(self, text):
        """A new line."""
        first = sum(entry.lines() for entry in self.entries) + 1
        self.entries.append(Entry(text, first, len(self.entries)))

    def read(self, line):
        """One line of the file; gives what is wrong with it."""
        sign, _, rest = line.partition(" ")
        last = self.entries[-1] if self.entries else None
        if sign in (">", ">>"):
            self.typed(escaped(rest) if sign == ">>" else rest.encode())
        elif sign in ("+", "++") and last:
            last.text += b"\n" + (escaped(rest) if sign == "++" else rest.encode())
        elif sign == "file":
            self.files[rest] = b""
        elif sign in ("|", "||") and self.files:
            self.files[list(self.files)[-1]] += (
                escaped(rest) if sign == "||" else rest.encode()) + b"\n"
        elif sign == "options:":
            self.options += shlex.split(rest)
        elif sign == "refuses:":
            self.refuses = rest.split(": ", 1)
        elif sign == "=" and last:
            last.figures = rest.split(", ")
        elif sign == "~" and last:
            last.said.append(rest)
        elif FAULT.match(line) and last:
            last.faults.append(FAULT.match(line).groups())
        else:
            return "cannot be read: " + line
        return ""


def read_file(name):
    """The sessions of a file."""
    found = []
    with open(name, encoding="utf-8") as file:
        for number, line in enumerate(file, 1):
            line = line.rstrip("\n")
            place = "%s:%d" % (os.path.basename(name), number)
            if line.startswith("# session: "):
                found.append(Session(line[len("# session: "):], place))
            elif line and not line.startswith("#"):
                wrong = found[-1].read(line) if found else "no session"
                if wrong:
                    raise ValueError("%s: %s" % (place, wrong))
    return found


def run(typed, form, options, folder):
    """Runs TYPED, bytes, in FOLDER."""
    done = subprocess.run([session.program(), "--format", form, "--keep-going", *options],
                          input=typed, stdout=subprocess.PIPE, stderr=subprocess.PIPE,
                          cwd=folder, check=False, timeout=120)
    return done.returncode, done.stdout, done.stderr


def with_probes(entries):
    """ENTRIES with a look at the definitions before and behind each line that fails."""
    every = []
    for entry in entries:
        if entry.faults and not (every and every[-1].probe):
            every.append(Entry(PROBE, 0, entry.number, True))
        every.append(entry)
        if entry.faults:
            every.append(Entry(PROBE, 0, entry.number, True))
    return every


def squeezed(text):
    """TEXT with single blanks."""
    return b" ".join(text.split())


def deal_out(every, out):
    """Gives each object of OUT to the entry it answers; gives what cannot be placed."""
    starts, line = [], 1
    for entry in every:
        starts.append(line)
        line += entry.lines()
    at, lost = 0, []
    for text in out.decode().splitlines():
        thing = json.loads(text)
        if "error" in thing:
            line = thing["error"]["line"]
            at = max(i for i, start in enumerate(starts) if start <= max(line, 1))
            thing["error"]["line"] += every[at].first - starts[at]
        else:
            statement = squeezed(thing["statement"].encode())
            places = [i for i in range(at, len(every))
                      if statement in squeezed(every[i].text) and every[i].waits()]
            if not places:
                lost.append(text)
                continue
            at = places[0]
        every[at].objects.append(thing)
    return lost


def look_at_faults(entry):
    """What is wrong with the faults of an entry."""
    got = [thing["error"] for thing in entry.objects if "error" in thing]
    shown = ["got line %d, column %d: %s: %s; %s" % (
        error["line"], error["column"], error["kind"], error["message"], error["hint"])
             for error in got]
    wrong = []
    if [(str(error["line"]), str(error["column"]), error["kind"]) for error in got] != [
            fault[:3] for fault in entry.faults]:
        wrong = ["want line %s, column %s: %s" % fault[:3] for fault in entry.faults] + shown
    else:
        wrong = ["does not say: %s" % fault[3] for fault, error in zip(entry.faults, got)
                 if fault[3] and fault[3] not in error["message"] + "; " + error["hint"]]
        wrong += shown if wrong else []
    return ["%s" % entry.text[:80].decode("utf-8", "replace")] + wrong if wrong else []


def look_at_figures(entry):
    """What is wrong with the figures of an entry."""
    things = [thing for thing in entry.objects if "error" not in thing]
    answers = [answer for thing in things for answer in thing["answers"]]
    wrong = []
    if entry.figures:
        if len(answers) != len(entry.figures):
            return ["%s: %d figures" % (entry.text[:80].decode("utf-8", "replace"), len(answers))]
        for want, answer in zip(entry.figures, answers):
            value, _, unit = want.partition(" ")
            wrong.append(session.off(answer["value"], float(value), TOLERANCE))
            if unit != answer["unit"]:
                wrong.append("in %s, not in %s" % (answer["unit"], unit))
    remarks = [one for thing in things for name in ("taken", "notes", "cautions")
               for one in thing[name]]
    wrong += ["does not say: " + piece for piece in entry.said
              if not any(piece in one for one in remarks)]
    wrong = [one for one in wrong if one]
    return [entry.text[:80].decode("utf-8", "replace")] + wrong if wrong else []


def look_at_probes(every):
    """What lines that failed have changed."""
    wrong = []
    for before, entry, behind in zip(every, every[1:], every[2:]):
        if entry.faults and (len(before.objects) != 2 or before.objects != behind.objects):
            wrong.append("entry %d changed what list and set say" % (entry.number + 1))
    return wrong


def look_at_start(one, status, out):
    """Faults that keep the program from starting."""
    things = [json.loads(text) for text in out.decode().splitlines()]
    if status != 1 or len(things) != 1 or "error" not in things[0]:
        return ["status %d" % status, *map(str, things)]
    error = things[0]["error"]
    if [error["kind"]] != one.refuses[:1] or one.refuses[-1] not in error["message"]:
        return ["%s: %s" % (error["kind"], error["message"])]
    return []


def make_files(one, folder):
    """The files of a session."""
    for name, content in one.files.items():
        path = os.path.join(folder, name)
        os.makedirs(os.path.dirname(path), exist_ok=True)
        with open(path, "wb") as file:
            file.write(content)


def look(one):
    """What is wrong with a session."""
    if not one.refuses and (not one.entries or not one.entries[-1].figures):
        return ["does not end with a question and its figure"]
    every = with_probes(one.entries)
    with tempfile.TemporaryDirectory() as folder:
        make_files(one, folder)
        typed = b"\n".join(entry.text for entry in every) + b"\n"
        status, out, err = run(typed, "json", one.options, folder)
    if one.refuses:
        return look_at_start(one, status, out)
    wrong = ["standard error: " + err[:400].decode("utf-8", "replace")] if err else []
    if status != (1 if any(entry.faults for entry in every) else 0):
        wrong.append("status %d" % status)
    wrong += ["cannot be placed: " + text for text in deal_out(every, out)]
    for entry in every:
        if not entry.probe:
            wrong += look_at_faults(entry) + look_at_figures(entry)
    return wrong + look_at_probes(every)


def look_at_text(sessions):
    """Runs all SESSIONS as one, in text: nothing reaches the terminal but plain text."""
    typed = b"\n".join(entry.text for one in sessions for entry in one.entries
                       if not one.refuses) + b"\n"
    with tempfile.TemporaryDirectory() as folder:
        for one in sessions:
            make_files(one, folder)
        status, out, err = run(typed, "text", [], folder)
    wrong = [] if status == 1 else ["status %d" % status]
    for name, stream in (("output", out), ("standard error", err)):
        try:
            text = stream.decode()
        except UnicodeDecodeError as error:
            wrong.append("%s is not UTF-8: %s" % (name, error))
            continue
        bad = re.search(r"[\x00-\x09\x0b-\x1f\x7f-\x9f]", text)
        if bad:
            wrong.append("%s holds %r" % (name, text[max(0, bad.start() - 40):bad.end()]))
        wrong += ["%s holds %s" % (name, word) for word in re.findall(
            r"\b-?(?:nan|inf)\b|\(null\)|AddressSanitizer|runtime error", text)
                  if word.encode() not in typed]
    return wrong


def unprovoked(kinds):
    """Kinds of fault that no session has provoked and exempt.tsv does not let off."""
    exempt = {row["kind"] for row in session.rows("sessions/bad/exempt.tsv") if row["reason"]}
    with open(os.path.join(session.TOP, "tables", "messages.tsv"), encoding="utf-8") as file:
        rows = [line.split("\t") for line in file if not line.startswith("#")]
    errors = {row[0] for row in rows if row[1] == "error"}
    return (["never provoked: " + kind for kind in sorted(errors - kinds - exempt)]
            + ["is provoked, yet exempt: " + kind for kind in sorted(exempt & kinds)]
            + ["no such kind: " + kind for kind in sorted(exempt - errors)])


def main():
    tap = session.Tap()
    kinds, count, only = set(), 0, sys.argv[1:]
    for name in sorted(glob.glob(os.path.join(FOLDER, "*.txt"))):
        sessions = read_file(name)
        for one in sessions:
            if only and not any(word in one.title + one.place for word in only):
                continue
            tap.tell(look(one), "%s %s" % (one.place, one.title))
            count += 1
            kinds |= {fault[2] for entry in one.entries for fault in entry.faults}
            kinds |= set(one.refuses[:1] if one.refuses else [])
        if not only:
            tap.tell(look_at_text(sessions), os.path.basename(name) + " as text")
    if not only:
        tap.tell(unprovoked(kinds), "every kind of fault is provoked")
        tap.tell("" if count >= 150 else "%d sessions" % count, "there are 150 sessions at least")
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
