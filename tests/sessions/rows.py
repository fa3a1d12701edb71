"""Statements run once for each row of a table: the figures by the ideal gas law, and bad rows."""
import json
import os
import subprocess
import sys
import tempfile

import session

ASK = "q m3/h of CO2 at t degC, p bar(a) in Nm3/h as qn"


def volume(q, t, p):
    """Ideal gas: V p/T = V0 p0/T0, DIN 1343."""
    return q * p * 1e5 / 101325 * 273.15 / (273.15 + t)


def run(table, *options):
    """Status and the objects that the rows answer with."""
    with tempfile.TemporaryDirectory() as folder:
        data, first = os.path.join(folder, "data.csv"), os.path.join(folder, "first.gw")
        with open(data, "w", encoding="utf-8") as file:
            file.write(table)
        with open(first, "w", encoding="utf-8") as file:
            file.write("set gas model ideal\n")
        done = subprocess.run([session.program(), "--format", "json", "--rows", data, first,
                               *options], stdout=subprocess.PIPE, stderr=subprocess.PIPE,
                              check=False)
    return done.returncode, [json.loads(line) for line in done.stdout.decode().splitlines()]


def figures(objects, wanted):
    """What is not as wanted."""
    got = [thing["answers"][0]["value"] for thing in objects if "answers" in thing]
    if len(got) != len(wanted):
        return "%d figures, not %d" % (len(got), len(wanted))
    return [line for line in map(lambda g, w: session.off(g, w, 1e-9), got, wanted) if line]


def main():
    tap = session.Tap()
    status, objects = run("time,q,t,p,tag\n06:00,842,38,1.02,ok\n07:00,850,-3.5,1.03,ok\n",
                          "-e", ASK)
    tap.tell(figures(objects, [volume(842, 38, 1.02), volume(850, -3.5, 1.03)])
             or ("" if status == 0 else "status %d" % status), "each row with its own figures")
    status, objects = run("q;t;p\n842,5;38;1,02\n", "-e", ASK)
    tap.tell(figures(objects, [volume(842.5, 38, 1.02)]), "decimal commas where ';' parts cells")
    status, objects = run("q,t,p\n842,38,1.02\nn/a,38,1.02\n\n842,-300,1.02\n842,40,1.02\n",
                          "-e", ASK)
    places = [(thing["error"]["line"], thing["error"]["column"]) for thing in objects
              if "error" in thing]
    tap.tell(figures(objects, [volume(842, 38, 1.02), volume(842, 40, 1.02)])
             or ("" if status == 1 and places == [(3, 1), (5, 18)] else "%d %r" % (status, places)),
             "a bad row is told with its place, and the next one runs")
    status, objects = run('"gas flow",t\n100,20\n', "-e", "let x = 2",
                          "-e", 'x * ("gas flow" m3/h) of N2 at t degC, 1 atm in Nm3/h')
    tap.tell(figures(objects, [2 * volume(100, 20, 1.01325)]),
             "a heading of two words is a name in quotes; several statements a row")
    status, objects = run("q,t,p\n842,38,1.02\n")
    tap.tell("" if status == 2 else "status %d" % status, "rows without a statement are wrong use")
    status, objects = run('q,t,p\n842,"38\n', "-e", ASK)
    tap.tell("" if status == 1 and objects[-1]["error"]["kind"] == "csv-quote" else repr(objects),
             "a table that cannot be read is told")
    return tap.finish()


sys.exit(main())
