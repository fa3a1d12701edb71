"""Worked problems (scenarios/*.gw) give the figures of expected.tsv and say what said.tsv asks:
in basis, taken, notes or cautions of an answer, or among the readings of a check."""
import re
import sys

import session

TOLERANCE_OF_SLIP = 1e-5


def figure(value):
    """A figure as it stands in text: six digits, never part of a longer one."""
    return re.compile(r"(?<![\d.])" + re.escape(value) + r"(?![\d])")


def says(row, answer, thing, text):
    """Machines and people both get what ROW asks of ANSWER; else what there is instead."""
    pattern, where = re.compile(row["pattern"]), row["where"]

    def found_in(text):
        return pattern.search(text) or pattern.search(session.unfolded(text))

    if where == "balance":
        verdict = thing["balance"]
        here = [verdict["phrase"], verdict["head"], *(": ".join(one) for one in verdict["says"]),
                *verdict["redundant"], *verdict["conflict"]]
        if not any(pattern.search(one) for one in here):
            return ["nothing like '%s' in JSON:" % row["pattern"], *here]
        return [] if found_in(text) else ["nothing like '%s' in text" % row["pattern"]]
    if where in ("readings", "ruled_out"):
        found = thing["readings"] if where == "readings" else thing["check"]["ruled_out"]
        here = [one["reading"] for one in found]
    else:
        here = [answer["basis"]] if where == "basis" else thing[where]
    if not any(pattern.search(one) for one in here):
        return ["nothing like '%s' in JSON:" % row["pattern"], *here]
    if where in ("readings", "ruled_out"):
        return [] if found_in(text) else ["nothing like '%s' in text" % row["pattern"]]
    # In text the columns are blanks apart, and remarks have their bracket in a column.
    start, gap = {"basis": (re.escape(answer.get("label", "")), ", "), "taken": (r"\?", " "),
                  "notes": ("~", " "), "cautions": ("!", " ")}[where]
    lines = [re.sub(" {2,}", gap, line.strip()) for line in session.unfolded_lines(text)
             if re.match(" *" + start, line)]
    if not any(pattern.search(line) for line in lines):
        return ["nothing like '%s' in text:" % row["pattern"], *lines]
    return []


def of_balance(found, path):
    """A figure of a verdict: "solve plant/gap/value"."""
    label, *members = path.split("/")
    value = found[label][1]["balance"]
    for member in members:
        value = value[int(member) if member.isdigit() else member]
    return value


def check(tap, name, tables):
    """Holds one scenario against the tables."""
    statements = session.read("sessions/scenarios/%s.gw" % name)
    objects = session.answers(statements)
    tap.tell(session.faults(objects), name + ": every statement is understood")
    found = session.figures(objects)
    found.update((thing["statement"], ({"value": None, "unit": ""}, thing))
                 for thing in objects if "balance" in thing)
    _, text, _ = session.run(statements, "text")
    expected, said, slips = ([row for row in table if row["scenario"] == name]
                             for table in tables)
    for row in expected:
        answer = found.get(row["label"], ({"value": None, "unit": ""}, {}))[0]
        if "/" in row["label"]:
            answer = {"value": of_balance(found, row["label"]), "unit": row["unit"]}
        member, kind = ("uncertainty", "rel") if row["kind"] == "u" else ("value", row["kind"])
        wrong = session.off(answer.get(member), float(row["value"]), float(row["tol"]), kind)
        if not wrong and answer["unit"] != row["unit"]:
            wrong = "in %s, not in %s" % (answer["unit"], row["unit"])
        tap.tell(wrong, "%s: %s" % (name, row["quantity"]))
    for row in said:
        answer, thing = found.get(row["label"], (None, None))
        wrong = says(row, answer, thing, text) if answer else "no such answer"
        tap.tell(wrong, "%s says: %s" % (name, row["must"]))
    for row in slips:
        wrong = [answer["what"] for answer, _ in found.values() if "what" in answer
                 if not session.off(answer["value"], float(row["value"]), TOLERANCE_OF_SLIP)]
        wrong += [line for line in text.splitlines() if figure(row["value"]).search(line)]
        tap.tell(wrong, "%s: not %s, %s" % (name, row["value"], row["slip"]))
    if not expected or not said:
        tap.tell("no rows", name + ": is in the tables")


def main():
    tap = session.Tap()
    tables = [session.rows("sessions/scenarios/" + table)
              for table in ("expected.tsv", "said.tsv", "slips.tsv")]
    for name in sorted({row["scenario"] for table in tables for row in table}):
        check(tap, name, tables)
    return tap.finish()


sys.exit(main())
