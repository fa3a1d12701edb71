"""Energy and real gases through the language: the figures of numbers/energy.tsv, what must stand
under an answer, what is refused, round trips, and a random walk over all of it."""
import itertools
import math
import random
import sys

import session

SEED = 20261202
CLOSE = 1e-12           # relative, of every round trip
COMPONENTS = ("N2", "O2", "CO2", "CH4", "C2H6", "C3H8", "H2", "CO", "Ar", "He", "H2S", "nC4H10")
FUELS = ("CH4", "C2H6", "C3H8", "H2", "CO", "H2S", "nC4H10")
ENERGIES = ("MW gross", "MW net", "kW gross", "MMBtu/h gross", "MMBtu/h net", "GJ/day gross",
            "kWh/day net")
FLOWS = ("kg/h", "lb/h", "kmol/h", "Nm3/h", "Sm3/h", "scfm", "Nm3/h real")
MODELS = ("auto", "ideal", "Peng-Robinson", "GERG-2008", "AGA8-DETAIL")

# Statements in front, the question, where to look (basis, taken, notes, cautions), what must be
# there; with "no" before the place, what must not.
SAYS = (
    ("", "gross calorific value of CH4 in MJ/m3", "basis", "gross, combustion 15 degC"),
    ("", "gross calorific value of CH4 in MJ/m3", "basis", "ideal, ISO 6976:2016"),
    ("", "gross calorific value of CH4 in MJ/m3", "taken", "Sm3 at 15 degC, 101.325 kPa"),
    ("", "gross calorific value of CH4 in MJ/m3", "taken", "combustion at 15 degC (at 25 degC: "),
    ("", "wobbe of CH4 at 15 degC, 101.325 kPa(a), real in MJ/m3", "basis", "real, ISO 6976:2016"),
    ("", "relative density of CH4 at 15 degC, 1 atm, real", "basis",
     "15 degC, 1.01325 bar(a), real, ISO 6976:2016"),
    ("", "net wobbe of CH4", "basis", "net, combustion 15 degC"),
    ("set calorific values ISO 6976:1995", "wobbe of CH4", "basis", "ISO 6976:1995"),
    ("set combustion at 25 degC", "1 kg/h of CH4 in kW gross", "basis", "combustion 25 degC"),
    ("", "gross calorific value of NH3", "no notes", "formation"),
    ("", "gross calorific value of DMDS", "notes", "enthalpies of formation: ISO 6976 lacks it"),
    ("", "gross calorific value of DME", "notes", "enthalpies of formation: ISO 6976 lacks it"),
    ("gas a = CH4 99, TMA 1 mol%", "gross calorific value of a", "notes",
     "TMA from enthalpies of formation"),
    ("gas a = CH4 99.996, HCl 0.004 mol%", "gross calorific value of a", "notes",
     "HCl counts zero"),
    ("", "density of CH4 at 15 degC, 50 bar(a)", "basis", "GERG-2008"),
    ("", "density of CH4 at 15 degC, 50 bar(a)", "taken", "GERG-2008 within 0.1 %, Z 0.905"),
    ("", "density of CH4 at 15 degC, 50 bar(a)", "taken", "(ideal gas: -"),
    ("", "density of C2H4 at 15 degC, 20 bar(a)", "basis", "Peng-Robinson"),
    ("", "density of C2H4 at 15 degC, 20 bar(a)", "taken", "gas model Peng-Robinson"),
    ("", "density of C2H4 at 15 degC, 20 bar(a)", "notes", "GERG-2008 lacks C2H4"),
    ("", "density of CH4 at 15 degC, 900 bar(a)", "notes", "beyond the range of GERG-2008"),
    ("", "density of CH4 at 15 degC, 50 bar(a)", "no notes", "lacks"),
    ("set gas model Peng-Robinson", "density of C2H4 at 15 degC, 20 bar(a)", "no notes",
     "GERG-2008"),
    ("gas a = CH4 99.7, C2H4 0.3 mol%", "density of a at 15 degC, 50 bar(a)", "basis",
     "GERG-2008"),
    ("gas a = CH4 99.7, C2H4 0.3 mol%", "density of a at 15 degC, 50 bar(a)", "notes",
     "GERG-2008 lacks 0.3 mol%"),
    ("gas a = CH4 99.4, C2H4 0.6 mol%", "density of a at 15 degC, 50 bar(a)", "basis",
     "Peng-Robinson"),
    ("set gas model AGA8-DETAIL", "Z of CH4 at 15 degC, 50 bar(a)", "basis", "AGA8-DETAIL"),
    ("set gas model AGA8-DETAIL", "Z of CH4 at 15 degC, 50 bar(a)", "notes",
     "AGA8-DETAIL within 0.1 %"),
    ("set gas model GERG-2008", "Z of CH4 at 15 degC, 50 bar(a)", "notes", "GERG-2008 within"),
    ("set gas model GERG-2008", "Z of N2 at 20 degC, 2000 bar(a)", "notes",
     "GERG-2008 beyond its range"),
    ("set gas model AGA8-DETAIL", "Z of N2 at 500 degC, 1 bar(a)", "notes",
     "AGA8-DETAIL beyond its range"),
    ("set gas model ideal", "cp of CH4 at 15 degC, 50 bar(a)", "basis", "no effect of pressure"),
    ("", "cp of CH4 at 15 degC, 50 bar(a)", "basis", "GERG-2008"),
    ("gas a = C3H8 99, C2H6 1 mol%", "density of a at 20 degC, 10 bar(a)", "notes",
     "part may be liquid"),
    ("", "density of C3H8 at 20 degC, 8 bar(a)", "no notes", "liquid"),
    ("", "viscosity of CH4 at 15 degC, 1 bar(a)", "basis", "low pressure"),
    ("", "viscosity of CH4 at 15 degC, 40 bar(a)", "notes", "at 40 bar(a) the true one is higher"),
    ("", "viscosity of CH4 at 15 degC, 5 bar(a)", "no notes", "the true one"),
    ("gas a = CH4 60, CO2 40 mol%", "viscosity of a at 15 degC, 1 bar(a)", "basis",
     "Wilke"),
    ("", "second virial coefficient of CH4 at 20 degC", "basis", "20 degC, smoothed measurements"),
    ("", "second virial coefficient of (CH4 60, CO2 40 mol%) at 20 degC", "basis",
     "pairs estimated by Tsonopoulos (1974)"),
    ("", "second virial coefficient of (CH4 60, C2F6 40 mol%) at 20 degC", "basis",
     "pairs and C2F6 estimated"),
    ("", "second virial coefficient of CH4 at 250 degC", "notes", "beyond the range of its source"),
    ("", "lower flammable limit of CH4", "basis", "Le Chatelier"),
    ("", "lower flammable limit of CH4", "cautions", "competent person"),
    ("", "lower flammable limit of CH4", "notes", "an estimate, no limit to work to"),
    ("gas a = CH4 50, N2 50 mol%", "flammable limits of a", "notes", "on the safe side"),
    ("gas a = CH4 50, N2 50 mol%", "flammable limits of a at 200 degC, 1 atm", "notes",
     "what 200 degC, 1.01325 bar(a) does to them is not counted"),
    ("gas a with molar mass 19.8 g/mol, gross calorific value 39.1 MJ/Sm3",
     "gross calorific value of a", "basis", "as stated"),
    ("gas a = CH4 10, air 90 mol%", "flammable limits of a", "cautions",
     "a lies between its flammable limits"),
    ("", "flammable limits of (CH4 10, air 90 mol%)", "cautions",
     "the gas lies between its flammable limits"),
    ("gas a = air saturated at 20 degC, 1 atm", "H2O of a in mol%", "notes",
     "enhancement factor 1.00399 for water in air (Greenspan 1976)"),
    ("gas b = CH4 60, CO2 40 mol%; gas a = b saturated at 20 degC, 1 atm", "H2O of a in mol%",
     "no notes", "enhancement"),
    ("gas b = CH4 60, CO2 40 mol%; gas a = b saturated at 20 degC, 20 bar(a)", "H2O of a in mol%",
     "notes", "no enhancement factor is known for water in this gas"),
    ("gas a = CH4 99.95, H2O 0.05 mol%", "water dew point of a at 50 bar(a)", "notes",
     "air at 0 degC 3.7 % more at 10 bar, 7.5 % at 20 bar"),
    ("gas a = air saturated at 0 degC, 10 bar(a)", "H2O of a in mol%", "notes",
     "enhancement factor 1.0369"),
    ("gas a = air saturated at 0 degC, 20 bar(a)", "H2O of a in mol%", "notes",
     "enhancement factor 1.0748"),
    ("gas a = air wetted to 50 ppm", "water dew point of a at 50 bar(a)", "notes",
     "beyond the range of the enhancement factor"),
    ("", "12000 Nm3/h * 50 mg/Nm3 in kg/h", "notes", "one gas, dry or wet, at the same conditions"),
    ("let q = 12000 Nm3/h", "35 ppm * q in Nm3/h", "notes", "a flow times a concentration"),
    ("", "3 m3 * 1.2 kg/m3 in kg", "no notes", "concentration"),
    ("", "12000 Nm3/h * 5 % in Nm3/h", "no notes", "concentration"),
    # 335.05 Pa over liquid, 309.97 Pa over ice at 265.15 K (D. M. Murphy and T. Koop 2005).
    ("stream s = 1 kg/h of CH4 at 5 degC, 1 bar(a), dew point -8 degC", "H2O of s in ppm", "taken",
     "over ice, pure water (over supercooled liquid: +8.1 %)"),
    ("stream s = 1 kg/h of CH4 at -50 degC, 1 bar(a), dew point -60 degC", "H2O of s in ppm",
     "taken", "0.00108135 kPa over ice, pure water"),
    ("stream s = 1 kg/h of CH4 at -5 degC, 1 bar(a), saturated", "H2O of s in ppm", "taken",
     "kPa over ice, pure water"),
    ("gas a = air saturated at 95 degC, 1 atm", "H2O of a in mol%", "notes",
     "beyond the range of the enhancement factor"),
    ("gas a = air wetted to 0.05 mol%", "water dew point of a at 20 degC, 1 atm", "basis",
     "over ice"),
    ("gas a = air wetted to 1 mol%", "water dew point of a at 20 degC, 1 atm", "basis",
     "over liquid water"),
    ("stream a = 1 kg/h of N2 at 20 degC, 5 bar(a); stream b = 1 kg/h of CO2 at 90 degC, 3 bar(a);"
     " stream c = a + b", "temperature of c", "notes", "no heat lost, enthalpies of ideal gases"),
)

# Statements in front, the one that is refused, its kind, and a part of its message or hint.
REFUSED = (
    ("gas a = CH4 60, CO2 40 mol%", "5 MW of a", "gross-or-net", "5 MW gross of"),
    ("gas a = CH4 60, CO2 40 mol%", "5 kg/h of a in MW", "gross-or-net", "in MW gross, in MW net"),
    ("", "10 MMBtu/h of CH4 in kg/h", "gross-or-net", "gross or net"),
    ("stream s = 5 kg/h of CH4; stream t = 5 % of s", "t / s in MJ/MJ", "gross-or-net",
     "in MJ/MJ gross"),
    ("", "gross calorific value of CH4 in MJ/Nm3 net", "unit-mismatch", "this figure is gross"),
    ("", "net wobbe of CH4 in kWh/m3 gross", "unit-mismatch", "this figure is net"),
    ("", "5 kg/h of CH4 in Nm3/h net", "word-place", "words for energy"),
    ("", "density of CH4 at 20 degC, 1 bar(a) in kg/m3 gross", "word-place", "words for energy"),
    ("", "5 kg/h of CH4 in %RH", "unit-mismatch", "volume or energy"),
    ("", "5 MW gross of CO2", "range", "does not burn"),
    ("", "5 MW net of N2 in Nm3/h", "range", "does not burn"),
    ("", "gross calorific value of HCl", "calorific-unknown", "HCl"),
    ("gas a = CH4 60, HCl 40 mol%", "wobbe of a", "calorific-unknown", "HCl"),
    ("", "density of C3H8 at 20 degC, 20 bar(a)", "state-liquid", "C3H8 is a liquid"),
    ("", "density of C3H8 at 20 degC, 10 bar(a)", "state-liquid", "C3H8 is a liquid"),
    ("", "cp of C3H8 at 20 degC, 10 bar(a)", "state-liquid", "C3H8 is a liquid"),
    ("", "speed of sound of C3H8 at 20 degC, 20 bar(a)", "state-liquid", "C3H8 is a liquid"),
    ("", "Z of CO2 at 10 degC, 60 bar(a)", "state-liquid", "CO2 is a liquid"),
    ("", "1 m3/h of nC4H10 at 20 degC, 20 bar(a) in kg/h", "state-liquid", "is a liquid"),
    ("set gas model GERG-2008", "Z of C2H4 at 20 degC, 5 bar(a)", "model-lacks", "C2H4"),
    ("set gas model AGA8-DETAIL", "Z of NH3 at 80 degC, 1 bar(a)", "model-lacks", "NH3"),
    ("gas a with molar mass 19.8 g/mol, gross calorific value 39 MJ/m3", "net wobbe of a",
     "calorific-unknown", "net calorific value ..."),
    ("gas a with molar mass 19.8 g/mol", "relative density of a at 15 degC, 1 atm, real",
     "model-lacks", "its compression factor was not stated"),
    ("gas a with molar mass 19.8 g/mol", "cp of a at 20 degC, 1 bar(a)", "model-lacks",
     "only what was stated of a is known"),
    ("gas a with molar mass 19.8 g/mol", "flammable limits of a", "model-lacks",
     "only what was stated of a is known"),
    ("stream a = 1 kg/h of N2; stream b = 1 kg/h of CO2 at 90 degC, 3 bar(a); stream c = a + b",
     "temperature of c", "kind-wrong", "the temperature of this stream is not stated"),
    ("", "cp of (CH4 90, N2 10 mol%)", "state-missing", "cp of ... at 20 degC, 1 bar(a)"),
    ("", "wobbe of CH4 + 3 kg/h", "unit-mismatch", ""),
    ("", "cp of CH4", "state-missing", "temperature and a pressure"),
    ("", "viscosity of CH4", "temperature-missing", "viscosity of CH4 at"),
    ("", "second virial coefficient of C7H14O2 at 20 degC", "model-lacks", "acentric factor"),
    ("", "flammable limits of N2", "range", "nothing in it burns"),
    ("", "flammable limits of air", "range", "too little fuel"),
)

# Blends of known temperature: noble gases have the cp 5/2 R at all temperatures; figures in
# between from the caloric balance alone.  The last is from tabulated enthalpies.
BLENDS = (
    ("1 kmol/h of He at 20 degC, 2 bar(a)", "3 kmol/h of He at 100 degC, 2 bar(a)", 80, 1e-9),
    ("1 kmol/h of Ar at 0 degC, 2 bar(a)", "4 kmol/h of He at 50 degC, 5 bar(a)", 40, 1e-9),
    ("22 Nm3/h of Ne at 10 degC, 2 bar(a)", "22 Nm3/h of Kr at 70 degC, 2 bar(a)", 40, 1e-9),
    ("7 kg/h of CO2 at 33 degC, 2 bar(a)", "1 kg/h of CO2 at 33 degC, 9 bar(a)", 33, 1e-9),
    # H - H(298.15 K) of CO2 at 300, 350, 400 K: 0.069, 1.987, 4.003 kJ/mol (JANAF tables, 4th
    # edition, from memory); helium 20.786 J/(mol K).  0.0167 K for half a last digit, and some.
    ("1 kmol/h of He at 400 K, 1 bar(a)", "1 kmol/h of CO2 at 300 K, 1 bar(a)", 62.17, 0.06),
)

deal = random.Random(SEED)


def between(low, high, digits=6):
    """A figure from LOW to HIGH as it is typed, even in its logarithm."""
    return "%.*g" % (digits, math.exp(deal.uniform(math.log(low), math.log(high))))


def random_list(least_fuel=0):
    """Some components, at least LEAST_FUEL of them fuels, in mol% that add up to 100 as typed."""
    names = deal.sample(FUELS, least_fuel)
    names += deal.sample([n for n in COMPONENTS if n not in names], deal.randint(1, 4))
    weights = [deal.expovariate(1) + 0.02 for _ in names]
    shares = [round(100 * w / sum(weights), 4) for w in weights]
    shares[-1] = round(100 - sum(shares[:-1]), 4)
    return ", ".join("%s %r" % part for part in zip(names, shares)) + " mol%"


def find(objects, statement):
    """The last object that STATEMENT answers with."""
    return next((one for one in reversed(objects) if one["statement"] == statement), None)


def value(thing):
    """Its first figure, or none."""
    return thing["answers"][0]["value"] if thing and thing.get("answers") else None


def figures(tap):
    """Every row of the table: rows that share what stands in front run in one session."""
    rows = session.rows("numbers/energy.tsv")
    tap.tell([row["case"] for row in rows if not row["source"].strip()], "every row has a source")
    for before, group in itertools.groupby(rows, key=lambda row: row["before"]):
        group = list(group)
        objects = session.answers("\n".join([before] + [row["statement"] for row in group]) + "\n")
        for row in group:
            thing = find(objects, row["statement"])
            wrong = session.off(value(thing), float(row["value"]), float(row["tol"]), row["kind"])
            if not wrong and thing["answers"][0]["unit"] != row["unit"]:
                wrong = "in %s, not in %s" % (thing["answers"][0]["unit"], row["unit"])
            tap.tell([before, row["statement"], wrong] if wrong else [], row["case"])


def says(tap):
    for before, statement, where, part in SAYS:
        thing = find(session.answers(before + "\n" + statement + "\n"), statement)
        absent, _, place = where.rpartition(" ")
        if thing is None or "error" in thing:
            tap.tell(str(thing), statement)
            continue
        here = [a["basis"] for a in thing["answers"]] if place == "basis" else thing[place]
        held = any(part in one for one in here)
        tap.tell([] if held != bool(absent) else ["'%s' in %s:" % (part, where), *here],
                 "%s%s: %s says %s" % (before and before + "; ", statement, where, part))


def refused(tap):
    for before, statement, kind, part in REFUSED:
        thing = find(session.answers(before + "\n" + statement + "\n"), statement) or {}
        error = thing.get("error", {"kind": "answered", "message": str(thing), "hint": ""})
        wrong = [] if error["kind"] == kind else ["kind %s, not %s" % (error["kind"], kind)]
        if part not in error["message"] + error["hint"]:
            wrong.append("no '%s' in: %s / %s" % (part, error["message"], error["hint"]))
        tap.tell(wrong, "refused: " + statement)


def blends(tap):
    for number, (one, other, want, tol) in enumerate(BLENDS):
        objects = session.answers(
            "stream a = %s\nstream b = %s\nstream c = a + b\nstream d = b + a\n"
            "stream e = 30 %% of c\nstream f = c - e\nstream g = e + f\n"
            "temperature of c in degC\ntemperature of d in degC\ntemperature of g in degC\n"
            % (one, other))
        for name in "cdg":
            got = value(find(objects, "temperature of %s in degC" % name))
            tap.tell(session.off(got, want, tol, "abs"),
                     "blend %d, %s: %g degC" % (number + 1, name, want))


def round_trips(tap, name, cases, before):
    """CASES: a figure, the statements there and back, FIGURE in each for that of the one before."""
    wrong, figures_now = [], [figure for figure, _ in cases]
    for leg in range(len(cases[0][1])):
        lines = [case[1][leg].replace("FIGURE", str(f)) for case, f in zip(cases, figures_now)]
        objects = session.answers("\n".join(before + lines) + "\n")
        wrong += session.faults(objects)
        objects = [one for one in objects if one.get("answers")][-len(lines):]
        if wrong or len(objects) != len(lines):
            break
        figures_now = [repr(value(one)) for one in objects]
    if not wrong:
        wrong = ["seed %d: %s: %s, not %s" % (SEED, case[1], now, case[0])
                 for case, now in zip(cases, figures_now)
                 if not abs(float(now) / float(case[0]) - 1) <= CLOSE]
    tap.tell(wrong, "%s: %d round trips" % (name, len(cases)))


def energy_trips(tap):
    before = ["gas g%d = %s" % (i, random_list(1)) for i in range(20)]
    cases = []
    for _ in range(250):
        gas, (one, two), (power, other) = deal.randint(0, 19), deal.sample(FLOWS, 2), \
            deal.sample(ENERGIES, 2)
        way = (one, power, two, other, one)
        cases.append((between(0.01, 1e5), ["FIGURE %s of g%d in %s" % (here, gas, there)
                                           for here, there in zip(way, way[1:])]))
    round_trips(tap, "energy flows", cases, before)
    cases = [(between(0.01, 1e4), ["FIGURE %s of g%d in %s" % (here, n % 20, there)
                                   for here, there in (("kg", "MJ gross"), ("MJ gross", "kWh net"),
                                                       ("kWh net", "kg"))]) for n in range(60)]
    round_trips(tap, "amounts of energy", cases, before)


def actual_trips(tap):
    gases = ["gas g%d = CH4 %s, C2H6 %s, N2 %s, CO2 rest mol%%" % (
        i, between(60, 80, 4), between(1, 8, 3), between(1, 8, 3)) for i in range(10)]
    for model in MODELS[1:]:
        cases = []
        for _ in range(80):
            at = "at %s K, %s bar(a)" % (between(285, 400), between(0.5, 120))
            one, two = deal.sample(("kg/h", "kmol/h", "scfm", "MW net"), 2)
            gas = "of g%d %s in" % (deal.randint(0, 9), at)
            cases.append((between(0.01, 1e4), ["FIGURE %s %s m3/h" % (one, gas),
                                               "FIGURE m3/h %s %s" % (gas, two),
                                               "FIGURE %s %s acfm" % (two, gas),
                                               "FIGURE acfm %s %s" % (gas, one)]))
        round_trips(tap, "actual volumes, " + model, cases, gases + ["set gas model " + model])


def dew_trips(tap):
    before = ["gas b = CH4 60, CO2 40 mol%"]
    for gas in ("air", "b"):
        wrong = []
        dews = [between(0.1, 60, 5) for _ in range(25)] + \
               ["-" + between(0.5, 45, 5) for _ in range(25)]
        # Each at a pressure at which the gas can hold that much water.
        asked = [(dew, "at 70 degC, %s bar(a)" % between(1, 15, 4)) for dew in dews]
        lines = ["water dew point of (1 kg/h of %s %s, dew point %s degC) in degC" % (gas, at, dew)
                 for dew, at in asked]
        objects = session.answers("\n".join(before + lines) + "\n")
        for (dew, _), line in zip(asked, lines):
            # Two correlations and a search between: to a thousandth of the last digit shown.
            off = session.off(value(find(objects, line)), float(dew), 1e-6, "abs")
            wrong += ["seed %d: %s: %s" % (SEED, line, off)] if off else []
        tap.tell(wrong, "dew points of %s come back" % gas)


def shares(tap):
    """What the parts carry adds up to the whole; net is less than gross; a share is a share."""
    objects = session.answers(
        "gas g = CH4 55, C3H8 5, H2 10, CO2 20, N2 10 mol%\nstream s = 100 kg/h of g\n"
        "stream t = 5 % of s\nstream u = s keeping CH4 40 %, CO2 90 %\n"
        "s in MW gross, MW net\nCH4 of s in MW gross\nC3H8 of s in MW gross\nH2 of s in MW gross\n"
        "CO2 of s in MW gross\nt / s in MJ/MJ gross\nt / s in MJ/MJ net\nu / s in MJ/MJ gross\n"
        "s in kmol/h\ngross calorific value of g in MJ/mol\n")
    get = lambda text: value(find(objects, text))
    whole = get("s in MW gross, MW net")
    parts = [get(part + " of s in MW gross") for part in ("CH4", "C3H8", "H2", "CO2")]
    tap.tell(session.off(sum(parts), whole, 1e-12), "components carry the energy of the stream")
    tap.tell(session.off(parts[3], 0, 0, "abs"), "carbon dioxide carries none")
    net = find(objects, "s in MW gross, MW net")["answers"][1]["value"]
    tap.tell("" if 0.8 * whole < net < whole else "%r of %r" % (net, whole), "net below gross")
    for kind in ("gross", "net"):
        tap.tell(session.off(get("t / s in MJ/MJ " + kind), 0.05, 1e-12), "5 % of it, " + kind)
    tap.tell(session.off(get("u / s in MJ/MJ gross"), 0.4 * parts[0] / whole, 1e-12),
             "what 40 % of the methane carries")
    tap.tell(session.off(get("s in kmol/h") * get("gross calorific value of g in MJ/mol") / 3.6,
                         whole, 1e-12), "moles times the molar calorific value")


# What the random walk asks; G a gas, S a stream, AT a state.
WALK = (
    "gas g{n} = {list}", "stream s{n} = {f} {flow} of g{m} {at}", "stream s{n} = s{m} + s{k}",
    "stream s{n} = {p} % of s{m}", "set gas model {model}", "set combustion at {t} degC",
    "set calorific values ISO 6976:{year}", "set reference volumes {real}", "undo",
    "{f} {energy} of g{m} in {flow}", "{f} {flow} of g{m} in {energy}", "s{m} in {energy}, {flow}",
    "s{m} / s{k} in MJ/MJ gross", "CH4 of s{m} in MW net", "gross calorific value of g{m}",
    "net calorific value of g{m} in {heat}", "wobbe of g{m} {at}, real", "net wobbe of s{m}",
    "relative density of g{m} {at}, real", "density of g{m} {at}", "Z of g{m} {at}",
    "cp of g{m} {at}", "cv of g{m} {at}", "kappa of s{m} {at}", "speed of sound of g{m} {at}",
    "viscosity of g{m} {at}", "second virial coefficient of g{m} {at}",
    "flammable limits of g{m}", "upper flammable limit of s{m}",
    "temperature of s{m}", "water dew point of g{m} {at}", "H2O of (g{m} saturated {at}) in mol%",
    "show g{m}", "show s{m}", "{f} m3/h of g{m} {at} in kg/h", "density of g{m} {at} in mol/L",
    "gas g{n} with molar mass {f} g/mol, gross calorific value {p} MJ/Sm3", "list",
    "wobbe of g{m} / wobbe of s{k}", "net calorific value of s{m} - {p} MJ/m3",
    "gas g{n} = g{m} {p}, air rest mol%", "gas g{n} = g{m} wetted to {t} mol%",
)


def step():
    """A statement of the walk."""
    fill = {"n": deal.randint(0, 7), "m": deal.randint(0, 7), "k": deal.randint(0, 7),
            "list": random_list(deal.randint(0, 3)), "f": between(1e-6, 1e9, 4),
            "flow": deal.choice(FLOWS + ("m3/h",)), "energy": deal.choice(ENERGIES),
            "model": deal.choice(MODELS), "p": between(0.001, 100, 3),
            "t": deal.choice(("0", "15", "20", "25", "-300", "7", "400")),
            "year": deal.choice(("1995", "2016")), "real": deal.choice(("real", "ideal")),
            "heat": deal.choice(("kJ/mol", "MJ/kg", "MJ/m3", "kWh/Nm3", "Btu/scf", "kg/h", "K")),
            "at": "at %s degC, %s bar(a)" % (deal.choice((between(0.1, 900, 4),
                                                          "-" + between(0.1, 260, 4))),
                                             between(1e-4, 5000, 4))}
    return deal.choice(WALK).format(**fill)


def sums(tap):
    """Calorific values in sums: like figures of the same conditions, in MJ/m3."""
    lines = ["wobbe of CH4 - wobbe of C3H8 in MJ/m3", "wobbe of CH4 in MJ/m3",
             "wobbe of C3H8 in MJ/m3", "wobbe of CH4 / wobbe of C3H8",
             "net calorific value of CH4 / gross calorific value of CH4"]
    objects = session.answers("\n".join(lines) + "\n")
    less, one, other, ratio, net = (value(find(objects, line)) for line in lines)
    tap.tell(session.off(less, one - other, 1e-12), "a difference of two Wobbe indices")
    tap.tell(session.off(ratio, one / other, 1e-12), "a ratio of two Wobbe indices")
    # ISO 6976:2016, Table 3 and Annex A.
    tap.tell(session.off(net, 1 - 2 * 44.431 / 891.51, 1e-9), "net over gross of methane")


def every_figure(thing, path=""):
    """All numbers in THING, with the way to them."""
    if isinstance(thing, dict):
        for key, one in thing.items():
            yield from every_figure(one, path + "/" + key)
    elif isinstance(thing, list):
        for one in thing:
            yield from every_figure(one, path)
    elif isinstance(thing, float):
        yield path, thing


def walk(tap, count):
    """COUNT statements one after another: the program lives, every line is JSON, figures finite."""
    lines = ["gas g%d = %s" % (i, random_list(2)) for i in range(8)]
    lines += ["stream s%d = 100 kg/h of g%d at 20 degC, 1 bar(a)" % (i, i) for i in range(8)]
    lines += [step() for _ in range(count)]
    objects = session.answers("\n".join(lines) + "\n")
    wrong = ["seed %d: %s: %s %r" % (SEED, thing["statement"], path, figure)
             for thing in objects for path, figure in every_figure(thing)
             if not math.isfinite(figure)]
    tap.tell(wrong, "a walk of %d statements: every figure is finite" % count)
    answered = sum(1 for thing in objects if thing.get("answers"))
    failed = [thing for thing in objects if "error" in thing]
    tap.tell("" if answered > count / 4 else "%d" % answered, "a quarter of them answers")
    tap.tell(["seed %d: %s: %r" % (SEED, thing["statement"], thing["error"]) for thing in failed
              if not thing["error"]["message"] or "nan" in thing["error"]["message"].split()],
             "what is refused has a reason")
    status, text, errors = session.run("\n".join(lines) + "\n", "text")
    bad = [line for line in (text + errors).splitlines()
           if {"nan", "-nan", "inf", "-inf"} & set(line.replace(",", " ").split())]
    tap.tell(bad, "no figure that is none in the text; status %d" % status)


def main():
    tap = session.Tap()
    figures(tap)
    says(tap)
    refused(tap)
    shares(tap)
    sums(tap)
    blends(tap)
    energy_trips(tap)
    actual_trips(tap)
    dew_trips(tap)
    walk(tap, 3000)
    return tap.finish()


sys.exit(main())
