"""Says what is wrong with files of JSON lines and CSV: machine.py FILE..."""
import csv
import json
import sys

ANSWER = {"what": str, "value": (int, float, type(None)), "unit": str, "basis": str}
ERROR = {"kind": str, "message": str, "line": int, "column": int, "hint": str}
STEP = {"step": str, "formula": str, "value": (int, float, type(None)), "unit": str,
        "source": str, "share": (int, float, type(None)), "figures": str}
HEADING = ("statement,what,label,value,unit,uncertainty,moisture,basis,taken,notes,"
           "cautions").split(",")


def unique(pairs):
    """Members of an object, refused where a name comes twice."""
    names = [name for name, _ in pairs]
    if len(set(names)) < len(names):
        raise ValueError("a name comes twice: " + ", ".join(names))
    return dict(pairs)


def refuse(word):
    """NaN and Infinity are no JSON."""
    raise ValueError(word)


def missing(thing, promised):
    """The promised members THING lacks or has in another type."""
    return [name for name, kind in promised.items() if not isinstance(thing.get(name), kind)]


def look_at_line(line):
    """What is wrong with one object."""
    thing = json.loads(line, object_pairs_hook=unique, parse_constant=refuse)
    wrong = missing(thing, {"statement": str})
    if "error" in thing:
        return wrong + missing(thing["error"], ERROR)
    wrong += missing(thing, {"answers": list, "taken": list, "notes": list, "cautions": list})
    for answer in thing["answers"]:
        wrong += missing(answer, ANSWER)
        if not isinstance(answer.get("uncertainty", 0.0), (int, float)):
            wrong.append("uncertainty")
    for name in ("taken", "notes", "cautions"):
        wrong += [name for one in thing[name] if not isinstance(one, str)]
    for step in thing.get("workings", []):
        wrong += missing(step, STEP)
    card = thing.get("card", {"columns": [], "rows": []})
    for row in card["rows"]:
        if len(row["values"]) != len(card["columns"]):
            wrong.append("values of " + row["name"])
    return wrong


def look_at_json(text):
    """What is wrong with a file of one object a line."""
    if not text.endswith("\n"):
        return ["no line end"]
    return [fault for line in text.split("\n")[:-1] for fault in look_at_line(line)]


def look_at_csv(text):
    """What is wrong with a file of rows."""
    rows = list(csv.reader(text.splitlines(keepends=True), strict=True))
    wrong = [] if rows[0] == HEADING else ["heading"]
    for row in rows[1:]:
        if len(row) != len(HEADING):
            wrong.append("fields: %d" % len(row))
        elif row[5]:
            float(row[3]), float(row[5])
    return wrong if len(rows) > 1 else ["no rows"]


for path in sys.argv[1:]:
    with open(path, encoding="utf-8", newline="") as file:
        content = file.read()
    try:
        faults = look_at_csv(content) if path.endswith(".csv") else look_at_json(content)
    except (ValueError, KeyError, csv.Error) as fault:
        faults = [str(fault)]
    for one in faults:
        print(path.rsplit("/", 1)[-1] + ": " + one)
