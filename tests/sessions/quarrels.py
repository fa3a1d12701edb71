"""Figures off by a factor every trade knows (quarrels.tsv): the reading that makes them is listed,
comes to the stated figure, and the claim does not hold as written."""
import re
import sys

import session


def wrong(row):
    """What is wrong with the check of ROW."""
    statement = "check %s against %s" % (row["check"], row["against"])
    answer = session.answers(statement + "\n")[0]
    if "error" in answer:
        return "%s: %s" % (statement, answer["error"]["message"])
    check, found = answer["check"], answer["readings"]
    if check["outcome"] != "readings":
        return "%s: %s" % (statement, check["outcome"])
    fits = [one for one in found if re.search(row["reading"], one["reading"])]
    if not fits:
        return [statement] + [one["reading"] for one in found]
    off = abs(fits[0]["value"] - check["value"])
    if off > check["limit"] * (1 + 1e-9):
        return "%s: %r is listed, not %r" % (statement, fits[0]["value"], check["value"])
    factor = check["value"] / answer["answers"][0]["value"]
    return session.off(factor, float(row["factor"]), 5e-4)


def main():
    tap = session.Tap()
    for row in session.rows("sessions/quarrels.tsv"):
        tap.tell(wrong(row), row["quarrel"])
    return tap.finish()


sys.exit(main())
