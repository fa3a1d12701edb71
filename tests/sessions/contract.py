"""contract.gw in every form: what machines read keeps its form, and all forms say the same."""
import csv
import json
import math
import re
import sys

import session

STATEMENTS = session.read("sessions/contract.gw")
FORMS = ("json", "csv", "text")
FOLDS = 4                               # lines a row of text may be folded into
HEADING = ["statement", "what", "label", "value", "unit", "uncertainty", "moisture", "basis",
           "taken", "notes", "cautions"]
ANSWER = {"what": str, "value": (int, float), "unit": str, "basis": str}
ERROR = {"kind": str, "message": str, "line": int, "column": int, "hint": str}
LISTS = ("taken", "notes", "cautions")
JOINT = " | "


def unique(pairs):
    """An object's members, refused where a name comes twice."""
    if len({name for name, _ in pairs}) < len(pairs):
        raise ValueError("a name comes twice")
    return dict(pairs)


def number(token):
    """A number of JSON, refused unless it is the first of 15, 16, 17 digits that reads back."""
    value = float(token)
    short = next(text for text in ("%.15g" % value, "%.16g" % value, "%.17g" % value)
                 if float(text) == value)

    def digits(text):
        return len(re.sub(r"e.*|[-.]", "", text).strip("0"))
    if not math.isfinite(value) or digits(token) != digits(short):
        raise ValueError("%s is not the short form %s" % (token, short))
    return value


def refuse(word):
    """NaN and Infinity are no JSON."""
    raise ValueError(word)


def load(line):
    """One object, its numbers looked at."""
    return json.loads(line, object_pairs_hook=unique, parse_float=number, parse_constant=refuse)


def form(thing):
    """What one object lacks, or has in another type."""
    wrong = [] if isinstance(thing.get("statement"), str) else ["statement"]
    promised = [("error", thing["error"], ERROR)] if "error" in thing else [
        ("answer", answer, ANSWER) for answer in thing["answers"]]
    wrong += ["%s of %s" % (name, kind) for kind, members, types in promised
              for name, one in types.items() if not isinstance(members.get(name), one)]
    if "error" not in thing:
        wrong += [name for name in LISTS
                  if not all(isinstance(one, str) for one in thing[name])]
    return ["%s: %s" % (thing.get("statement"), one) for one in wrong]


def statements():
    """The statements as typed, without comments."""
    for line in STATEMENTS.splitlines():
        yield from (part.strip() for part in line.split("#")[0].split(";") if part.strip())


def csv_rows(objects):
    """The rows of CSV that the answers of OBJECTS must give; cards and help have their own."""
    for thing in objects:
        for answer in thing.get("answers", []):
            moist = re.match(r"(dry|wet)(?:, |$)", answer["basis"])
            yield [thing["statement"], answer["what"], answer.get("label", ""), answer["value"],
                   answer["unit"], answer.get("uncertainty", ""), moist.group(1) if moist else "",
                   answer["basis"][moist.end():] if moist else answer["basis"],
                   *(JOINT.join(thing[name]) for name in LISTS)]


def cells(row):
    """A row of CSV with its numbers read."""
    return [float(cell) if i in (3, 5) and cell else cell for i, cell in enumerate(row)]


def shows(line, answer):
    """Whether a line of text tells ANSWER: unit, uncertainty and a figure rounded as told."""
    unit = r"\s+" + re.escape(answer["unit"]) if answer["unit"] else ""
    # The label is any text in front; an uncertainty stands behind the unit, of two digits.
    found = re.search(r"(?:^|\s)(-?\d[\d.]*(?:e-?\d+)?)" + unit
                      + r"\s*(?:(?:±|\+/-) ([\d.e-]+)(?: \(k=2\))?)?(?=\s|$)", line)
    if not found:
        return False
    shown, spread = found.group(1), found.group(2)
    mantissa, _, power = shown.partition("e")
    last = 10.0 ** (int(power or 0) - len(mantissa.partition(".")[2]))
    if bool(spread) != ("uncertainty" in answer):
        return False
    if spread:
        near = answer.get("expanded", answer["uncertainty"])
        if ("(k=2)" in line) != (answer.get("coverage") == 2):
            return False
        # End zeros of a whole number are rounding, not digits.
        last = max(last, 10.0 ** (math.floor(math.log10(near)) - 1))
        if not math.isclose(float(spread), near, rel_tol=0.051):
            return False
    return abs(float(shown) - answer["value"]) <= 0.5000001 * last


def text_lacks(text, objects):
    """What the answers of OBJECTS have and TEXT has not, in its order."""
    lines = [re.sub(r" +", " ", line) for line in text.splitlines()]
    whole, at = session.unfolded(text), 0
    for thing in objects:
        for answer in thing.get("answers", []):
            while at < len(lines) and not shows(lines[at], answer):
                at += 1
            if at == len(lines):
                yield "%s: %r" % (thing["statement"], answer)
                return
            squeezed = session.unfolded(" ".join(lines[at:at + FOLDS]))
            for part in answer["basis"].split(", "):
                if part not in squeezed:
                    yield "%s: no %s in: %s" % (thing["statement"], part, squeezed)
            at += 1
        for name in LISTS:
            for remark in thing.get(name, []):
                if session.unfolded(remark) not in whole:
                    yield "%s: %s" % (thing["statement"], remark)


def forms_agree(tap, objects, out, err):
    """JSON, CSV and text say the same."""
    table = list(csv.reader(out["csv"].splitlines(keepends=True), strict=True))
    tap.tell("" if table[0] == HEADING else repr(table[0]), "CSV begins with the names of columns")
    tap.tell([repr(row) for row in table if len(row) != len(HEADING)], "CSV has cells in every row")
    rows = [cells(row) for row in table[1:] if row[3] and re.fullmatch(r"[-+\d.e]+", row[3])]
    for row in csv_rows(objects):
        tap.tell("" if row in rows else repr(row), "CSV has: %s, %s" % (row[0], row[1]))
    tap.tell(list(text_lacks(out["text"], objects)), "text has every answer and every remark")
    places = ["%s: %d:%d: %s" % (thing["statement"], error["line"], error["column"],
                                 error["message"])
              for thing in objects for error in [thing.get("error")] if error
              for name in ("csv", "text")
              if not re.search("(?m)^.*:%d:%d: %s" % (error["line"], error["column"],
                                                      re.escape(error["message"])), err[name])]
    tap.tell(places, "errors stand on standard error, FILE:LINE:COLUMN: message")
    tap.tell([line for name in ("csv", "text") for line in out[name].splitlines()
              if re.match(r"\S*:\d+:\d+: ", line)], "and not on standard output")


def main():
    tap = session.Tap()
    status, out, err = {}, {}, {}
    for name in FORMS:
        status[name], out[name], err[name] = session.run(STATEMENTS, name)
    tap.tell(["%s: %d" % item for item in status.items() if item[1] != 1],
             "a session with errors in it ends with status 1")
    tap.tell(err["json"], "JSON leaves standard error empty")
    objects, broken = [], []
    for line in out["json"].split("\n")[:-1]:
        try:
            objects.append(load(line))
        except ValueError as fault:
            broken.append("%s in %s" % (fault, line))
    tap.tell(broken, "every line is an object of JSON, its numbers in their short form")
    tap.tell([] if out["json"].endswith("\n") else "no", "the last line ends")
    tap.tell([one for thing in objects for one in form(thing)], "members are those promised")
    typed = list(statements())
    given = iter(typed)
    tap.tell([thing["statement"] for thing in objects if thing["statement"] not in given],
             "statements come as typed, in their order")
    asked = [one for one in typed if not re.match(r"(gas|stream|let|reference|set \w)", one)]
    got = [thing["statement"] for thing in objects]
    tap.tell([one for one in asked if one not in got], "every question has its object")
    tap.tell("" if sum("error" in thing for thing in objects) == 6 else
             session.faults(objects), "six lines are refused")
    found = session.figures([thing for thing in objects if thing["statement"].startswith(
        "850 Nm3/h of raw in kg/h as mass")])
    tap.tell("" if list(found) == ["mass", "moles", "raw"] else repr(list(found)),
             "answers come in the order of the targets, with their labels")
    tap.tell(["%s: %r" % (thing["statement"], answer) for thing in objects
              for answer in thing.get("answers", [])
              if answer.get("uncertainty", 1) < 1e-12 * abs(answer["value"])],
             "no rounding is told as an uncertainty")
    scaled = [note for thing in objects for note in thing.get("notes", []) if "scaled" in note]
    tap.tell([note for note in scaled if re.search(r"by 1:|up to 100 ", note)] or
             ("" if any("0.999997" in note and "100.0003" in note for note in scaled) else "none"),
             "what was scaled by a little says by how much")
    forms_agree(tap, objects, out, err)
    for locale in ("C", "C.UTF-8", "de_DE.UTF-8", "tr_TR.UTF-8"):
        for name in FORMS[:2]:
            tap.tell("" if session.run(STATEMENTS, name, locale=locale)[1] == out[name]
                     else "differs", "%s is the same under %s" % (name, locale))
    plain = session.run(STATEMENTS, "text", locale="C")[1]
    tap.tell([line for line in plain.splitlines() if not line.isascii()],
             "text is plain where the locale is")
    same = [session.unfolded(one).replace("+/-", "±").split(" ")
            for one in (plain, out["text"].replace("₄", "4"))]
    tap.tell([pair for pair in zip(*same) if pair[0] != pair[1]][:5] + [str(len(s)) for s in same]
             if same[0] != same[1] else [], "and says the same")
    return tap.finish()


sys.exit(main())
