"""Every form a fact of a balance can take, against plain arithmetic; and what becomes of a balance
when something it leans on changes, when it is taken back, kept and opened again."""
import csv
import math
import os
import re
import sys
import tempfile

import session

R = 8.314462618                         # J/(mol K), CODATA 2018
M = {"CH4": 16.043, "CO2": 44.009, "N2": 28.014, "H2": 2.016}  # g/mol, CIAAW 2021, abridged
DIGESTER = "gas digester = CH4 60, CO2 40 mol%\nset gas model ideal\n"
ACTUAL = 100 * 2e5 / (R * 293.15) / 1e3         # kmol/h of 100 m3/h at 20 degC, 2 bar(a)


def block(*lines, solve="solve"):
    return "\n".join(["balance case", *lines, "end", solve]) + "\n"


def fed(*lines):
    return block("separate unit: feed = a + b", *lines)


# name, statements, question, value, relative tolerance; 3e-5 where molar masses enter
FORMS = [
    ("a flow by mass", fed("known feed = 500 kg/h of digester", "known a = 5 kmol/h of digester"),
     "feed in kmol/h", 500 / (0.6 * M["CH4"] + 0.4 * M["CO2"]), 3e-5),
    ("an actual volume", fed("known feed = 100 m3/h at 20 degC, 2 bar(a)",
                             "known composition of feed = digester", "known a = 1 kmol/h of CH4"),
     "feed in kmol/h", ACTUAL, 1e-9),
    ("a reference volume without its water",
     block("separate unit: feed = a + b", "known feed = 90 Nm3/h dry",
           "known composition of feed = (CH4 90, H2O 10 mol%)", "known a = 1 Nm3/h of CH4"),
     "feed in Nm3/h", 100, 1e-9),
    ("a share by mass", fed("known feed = 100 kg/h of digester", "known a = 30 mass% of feed",
                            "known CH4 of a = 97 mass%"), "a in kg/h", 30, 1e-9),
    ("a share by amount", fed("known feed = 100 kmol/h of digester", "known a = 30 % of feed",
                              "known CH4 of a = 97 mol%"), "a in kmol/h", 30, 1e-9),
    ("a ratio by mass", fed("known feed = 100 kg/h of digester", "known a / b = 0.25 kg/kg",
                            "known CH4 of a = 90 mol%"), "a in kg/h", 20, 1e-9),
    ("a sum on the left", fed("known a + b = 100 kmol/h of digester", "known a = 3 * b",
                              "known CH4 of a = 70 mol%"), "b in kmol/h", 25, 1e-9),
    ("a share of a sum of parts",
     fed("known feed = 100 kmol/h of digester", "known a = 50 kmol/h",
         "known (CH4 of a) / (CH4 of a + CO2 of a) = 97 %"), "CH4 of a in kmol/h", 48.5, 1e-9),
    ("mg per reference volume",
     fed("known feed = 1000 Nm3/h of (CH4 50, N2 50 mol%)", "known a = 500 Nm3/h",
         "known CH4 of b = 1000 mg/Nm3"), "CH4 of b in kg/h", 0.5, 1e-9),
    ("an energy flow", block("mix unit: a + b = c", "known a = 1 MW gross of CH4",
                             "known b = 2 MW gross of CH4", "known composition of c = CH4"),
     "c in MW gross", 3, 1e-9),
    # Of 20.9477 % of oxygen (U.S. Standard Atmosphere 1976, its parts adding up to 1).
    ("a stream that is called air", block("mix unit: fuel + air = c", "known fuel = 3 kmol/h of CH4",
                                          "known composition of air = air",
                                          "known O2 of c = 19 mol%"),
     "air in kmol/h", 3 * 0.19 / (0.209477 - 0.19), 1e-4),
    ("a split by a ratio", block("split tee: feed = a + b", "known feed = 100 kmol/h of digester",
                                 "known a / b = 3"), "CO2 of b in kmol/h", 10, 1e-9),
    ("parts of the flow of one component",
     fed("known feed = 100 kmol/h of digester", "known CH4 of a = 58 kmol/h",
         "known CO2 of a = 3 kmol/h"), "CO2 of b in kmol/h", 37, 1e-9),
    ("a stream defined before", "stream feed = 100 kmol/h of digester\n"
     + fed("known CH4 of a = 97 % of CH4 of feed", "known CO2 of a = 5 % of CO2 of feed"),
     "a in kmol/h", 60.2, 1e-9),
    ("what a stream cannot hold", fed("known feed = 100 kmol/h of digester", "absent CO2 of a",
                                      "known CH4 of a = 50 kmol/h"), "b in kmol/h", 50, 1e-9),
    ("the same behind known", fed("known feed = 100 kmol/h of digester", "known a without CO2",
                                  "known CH4 of a = 50 kmol/h"), "b in kmol/h", 50, 1e-9),
    ("a basis", block("split tee: feed = a + b", "known composition of feed = digester",
                      "known a = 30 % of feed", "per 10 kmol/h of feed"), "a in kmol/h", 3, 1e-9),
    ("a conversion", block("react kiln: fuel + blast = exit with CH4 + 2 O2 = CO2 + 2 H2O",
                           "known fuel = 10 kmol/h of CH4", "known blast = 30 kmol/h of O2",
                           "known conversion of CH4 in kiln = 97 %"),
     "CH4 of exit in kmol/h", 0.3, 1e-9),
    ("the extent of a second reaction",
     block("react kiln: fuel + blast = exit with CH4 + 2 O2 = CO2 + 2 H2O, 2 H2 + O2 = 2 H2O",
           "known fuel = 10 kmol/h of (CH4 50, H2 50 mol%)", "known blast = 30 kmol/h of O2",
           "known conversion of CH4 in kiln = 100 %",
           "known extent of reaction 2 of kiln = 2 kmol/h"), "O2 of exit in kmol/h", 18, 1e-9),
    ("a figure with a name", "let share = 30 %\nlet flow = 80 kmol/h\n"
     + block("split tee: feed = a + b", "known feed = flow of digester", "known a = share of feed"),
     "a in kmol/h", 24, 1e-9),
    ("nothing flows", block("mix unit: a + b = c", "known a = 10 kmol/h of digester",
                            "known composition of b = N2", "known b = 0 kmol/h"),
     "c in kmol/h", 10, 1e-9),
]

# half of what 1 m3/h, 0.5 K and 0.02 bar do to 100 m3/h at 20 degC, 2 bar(a), as squares
METER = math.sqrt(0.01 ** 2 + (0.5 / 293.15) ** 2 + 0.01 ** 2) * ACTUAL
UNCERTAIN = [
    ("T and P of a meter",
     fed("known feed = 100 +/- 1 m3/h at 20 +/- 0.5 degC, 2.0 +/- 0.02 bar(a)",
         "known composition of feed = digester", "known a = 1 kmol/h of CH4"),
     "feed in kmol/h", METER, 1e-3),
    ("an expanded one", fed("known feed = 100 kmol/h +/- 4 (k=2) of N2",
                            "known a = 30 kmol/h +/- 3 (limits) of N2"),
     "b in kmol/h", math.hypot(2, 3 / math.sqrt(3)), 1e-6),
]


def forms(tap):
    for name, words, question, value, tol in FORMS:
        objects = session.answers(DIGESTER + words + question + "\n")
        wrong = session.faults(objects)
        wrong = wrong or session.off(objects[-1]["answers"][0]["value"], value, tol)
        tap.tell(wrong, "balance form: " + name)
    for name, words, question, u, tol in UNCERTAIN:
        objects = session.answers(DIGESTER + words + question + "\n")
        wrong = session.faults(objects)
        wrong = wrong or session.off(objects[-1]["answers"][0].get("uncertainty"), u, tol)
        tap.tell(wrong, "balance uncertainty: " + name)


LIVE = DIGESTER + """\
let q = 800 kmol/h
balance plant
  separate membrane: feed = product + tail
  known feed = q of digester
  known CH4 of product = 97.00 mol%
  known CH4 of tail = 2.000 mol%
end
solve plant
stream more = product + 5 kmol/h of N2
"""


def product(q):
    """What the lever rule gives."""
    return q * (60 - 2) / (97 - 2)


def figure(objects, statement):
    return [thing["answers"][0]["value"] for thing in objects
            if thing.get("statement") == statement and "answers" in thing]


def live(tap):
    ask = "product in kmol/h\nmore in kmol/h\n"
    objects = session.answers(LIVE + ask + "let q = 900 kmol/h\n" + ask + "undo\n" + ask)
    got = figure(objects, "product in kmol/h") + figure(objects, "more in kmol/h")
    want = [product(q) for q in (800, 900, 800)]
    want += [w + 5 for w in want]
    tap.tell([session.off(g, w, 1e-9) for g, w in zip(got, want) if session.off(g, w, 1e-9)]
             or ([] if len(got) == 6 else ["%d figures" % len(got)]),
             "streams of a balance follow what it leans on, and back")
    objects = session.answers(LIVE + "undo\nundo\nundo\nlist\n")
    names = [row["name"] for row in objects[-1]["card"]["rows"]]
    tap.tell([] if names == ["digester", "q"] else [repr(names)],
             "a balance is one change to take back, its solution another")
    objects = session.answers(LIVE + "forget more\nforget plant\nlist\n")
    names = [row["name"] for row in objects[-1]["card"]["rows"]]
    tap.tell([] if names == ["digester", "q"] else [repr(names)],
             "a balance that is forgotten takes its streams along")
    again = LIVE.replace("97.00", "90.00").replace("let q = 800 kmol/h\n", "").split("balance")[1]
    objects = session.answers(LIVE + "balance" + again.split("stream")[0] + "product in kmol/h\n")
    tap.tell(session.faults(objects)
             or session.off(objects[-1]["answers"][0]["value"], 800 * 58 / 88, 1e-9),
             "a balance of the same name replaces the one before")


def digits(tap):
    """Facts that agree only within their digits are told as they are counted; whole numbers are
    good to 0.5 % at most, so that 4.5 where 4.0 would be clashes (5.2/130, by hand)."""
    three = ("known a = 60.0 kmol/h of (CO2 10.0, N2 rest mol%)",
             "known b = 40.0 kmol/h of (CO2 35.0, N2 rest mol%)", "known c = 100.0 kmol/h")
    notes = [session.answers(block("mix tee: a + b = c", *three, "known CO2 of c = %s mol%%" % x))
             [-1]["notes"] for x in ("20.0", "20.02")]
    tap.tell(notes[0], "what agrees to the last digit is not moved")
    tap.tell("" if len(notes[1]) == 4 and all("within" in one for one in notes[1]) else notes[1],
             "what agrees within its digits says what it is counted as")
    balance = session.answers(block(
        "react flame: fuel + blast = flue with CH4 + 2 O2 = CO2 + 2 H2O",
        "known fuel = 10 kmol/h of CH4", "known blast = 120 kmol/h of (O2 21, N2 79 mol%)",
        "known conversion of CH4 in flame = 100 %", "known O2 of flue = 4.5 mol%"))[-1]["balance"]
    needed = [one["needed"] for one in balance["suspects"] if "O2 of flue" in one["statement"]]
    tap.tell(session.off(needed[0] if needed else None, 100 * 5.2 / 130, 1e-6),
             "whole numbers do not give way")


def kept(tap):
    with tempfile.TemporaryDirectory() as folder:
        one, two = (os.path.join(folder, name) for name in ("one.gw", "two.gw"))
        session.answers(LIVE + 'save "%s"\n' % one)
        objects = session.answers('open "%s"\nmore in kmol/h\nsave "%s"\n' % (one, two))
        with open(one, encoding="utf-8") as first, open(two, encoding="utf-8") as second:
            same = first.read() == second.read()
    got = figure(objects, "more in kmol/h")
    tap.tell(([] if same else ["the files differ"]) + session.faults(objects)
             + [w for w in [session.off(got[0] if got else None, product(800) + 5, 1e-9)] if w],
             "a balance that is kept and opened says the same")


def blocks(tap):
    status, _, err = session.run("balance plant\nmix dosing: a + b = c\n", "text")
    tap.tell([] if status == 1 and re.search("closed with 'end'", err) else [err],
             "an open block at the end of input is an error that says so")
    status, out, _ = session.run("balance plant\nmix dosing: a + = c\nend\n5 kg in g\n")
    tap.tell([] if status == 1 and '"block-spoilt"' in out and "5000" in out else [out],
             "a block whose line failed is not kept")


def cards(tap):
    """What a balance is made of."""
    words = block("react kiln: fuel + blast = exit with CH4 + 2 O2 = CO2 + 2 H2O",
                  "known fuel = 10 kmol/h of CH4", "known blast = 30 kmol/h of O2",
                  "known conversion of CH4 in kiln = 97 %",
                  solve="show case equations\nshow case matrix")
    rows = [dict((row["name"], row["values"][0]) for row in thing["card"]["rows"])
            for thing in session.answers(words)]
    want = [("kiln, O2", "blast - 2 x extent of reaction 1 = exit"),
            ("kiln, CO2", "0 + 1 x extent of reaction 1 = exit")]
    tap.tell(["%s: %s" % (name, rows[0].get(name)) for name, text in want
              if rows[0].get(name) != text], "equations of a balance in words")
    line = "+1 O2 of blast  -1 O2 of exit  -2 extent of reaction 1 of kiln  = 0"
    tap.tell([] if rows[1].get("kiln, O2") == line else [repr(rows[1])],
             "equations of a balance as coefficients")
    # Two meters in series: each checks the other; u / sqrt(1 - h) = sqrt(u1^2 + u2^2), and
    # (1.9600 + 0.8416) times u1^2 over that of adjustments, with m = 2: z 2.2365 (Sidak).
    objects = session.answers(block("mix pipe: a = b", "known a = 100 +/- 3 kmol/h",
                                    "known b = 102 +/- 4 kmol/h",
                                    solve="show case detectability"))
    got = [row["values"][1] for row in objects[-1]["card"]["rows"]]
    want = (2.2365 + 0.8416) * 5
    tap.tell([w for w in (session.off(g, want, 1e-3) for g in got) if w] or
             ([] if len(got) == 2 else [repr(got)]), "how wrong a figure must be to be found")


def cautions(tap):
    """What is mixed by a balance may be a hazard: methane in air, 10 mol%, burns from 5 on."""
    objects = session.answers(block("mix unit: fuel + blast = charge", "known fuel = 10 kmol/h of CH4",
                                    "known blast = 90 kmol/h of air"))
    tap.tell([] if any("charge" in one and "flammable" in one for one in objects[0]["cautions"])
             else objects[0]["cautions"] or ["no caution"], "a balance warns of what it mixes")


def what_streams_hold(tap):
    """Shares of one component are 100 % or a clash, unless something says what else there is:
    where shares are all there is, a verdict that they do not agree says what it took."""
    lines = ("separate unit: feed = a + b", "known feed = 9 kmol/h", "known CH4 of feed = 60.0 mol%",
             "known CH4 of a = 90.0 mol%", "known CH4 of b = 10.0 mol%")
    said = [session.run(block(*more, *lines, *end), "text")[1] for more, end in (
        ((), ()), (("components CH4, CO2",), ()), ((), ("known composition of b = digester",)),
        ((), ("known CH4 of feed = 61.0 ± 0.1 mol%",)),
        (("components CH4, CO2",), ("known CH4 of feed = 61.0 ± 0.1 mol%",
                                    "known CH4 of feed = 60.5 ± 0.1 mol%")))]
    holds = "streams can hold       CH4 and nothing else"
    tap.tell([one for one, want in zip(said, (True, False, False, True, False))
              if (holds in one) != want], "a clash of shares says what streams were taken to hold")
    tap.tell([one for one in ("CH4 of feed (line 7)", "CH4 of feed (line 8)")
              if one not in said[-1]],
             "two analyses of one stream are told apart by their lines")


def extents(tap):
    """How far reactions go.  By hand: 78 of 100 are reformed; dry there are 334 + y, of which y is
    CO2, 6.8 %.  In the other 97 +/- 2 % of 10 kmol/h are burnt."""
    said = session.run(block(
        "react bed: natgas + water-vapour = syngas with CH4 + H2O = CO + 3 H2, CO + H2O = CO2 + H2",
        "known natgas = 100 kmol/h of CH4", "known water-vapour = 300 kmol/h of H2O",
        "known conversion of CH4 in bed = 78 %", "known CO2 of syngas = 6.8 mol% dry"), "text")[1]
    want = ("extent of              reaction 1 of bed: 78 kmol/h",
            "reaction 2 of bed: %.6g kmol/h" % (0.068 * 334 / 0.932))
    tap.tell([line for line in want if line not in said], "extents are told")
    said = session.run(block(
        "react kiln: fuel + blast = exit with CH4 + 2 O2 = CO2 + 2 H2O",
        "known fuel = 10 kmol/h of CH4", "known blast = 30 kmol/h of O2",
        "known conversion of CH4 in kiln = 97 +/- 2 %"), "text")[1]
    tap.tell([] if "extent of              kiln: 9.7 +/- 0.2 kmol/h" in said else [said],
             "an extent has its uncertainty")
    said = session.run(block(
        "react kiln: fuel + blast = exit with CH4 + 2 O2 = CO2 + 2 H2O",
        "known fuel = 10 kmol/h of CH4", "known blast = 30 kmol/h of O2"), "text")[1]
    tap.tell([] if "extent of  " not in said else [said], "an open extent is not told as one")


def tables(tap):
    """As CSV a verdict is there, whatever it is: 9 - 5 - 3 is 1, by hand."""
    meters = ("split tee: a = b + c", "known a = 9.00 kmol/h", "known b = 5.00 kmol/h")
    found = {}
    for name, more in (("clash", ("known c = 3.00 kmol/h",)), ("moved", ("known c = 3.9 ± 0.3 kmol/h",)),
                       ("complete", ())):
        out = session.run(block(*meters, *more), "csv")[1]
        found[name] = list(csv.DictReader(out.splitlines(keepends=True), strict=True))
    out = session.run(block(*meters[:2]), "csv")[1]
    found["short"] = list(csv.DictReader(out.splitlines(keepends=True), strict=True))
    said = {name: [row["value"] for row in rows if row["label"] == "verdict"]
            for name, rows in found.items()}
    want = {"clash": ["CLASH"], "moved": ["RECONCILED"], "complete": ["COMPLETE"],
            "short": ["SHORT BY 1"]}
    tap.tell([] if said == want else [repr(said)], "a verdict as CSV")
    needed = {row["value"]: row["basis"] for row in found["clash"] if row["label"][:5] == "line "}
    tap.tell([] if needed == {"known a = 9.00 kmol/h": "8 kmol/h", "known b = 5.00 kmol/h":
                              "6 kmol/h", "known c = 3.00 kmol/h": "4 kmol/h"}
             else [repr(needed)], "the lines of a clash as CSV")


def nothing_there(tap):
    """A line that says nothing is there takes its unknowns away: without it they would be open, so
    the others do not imply it, and nothing is to spare."""
    three = ("mix unit: a + b + c = d", "known a = 60 kmol/h of CH4", "known composition of b = CO2",
             "known composition of c = CO2", "known CH4 of d = 60 mol%")
    cases = (
        ("an inlet", three + ("known c = 0 kmol/h",)),
        ("an outlet of a split", ("split unit: a = b + c", "known a = 9 kmol/h of digester",
                                  "known b = 0 kmol/h")),
        ("a share of a split", ("split unit: a = b + c", "known a = 9 kmol/h of digester",
                                "known b = 0 % of a")),
        ("a part", ("separate unit: a = b + c", "known a = 9 kmol/h of digester",
                    "known CO2 of b = 0 mol%", "known CH4 of c = 10 mol%")),
        ("all other parts", ("separate unit: a = b + c", "known a = 9 kmol/h of digester",
                             "known CH4 of b = 100 mol%", "known CH4 of c = 10 mol%")),
    )
    for name, lines in cases:
        balance = session.answers(DIGESTER + block(*lines))[-1]["balance"]
        adds = balance["balances"] + balance["relations"] + balance["knowns"]
        tap.tell([] if balance["status"] == "determined" and balance["surplus"] == 0
                 and adds == balance["independent"] == balance["variables"]
                 and not balance["redundant"] else [str(balance)], "%s is nothing" % name)
    balance = session.answers(block(*three))[-1]["balance"]
    tap.tell([] if balance["degrees_of_freedom"] == 1 else [str(balance)],
             "an inlet that nobody says is nothing is open")
    balance = session.answers(DIGESTER + block(
        "mix unit: a + b = c", "known a = 9 kmol/h of digester", "known b = 0 kmol/h",
        "known c = 12 kmol/h"))[-1]["balance"]
    needed = {one["statement"]: one["needed"] for one in balance["suspects"]}
    tap.tell(session.off(needed.get("known b = 0 kmol/h", math.nan), 3, 1e-9),
             "what is said to be nothing is a suspect all the same")


def spreads(tap):
    """The table of streams: uncertainties of whole flows in any unit, worked out by hand.

    Two gases known by amount with independent uncertainties make a blend.  The variance of its
    flow in a unit that counts w per mole of methane and v per mole of carbon dioxide is
    (w u1)^2 + (v u2)^2, whatever the unit."""
    u1, u2 = 2.0, 1.5
    text = "set gas model ideal\n" + block(
        "mix unit: a + b = c",
        "known a = 100 +/- 2 kmol/h of CH4",
        "known b = 50 +/- 1.5 kmol/h of CO2",
        solve="solve case in kmol/h, kg/h, Nm3/h, MW gross, m3/h at 20 degC, 2 bar(a)")
    card = session.answers(text)[-1]["card"]
    row = {row["name"]: row for row in card["rows"]}["c"]
    molar = math.hypot(u1, u2)
    wobble = (100 * u2 / 150 ** 2, 50 * u1 / 150 ** 2)
    heat = session.answers("set gas model ideal\n1 kmol/h of CH4 in MW gross")[0]["answers"][0]
    want = [molar, math.hypot(u1 * M["CH4"], u2 * M["CO2"]),
            molar * R * 273.15 / 101.325, u1 * heat["value"],
            molar * R * 293.15 / 200, 100 * math.hypot(*wobble), 100 * math.hypot(*wobble)]
    wrong = [session.off(got, value, 3e-5) for got, value in zip(row["uncertainties"], want)]
    tap.tell([line for line in wrong if line], "uncertainties in every unit asked for")
    said = session.run(text, "text")[1]
    tap.tell([] if "150.0 ± 2.5" in said or "150.0 +/- 2.5" in said else [said],
             "a flow is rounded by its uncertainty")
    even = session.run(block(
        "mix unit: a + b = c", "separate other: c = d + e", "known a = 100 kg/h of CH4",
        "known b = 50 kg/h of CH4", "known c = 151 ± 2 kg/h", "known d = 80 kg/h",
        "known e = 70 kg/h", "around unit, other"), "text")[1]
    tap.tell([] if "in, 9.35 out, 0 kmol/h apart" in re.sub(r"(9\.3)\d+", r"\g<1>5", even)
             else [even], "an envelope that closes is nothing apart")
    tap.tell([line for line in ("Nm3/h: 0 degC, 101.325 kPa, ideal-gas volume",
                                "MW gross: gross, combustion 15 degC",
                                "taken: combustion at 15 degC") if line not in said],
             "what flows asked for stand on is said")
    some = session.answers(block(
        "mix unit: a + b = c", "known a = 100 ± 1 kmol/h of (CH4 60, CO2 40 mol%)",
        "known b = 50 ± 1 kmol/h", "known CO2 of b = 5 mol%", "known c = 151 ± 2 kmol/h",
        "known CO2 of c = 28.2 ± 0.5 mol%"))[-1]
    tap.tell([] if "exact, having no ±: composition of a, CO2 of b = 5 mol%" in some["taken"]
             else some["taken"], "what has no ± beside what has is exact, and that is said")
    wide = session.run("\n".join([
        "balance wide", "mix unit: in-a + in-b = out", "known in-a = 10 ± 1 Nm3/h of air",
        "known in-b = 20 ± 1 Nm3/h of air", "end", "solve wide", ""]), "text")[1]
    tap.tell([line for line in wide.splitlines() if " .." in line and len(line) > 100],
             "a table too wide for a line is parted")


def long_lists(tap):
    """Of a long list the first names and how many more there are; all of them in JSON and `show`.

    One balance of 21 metered flows has one figure to spare, so that all have the same test value:
    sqrt(chi2).  Of 21 flows that nothing but that balance ties, one at a time is any that closes
    it."""
    names = ["feed"] + ["line-%d" % i for i in range(1, 21)]
    lines = ["separate manifold: feed = " + " + ".join(names[1:])]
    meters = ["known feed = 205 +/- 1 kmol/h"] + ["known %s = 10 +/- 1 kmol/h" % n for n in names[1:]]
    text = block(*lines, *meters, solve="solve case\nshow case")
    said = " ".join(session.run(text, "text")[1].split())
    first = ", ".join(names[:8])
    wanted = ("no single reading stands out; %s and 13 more tie" % first,
              "stand out alike: " + ", ".join(names))
    tap.tell([line for line in wanted if line not in said], "a long tie is cut, and shown whole")
    lists = session.answers(text)[0]["balance"]["lists"]
    tap.tell([] if lists == [{"what": "stand out alike", "names": names}] else [lists],
             "a long tie is whole in JSON")
    short = block(*lines, *meters[2:], solve="solve case")
    answer = session.answers(short)[0]["balance"]
    wrong = [] if any(["flow of feed", "flow of line-1"] == one["names"][:2] or one["what"] ==
                      "fixed all the same" and one["names"] == names[2:]
                      for one in answer["lists"]) else [answer["lists"]]
    tap.tell(wrong, "what is fixed is cut, and whole in JSON")
    nine = block("separate manifold: feed = " + " + ".join(names[1:9]),
                 "known feed = 85 +/- 1 kmol/h", *meters[1:9], solve="solve case")
    said = " ".join(session.run(nine, "text")[1].split())
    tap.tell([] if ", ".join(names[:9]) + " tie" in said else [said],
             "nine names are not cut to eight and one more")


def main():
    tap = session.Tap()
    forms(tap)
    what_streams_hold(tap)
    tables(tap)
    extents(tap)
    nothing_there(tap)
    live(tap)
    digits(tap)
    kept(tap)
    blocks(tap)
    cards(tap)
    cautions(tap)
    spreads(tap)
    long_lists(tap)
    return tap.finish()


sys.exit(main())
