"""Sheets of stated figures: how many agree, under which readings, which stands alone; and what a
sheet is to the session: live, saved, taken back in one step.

The figures are worked out here from the ideal gas law and definitions: R by CODATA 2018, unit
factors of NIST SP 811 (2008), molar masses of CIAAW 2021 (air: tables/air.tsv, 28.9647 g/mol as in
US Standard Atmosphere 1976), altitude by ISO 2533."""
import os
import random
import sys
import tempfile

import session

SEED = 4_711
R, ICE, ATM, PSI, FT3 = 8.314462618, 273.15, 101325.0, 6894.757293168, 0.3048 ** 3
NM3, SM3, SCF = R * ICE / ATM, R * 288.15 / ATM, R * (519.67 / 1.8) / (14.696 * PSI)
M_CO2 = 44.009


def sheet(lines, of="CO2", before=(), name="offer"):
    """The check of a sheet of LINES."""
    statements = ["set gas model ideal", *before, "sheet %s of %s" % (name, of), *lines, "end",
                  "check " + name]
    answers = session.answers("".join(line + "\n" for line in statements))
    return answers[-1]


def names(answer, which):
    """Names of the figures that (do not) agree."""
    return [one["name"] for one in answer["check"]["figures"] if one["agrees"] == which]


def typed(value, digits=4):
    """VALUE to so many digits, without an exponent."""
    text = "%.*e" % (digits - 1, value)
    places = digits - 1 - int(text.split("e")[1])
    return "%.*f" % (max(places, 0), round(value, places))


def fixed(tap):
    offer = ["inlet: 1057 ft3/min at 32 degC", "duty: 1000 scfm"]
    answer = sheet(offer, "air")
    tap.tell("" if answer["check"]["outcome"] == "holds" and answer["check"]["agreeing"] == 2
             else str(answer), "an offer whose figures agree by the sea")
    answer = sheet(offer, "air", ["set site altitude 1600 m"])
    said = [one["reading"] for one in answer["readings"]]
    tap.tell("" if answer["check"]["agreeing"] == 2 and len(said) == 1
             and "altitude was left out" in said[0] else str(answer),
             "the same offer on a mountain: altitude was left out")
    n = 3000 / NM3
    flows = ["mass: %s kg/h" % typed(n * M_CO2 / 1000), "normal: 3000 Nm3/h",
             "inlet: %s m3/h at 20 degC, 1 atm" % typed(1.02 * n * R * 293.15 / ATM),
             "density: %s kg/m3 at 20 degC, 1 atm" % typed(M_CO2 / 1000 * ATM / (R * 293.15))]
    answer = sheet(flows)
    tap.tell("" if names(answer, False) == ["inlet"] and answer["check"]["agreeing"] == 3
             else str(answer), "three of four agree, and the inlet stands alone")
    wrong = [session.off(one["value"], want, 3e-4) for one, want in zip(
        answer["check"]["figures"], (n * M_CO2 / 1000, 3000, n * R * 293.15 / ATM,
                                     M_CO2 / 1000 * ATM / (R * 293.15)))]
    tap.tell([one for one in wrong if one], "what each figure would have to be")
    answer = sheet(["1000 Nm3/h", "1055 Sm3/h"], "feed", ["stream feed = 1000 Nm3/h of N2"])
    tap.tell("" if answer["check"]["outcome"] == "holds" else str(answer),
             "the figures of a stream are held against it")
    answer = sheet(["1055 Nm3/h", "1113 Sm3/h"], "feed", ["stream feed = 1000 Nm3/h of N2"])
    tap.tell("" if answer["check"]["agreeing"] == 0 else str(answer),
             "figures that agree with each other and not with the stream do not agree")
    answer = sheet(["mass: 1000 kg/h", "5.55 Nm3/h"])
    tap.tell("" if answer["check"]["agreeing"] == 0 and answer["check"]["outcome"] == "unexplained"
             else str(answer), "of two figures that differ neither agrees")


def lasting(tap):
    text = ("sheet offer of air; inlet: 1057 ft3/min at 32 degC; duty: 1000 scfm ± 2 %; end\n")
    with tempfile.TemporaryDirectory() as folder:
        first, second = (os.path.join(folder, name) for name in ("a.gw", "b.gw"))
        session.answers(text + 'save "%s"\n' % first)
        session.answers('open "%s"\nsave "%s"\n' % (first, second))
        with open(first, encoding="utf-8") as one, open(second, encoding="utf-8") as two:
            saved, again = one.read(), two.read()
    tap.tell("" if saved == again and text.strip() in saved else saved,
             "a sheet is saved on a line and reads back")
    answers = session.answers("gas g = N2 100 mol%\nsheet one of g\nkg: 1.2504 kg/h\n1 Nm3/h\nend\n"
                              "check one\ngas g = O2 100 mol%\ncheck one\n")
    found = [one["check"]["outcome"] for one in answers if "check" in one]
    tap.tell("" if found == ["holds", "unexplained"] or found == ["holds", "readings"]
             else str(answers), "a sheet follows its gas")
    answers = session.answers("sheet one of N2\n1 kg/h\n2 kg/h\nend\nundo\ncheck one\n")
    tap.tell("" if answers[-1].get("error", {}).get("kind") == "name-unknown" else str(answers),
             "a sheet is taken back in one step")
    answers = session.answers("gas g = N2 100 mol%\nsheet one of g\n1 kg/h\nend\nforget g\n")
    tap.tell("" if answers[-1].get("error", {}).get("kind") == "name-in-use" else str(answers),
             "a gas a sheet is of cannot be forgotten")


def made_up(tap):
    """Four flows of which one is wrong, all but it under one reading; and under none."""
    chance, missed = random.Random(SEED), []
    print("# seed %d" % SEED)
    for _ in range(100):
        T, flow = chance.randint(10, 45), chance.randint(200, 900) / 3.7
        n = flow / NM3
        altered = chance.choice((
            ("none", NM3, SM3), ("Nm3 at 15 degC, 101.325 kPa", SM3, SM3),
            ("Sm3 at 0 degC", NM3, NM3), ("Nm3 at 0 degC, 100 kPa", R * ICE / 1e5, SM3),
            ("Sm3 at 20 degC", NM3, R * 293.15 / ATM)))
        figures = {"mass": n * M_CO2 / 1000, "normal": n * altered[1], "standard": n * altered[2],
                   "inlet": n * R * (T + ICE) / ATM}
        units = {"mass": "kg/h", "normal": "Nm3/h", "standard": "Sm3/h",
                 "inlet": "m3/h at %d degC, 1 atm" % T}
        alone = chance.choice(("mass", "inlet")) if altered[0] == "none" else None
        if alone:
            figures[alone] *= chance.choice((0.9, 1.11, 1.3))
        answer = sheet(["%s: %s %s" % (name, typed(figures[name], 5), units[name])
                        for name in figures])
        said = [one["reading"] for one in answer["readings"]]
        good = (names(answer, False) == [alone] if alone
                else any(altered[0] in one for one in said) and answer["check"]["agreeing"] == 4)
        if not good:
            missed.append("%s %s: %s" % (altered[0], alone, answer["check"]))
    tap.tell(missed, "100 sheets made up: the reading is found, or the figure that stands alone")


def left_open(tap):
    """A volume without its state says what it was counted at, unless a reading says that."""
    before = "gas bio = CH4 60, CO2 40 mol%\n"
    for mass, taken in (("1150 kg/h", True), ("1215 kg/h", False)):
        answer = session.answers(before + "sheet meter of bio; 1000 m3/h; %s; end\ncheck meter\n"
                                 % mass)[-1]
        said = any("15 degC, 101.325 kPa: its state is not said" in one
                   for one in answer["taken"])
        tap.tell([] if said == taken else [str(answer)], "an open volume on a sheet, " + mass)


def weights(tap):
    """What was taken, with the most it moves any figure: 519.67/527.67 - 1, 1/1.01325 - 1, and for
    a stream nothing where figure and stream move alike.  By hand, of ideal gases."""
    before = "set gas model ideal\n"
    lines = "sheet one of N2; 9 scfm; 250 L/min at 20 degC, 0 bar(g); end\ncheck one\n"
    taken = session.answers(before + lines)[-1]["taken"]
    tap.tell([] if "scf at 60 degF, 14.696 psia (at 68 degF: -1.5 %)" in taken
             and "barometer 1.01325 bar (at 1 bar: -1.3 %)" in taken else taken,
             "what a sheet took says what its usual alternative moves")
    lines = "stream s = 9 scfm of N2\nsheet one of s; 9 scfm; 17 kg/h; end\ncheck one\n"
    taken = session.answers(before + lines)[-1]["taken"]
    tap.tell([] if any("68 degF: +1.5 %" in one for one in taken) else taken,
             "of a stream the mass moves against it, and the volume does not")


def main():
    tap = session.Tap()
    weights(tap)
    left_open(tap)
    fixed(tap)
    lasting(tap)
    made_up(tap)
    return tap.finish()


sys.exit(main())
