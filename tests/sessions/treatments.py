"""Treatments of analyses do a thing once and say it; traces are told on the basis that is asked.

Expected figures are computed here from the definitions: molar masses CIAAW 2021 (g/mol), R CODATA
2018; dry = wet/(1 - y); the oxygen correction of Directive 2010/75/EU, Annex VI.  Random lists come
from one fixed seed."""
import random
import re
import sys

import session

SEED = 20240615
M = {"NO": 30.006, "NO2": 46.005, "SO2": 64.058, "H2S": 34.076, "CO": 28.010}
R = 8.314462618
NORMAL = R * 273.15 / 101325              # m3/mol
GASES = ("CH4", "CO2", "N2", "O2", "H2O", "H2S", "C2H6")


def fractions(objects):
    """The compositions the objects answer with."""
    return [[answer["value"] for answer in thing["answers"]] for thing in objects
            if thing.get("answers")]


def notes(objects):
    return [line for thing in objects for line in thing.get("notes", [])]


def twice(tap, rng):
    """What was done once is done: the same treatment again changes no digit and says nothing."""
    for i in range(12):
        parts = rng.sample(GASES, rng.randint(3, 6))
        figures = [rng.uniform(1, 30) for _ in parts]
        listed = ", ".join("%s %r" % pair for pair in zip(parts, figures))
        share = rng.uniform(1, 20)
        dry = parts[0] if parts[0] != "H2O" else parts[1]
        for how in ("normalised", "normalised dried", "normalised wetted to %r mol%%" % share,
                    "normalised saturated at 30 degC, 2 bar(a)",
                    "normalised without %s normalised" % dry):
            again = "normalised" if "without" in how else how.split(" ", 1)[-1]
            objects = session.answers("gas a = %s mol%%\ngas b = a %s\ngas c = b %s\n"
                                      "b in mol/mol\nc in mol/mol\n" % (listed, how, again))
            found = fractions(objects)
            wrong = session.faults(objects)
            if not wrong and len(found) == 2:
                wrong = [session.off(x, y, 4e-16, "abs") for x, y in zip(*found)
                         if session.off(x, y, 4e-16, "abs")]
                told = [line for line in objects[-1]["notes"] if "multiplied" in line]
                wrong += told
            tap.tell(wrong or ([] if len(found) == 2 else ["no answers"]),
                     "twice %s, list %d, seed %d" % (how, i, SEED))


def each_says(tap):
    """Every word says what it removed, scaled or added."""
    said = (("lab normalised", r"total 100\.7 mol%, every part multiplied by 0\.993049"),
            ("lab normalised", r"had N2 taken the difference, it would be 4\.5 mol%"),
            ("lab normalised into N2", r"the difference goes to N2 \(-0\.7 mol%\)"),
            ("lab without CO2 normalised", r"CO2 taken away \(37 mol%\)"),
            ("lab without air normalised", r"5\.25\d* mol% of air taken away, O2 as tracer"),
            ("lab without air by N2+Ar normalised", r"of air taken away, N2\+Ar as tracer"),
            ("lab without air by N2+Ar normalised", r"of O2, and 1\.1 mol% is there"),
            ("lab without air by N2+Ar normalised", r"the other tracer, O2 5\.25\d* mol%"),
            ("(N2 77, O2 20, CO2 3 mol%) without air normalised",
             r"most of it was air; .* moves the rest by 21\.1 %"),
            ("damp dried", r"H2O taken away \(10 mol%\)"),
            ("lab normalised wetted to 5 mol%", r"water added: .*5 mol%"),
            ("damp wetted to 5 mol%", r"water taken away: "))
    for gas, pattern in said:
        objects = session.answers("gas lab = CH4 57.4, CO2 37.0, N2 5.2, O2 1.1 mol% dry\n"
                                  "gas damp = CH4 90, H2O 10 mol%\ngas g = " + gas
                                  + "\nmolar mass of g\n")
        lines = notes(objects)
        tap.tell([] if any(re.search(pattern, line) for line in lines) else [pattern, *lines],
                 "%s says %s" % (gas, pattern))
    card = session.run("gas lab = CH4 57.4, CO2 37.0, N2 5.2, O2 1.1 mol% dry\n"
                       "gas g = lab without air normalised\nshow g\n", "text")[1]
    for pattern in (r"mol% +raw mol% +mass% +raw mass% +g/Nm3 +raw g/Nm3 +stated as",
                    r"O2 \.+ +0 +1\.10000 +0 +1\.29\d* +0 +15\.70\d* +1\.1",
                    r"raw: as stated, total 100\.7 mol%"):
        tap.tell([] if re.search(pattern, card) else [pattern, card], "the card has " + pattern)
    card = session.run("gas lab = CH4 57.42 ± 0.30 (k=2), CO2 39.61 ± 0.25 (k=2), N2 1.83, "
                       "O2 0.52, H2S 8 ± 4 ppm mol% dry\ngas g = lab normalised\nshow g\n",
                       "text")[1].split("molar mass")[0]
    wide = [line for line in card.split("\n") if len(line) > 100]
    tap.tell(wide, "the card of a long analysis keeps within 100 columns")
    for pattern in (r"\n +mol% +raw mol% +stated as\n", r"\n +mass% +raw mass% +stated as\n",
                    r"\n +g/Nm3 +raw g/Nm3 +stated as\n",
                    r"\n +H2S \.+ +0\.000[^\n]+ 8 ppm . 4\n(.*\n)*.*H2S \.+ +0\.012[^\n]+ 8 ppm"):
        tap.tell([] if re.search(pattern, card) else [pattern, card],
                 "every basis stands beside its raw figure: " + pattern)


def below(tap):
    """<limit: zero, half, limit, and the range."""
    for word, ppm in (("zero", 0), ("half", 2.5), ("limit", 5)):
        thing = session.answers("gas f = N2 rest, CO2 12, SO2 <5 ppm vol%% dry\n"
                                "set below detection %s\nSO2 of f in mg/Nm3\n" % word)[-1]
        want = ppm * 1e-6 * M["SO2"] * 1000 / NORMAL
        tap.tell(session.off(thing["answers"][0]["value"], want, 3e-5, "rel" if want else "abs"),
                 "below detection: " + word)
        told = [line for line in thing["notes"] if re.search(r": 0 to 14\.28\d* mg/Nm3$", line)]
        tap.tell([] if told else thing["notes"], "the range is told with " + word)
        wrong = [line for line in thing["notes"] if "no SO2 was stated" in line]
        tap.tell(wrong, "it was stated, with " + word)


def wet_and_dry(tap, rng):
    """Dry figures with wet flows, NO and NO2 together as NO2, reference oxygen."""
    for i in range(8):
        flow, y, no, no2 = (rng.uniform(1e3, 1e5), rng.uniform(1, 30), rng.uniform(5, 500),
                            rng.uniform(1, 50))
        oxygen, reference = rng.uniform(2, 15), rng.uniform(0, 15)
        text = """set gas model ideal; set oxygen in air 21 mol%%
gas flue = O2 %r, NO %r ppm, NO2 %r ppm, N2 rest mol%% dry
stream stack = %r Nm3/h of flue at 150 degC, 1 atm, water %r mol%%
NO of stack in kg/h as a
%r ppm dry of NO within stack in kg/h as b
%r ppm wet of NO within stack in kg/h as c
NO+NO2 of stack in kg/h counted as NO2 as d
NO of stack + NO2 of stack in kg/h counted as NO2 as e
NO+NO2 of stack in mg/Nm3 counted as NO2, dry, %r %%O2 as f
NO+NO2 of stack in ppm wet as g
NO+NO2 of flue in mg/Nm3 as h
%r mg/Nm3 dry of NO within stack at %r %%O2 in kg/h as k
""" % (oxygen, no, no2, flow, y, no, no, reference, no, reference)
        found = session.figures(session.answers(text))
        dry = flow / NORMAL * (1 - y / 100) * 1e-6
        both = (no + no2) * 1e-6
        factor = (21 - reference) / (21 - oxygen)
        want = {"a": dry * no * M["NO"] / 1000, "b": dry * no * M["NO"] / 1000,
                "c": flow / NORMAL * 1e-6 * no * M["NO"] / 1000,
                "d": dry * (no + no2) * M["NO2"] / 1000, "e": dry * (no + no2) * M["NO2"] / 1000,
                "f": both * M["NO2"] * 1000 / NORMAL * factor,
                "g": both * 1e6 * (1 - y / 100),
                "k": flow / NORMAL * (1 - y / 100) * NORMAL * no * 1e-6
                     * (21 - oxygen) / (21 - reference),
                "h": (no * M["NO"] + no2 * M["NO2"]) / 1000 / NORMAL}
        wrong = [label + ": " + session.off(found[label][0]["value"], value, 1e-9)
                 for label, value in want.items()
                 if label not in found or session.off(found[label][0]["value"], value, 1e-9)]
        tap.tell(wrong, "wet and dry %d, seed %d" % (i, SEED))
        shares = r"^[\d.]+ (ppm|mol%) of the wet gas, [\d.]+ (ppm|mol%) of the dry$"
        wrong = [label for label in "abcdek" if not re.match(shares, found[label][0]["basis"])]
        tap.tell(wrong, "both shares are told %d" % i)


def refused(tap):
    """What has two readings is asked back; a correction near air says nothing."""
    setting = """set oxygen in air 20.95 mol%
gas flue = O2 %r, NO 100 ppm, N2 rest mol%% dry
stream stack = 9000 Nm3/h of flue at 150 degC, 1 atm, water 12 mol%%
"""
    setting = setting.replace("20.95 mol%\n", "20.95 mol%%\n")
    thing = session.answers(setting % 5 + "100 ppm of NO within stack in kg/h\n")[-1]
    wrong = [] if "dry of NO within" in thing.get("error", {}).get("hint", "") else [str(thing)]
    tap.tell(wrong, "dry or wet is asked")
    for oxygen, kind in ((20.6, "range"), (20.95, "range"), (18.5, ""), (5, "")):
        thing = session.answers(setting % oxygen + "NO of flue in ppm dry, 3 %O2\n")[-1]
        got = thing.get("error", {}).get("kind", "")
        tap.tell("" if got == kind else str(thing), "a correction at %g %% O2" % oxygen)
        near = any("is near that of air" in line for line in thing.get("notes", []))
        tap.tell("" if near == (oxygen == 18.5) else str(thing), "is it near air: %g %%" % oxygen)
    thing = session.answers(setting % 5 + "100 ppm of NO of stack in kg/h\n")[-1]
    told = [line for line in thing["notes"] if "of the NO there is, not of the gas" in line]
    tap.tell([] if told else [str(thing)], "a share of a component says so")


def main():
    tap = session.Tap()
    rng = random.Random(SEED)
    twice(tap, rng)
    each_says(tap)
    below(tap)
    wet_and_dry(tap, rng)
    refused(tap)
    return tap.finish()


sys.exit(main())
