"""Lines of language_samples.tsv that read well and are refused when checked: kind, place, way on.

All of them run in one session, each with a question behind it whose answer must not change; so a
refusal that left something behind would show in what follows."""
import re
import sys

import session

SAMPLES = "numbers/language_samples.tsv"

# As the head of the samples says.
SESSION = """\
gas raw = CH4 58.2, CO2 39.1, N2 rest mol% dry
gas lab = H2 41.20, CO 23.85, CO2 19.60, CH4 8.42, N2 6.30 mol%
stream feed = 850 Nm3/h of raw at 38 degC, 25 mbar(g), saturated
stream bare = 850 Nm3/h of raw
stream purge = 5 % of feed
let q = 850
let flow = 850 Nm3/h
let propane = 100 kg/h
"""

# A stream, what is made of it, a gas that is still open, every let, and all there is.
PROBES = ("purge in kg/h", "feed in Nm3/h dry", "bare in kg/h", "stated total of lab",
          "molar mass of raw in g/mol", "q", "flow in Nm3/h", "propane in kg/h", "list")


def refused():
    """The samples that are refused: line, kind, column and the spelling offered, or none."""
    for row in session.rows(SAMPLES):
        if row["error"].startswith("check:"):
            offer = re.search("did you mean '([^']*)'", row["hint"])
            yield (row["id"], row["line"], row["error"][len("check:"):], int(row["column"]),
                   offer.group(1) if offer else None)


def look(row, thing):
    """What is wrong with the object that answers a refused line."""
    _, _, kind, column, offer = row
    error = thing.get("error")
    if error is None:
        return ["answered: %r" % thing.get("answers")]
    wrong = []
    if error["kind"] != kind:
        wrong.append("kind %s, not %s" % (error["kind"], kind))
    if error["column"] != column:
        wrong.append("column %d, not %d" % (error["column"], column))
    if offer and offer not in error["hint"] + error["message"]:
        wrong.append("does not offer %s but: %s" % (offer, error["hint"]))
    return wrong + ([] if error["message"] else ["says nothing"])


def values(thing):
    """The figures of an answer, the remarks left out: a note stands on the first answer alone."""
    return [(answer["value"], answer["unit"], answer["basis"])
            for answer in thing.get("answers", [])] + [thing.get("card")]


def main():
    tap = session.Tap()
    lines = list(refused())
    tap.tell("" if len(lines) == 45 else "%d lines" % len(lines), "the samples have 45 such lines")
    probes = "".join(probe + "\n" for probe in PROBES)
    status, out, _ = session.run(SESSION + probes + "".join(
        line + "\n" + probes for _, line, _, _, _ in lines))
    objects = [session.json.loads(line) for line in out.splitlines()]
    tap.tell("" if status == 1 else "status %d" % status, "the session ends with status 1")
    # Definitions may answer with remarks; the probes start at the first one.
    first = next(i for i, thing in enumerate(objects) if thing["statement"] == PROBES[0])
    before, objects = objects[first:first + len(PROBES)], objects[first + len(PROBES):]
    tap.tell(session.faults(before), "the session answers before the first refusal")
    size = 1 + len(PROBES)
    tap.tell("" if len(objects) == size * len(lines) else "%d objects" % len(objects),
             "every line and every question behind it gives one object")
    for row, start in zip(lines, range(0, len(objects), size)):
        thing, after = objects[start], objects[start + 1:start + size]
        tap.tell(look(row, thing), "%s: %s" % (row[0], row[1]))
        tap.tell(["%s: %r, not %r" % (new["statement"], values(new), values(old))
                  for old, new in zip(before, after) if values(old) != values(new)],
                 row[0] + ": the session is unharmed")
    return tap.finish()


sys.exit(main())
