"""One statement a figure: the tables of numbers/ that have a statement in every row."""
import itertools
import os
import sys

import session

TABLES = ("conversions", "compositions", "densities", "uncertainties")


def setting(row):
    """What rows must share to run in one session."""
    return row["tables"], row["before"]


def look(rows, options):
    """Runs ROWS behind what they share; gives each with what is wrong with it."""
    before = rows[0]["before"]
    objects = session.answers("\n".join([before] + [row["statement"] for row in rows]) + "\n",
                              options)
    for row in rows:
        # A row's statements in front of its last one define what that asks for.
        asked = row["statement"].split("; ")[-1]
        thing = next((one for one in objects if one["statement"] == asked), None)
        if thing is None or "error" in thing:
            yield row, [thing["error"]["message"] if thing else "no answer to " + asked]
            continue
        answer = thing["answers"][0]
        wrong = session.off(answer["value"], float(row["value"]), float(row["tol"]))
        if not wrong and answer["unit"] != row["unit"]:
            wrong = "in %s, not in %s" % (answer["unit"], row["unit"])
        if not wrong and "uncertainty" in row:
            wrong = session.off(answer.get("uncertainty"), float(row["uncertainty"]),
                                float(row["utol"]))
        yield row, [row["statement"], wrong] if wrong else []


def main():
    tap = session.Tap()
    for table in TABLES:
        rows = session.rows("numbers/%s.tsv" % table)
        for row in rows:
            if not row["source"].strip():
                tap.tell("no source", row["case"])
        for (tables, _), group in itertools.groupby(sorted(rows, key=setting), key=setting):
            folder = os.path.join(session.TOP, "tests", "sessions", tables)
            options = ["--tables", folder] if tables else []
            for row, wrong in look(list(group), options):
                tap.tell(wrong, "%s: %s" % (table, row["case"]))
    return tap.finish()


sys.exit(main())
