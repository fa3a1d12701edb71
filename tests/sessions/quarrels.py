"""Figures off by a factor every trade knows (quarrels.tsv): the reading that makes them is listed,
comes to the stated figure, and the claim does not hold as written."""
import os
import re
import sys
import tempfile

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


def own_reading():
    """A row of the user's own table is tried like any other."""
    with tempfile.TemporaryDirectory() as folder:
        with open(os.path.join(folder, "readings.tsv"), "w", encoding="utf-8") as table:
            table.write("reading\tsaid\tchange\tside\tcost\tsource\n"
                        "half\t{1} is that of one of two trains\tfactor 2\tstated\t1\town\n")
        answer = session.answers("check 100 Nm3/h of N2 against 50.00 Nm3/h\n",
                                 ["--tables", folder])[0]
    said = [one["reading"] for one in answer.get("readings", [])]
    return "" if said == ["the stated figure is that of one of two trains"] else str(answer)


def needed():
    """What would have to be true: pV = nRT, with the barometer and with the temperature."""
    answer = session.answers("check 100 m3/h of N2 at 2.000 bar(g), 20 degC, Z 1 in Nm3/h "
                             "against 250.000 Nm3/h\n")[0]
    found = {one["what"]: one["value"] for one in answer["check"]["needed"]}
    p = 250 * 101325 / 273.15 * 293.15 / 100
    return [line for line in (
        session.off(found["barometer"], (p - 2e5) / 1e5, 1e-6),
        session.off(found["pressure"], p / 1e5, 1e-6),
        session.off(found["temperature"], 100 * 301325 * 273.15 / 101325 / 250 - 273.15, 1e-6))
            if line]


def main():
    tap = session.Tap()
    tap.tell(own_reading(), "a reading of the user's own table is tried")
    tap.tell(needed(), "what would have to be true when nothing explains a figure")
    for row in session.rows("sessions/quarrels.tsv"):
        tap.tell(wrong(row), row["quarrel"])
    return tap.finish()


sys.exit(main())
