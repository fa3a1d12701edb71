"""What a balance says of facts that leave nothing, or too little, to stand on.

What hangs on last digits is held against the closed form of a mixer and its partial derivatives,
in exact fractions."""
import random
import sys
from fractions import Fraction

import session

SEED = 20261201


def solved(*lines, name="case"):
    """A balance as text."""
    return "\n".join(["balance " + name, *lines, "end", "solve " + name, ""])


def verdicts(texts):
    """The balances that TEXTS answer with, by name, and the faults."""
    objects = session.answers("".join(texts))
    return ({thing["balance"]["name"]: thing["balance"] for thing in objects
             if "balance" in thing}, session.faults(objects))


# ---- Last digits ----

class Mixer:
    """Two gases of CH4 in CO2 that make one: tenths and hundredths of a per cent."""

    def __init__(self, chance, name):
        self.name = name
        low = chance.randint(105, 600)
        self.rich = Fraction(low + chance.choice((1, 1, 2, 3, 5, 20, 150)), 10)
        self.lean = Fraction(low, 10)
        self.fuel = (self.lean + (self.rich - self.lean) * Fraction(chance.randint(2, 8), 10))
        self.fuel = Fraction(round(self.fuel * 100), 100)
        self.flow = Fraction(chance.randint(20, 900))

    def text(self):
        """Typed as it would be."""
        stream = "%s-%%s" % self.name
        rich, lean, fuel = (stream % s for s in ("rich", "lean", "fuel"))
        return solved("  mix dosing: %s + %s = %s" % (rich, lean, fuel),
                      "  components CH4, CO2", "  known %s = %d kmol/h" % (fuel, self.flow),
                      "  known CH4 of %s = %.1f mol%%" % (rich, self.rich),
                      "  known CH4 of %s = %.1f mol%%" % (lean, self.lean),
                      "  known CH4 of %s = %.2f mol%%" % (fuel, self.fuel), name=self.name)

    def worked(self):
        """The flows of rich and lean, and what half a last digit of each figure makes of them;
        the flow of fuel alone sets the scale."""
        width = self.rich - self.lean
        share = (self.fuel - self.lean) / width
        moves = self.flow / width * (Fraction(5, 1000) + Fraction(5, 100) * (1 - share)
                                     + Fraction(5, 100) * share)
        return self.flow * share, self.flow * (1 - share), moves


def look_mixer(mixer, balance):
    """What hangs on last digits, by how much, and on which lines."""
    rich, lean, moves = mixer.worked()
    want = {"flow of %s-%s" % (mixer.name, s): float(flow)
            for s, flow in (("rich", rich), ("lean", lean)) if moves > flow}
    found = {one["what"]: one for one in balance["practically_undetermined"]}
    wrong = []
    if set(found) != set(want):
        wrong.append("%r, not %r" % (sorted(found), sorted(want)))
    for what, one in found.items():
        for part, value in (("value", want.get(what, 0)), ("moves", float(moves))):
            wrong.append(session.off(one[part], value, 1e-9))
    for what in want:
        stream = balance["streams"][what[8:]]
        if stream["molar_flow"] is not None or stream["mass_flow"] is not None:
            wrong.append("%s is told as if it were known" % what)
    if want:
        lines = {one["statement"].split(" = ")[0] for one in balance["hangs_on"]}
        forms = {"known CH4 of %s-%s" % (mixer.name, s) for s in ("rich", "lean", "fuel")}
        if not lines or not lines <= forms:
            wrong.append("hangs on %r" % lines)
        if not any("flow of %s-rich" % mixer.name in group for group in balance["settled_by"]):
            wrong.append("settled by %r" % balance["settled_by"])
    if balance["status"] != "determined" or balance["degrees_of_freedom"] != 0:
        wrong.append("status " + balance["status"])
    return ["%s: %s" % (mixer.name, line) for line in wrong if line]


def mixers(tap):
    """Mixers at random: hanging or not is as worked out."""
    chance = random.Random(SEED)
    some = [Mixer(chance, "m%d" % i) for i in range(200)]
    balances, wrong = verdicts([m.text() for m in some])
    loose = 0
    for mixer in some:
        if mixer.name in balances:
            wrong += look_mixer(mixer, balances[mixer.name])
            loose += bool(balances[mixer.name]["practically_undetermined"])
    if not 20 < loose < 180:
        wrong.append("%d of %d hang on digits: the draw tells nothing" % (loose, len(some)))
    tap.tell(wrong, "%d mixers, what hangs on last digits, seed %d" % (len(some), SEED))


BLEND = ("  mix dosing: rich + lean = fuel", "  components CH4, CO2", "  known fuel = 100 kmol/h",
         "  known CH4 of rich = 20.2 mol%", "  known CH4 of lean = 20.1 mol%")


def blend(tap):
    """20.1 and 20.2 % make 20.15 %: half a digit of 20.2 makes 100 (.05/.15) or 100 (.05/.05) of
    the rich gas, of 20.1 it makes 100 (.1/.15) or nothing.  Once a flow is metered too, they hold."""
    text = solved(*BLEND, "  known CH4 of fuel = 20.15 mol%")
    balance = verdicts([text])[0]["case"]
    ends = {one["statement"]: (one["least"], one["greatest"]) for one in balance["hangs_on"]}
    wrong = []
    for line, want in ((3, (100 / 3, 100)), (4, (0, 200 / 3))):
        got = ends.get(BLEND[line].strip(), (None, None))
        wrong += [session.off(a, b, 1e-6, "abs") for a, b in zip(got, want)]
    wrong.append("" if "1 of them by last digits alone" in session.unfolded(session.run(text, "text")[1])
                 else "the count does not say so")
    error = session.run(text + "rich in kg/h\n")[1].splitlines()[-1]
    wrong.append("" if '"error":' in error else "rich is told: " + error)
    metered = verdicts([solved(*BLEND, "  known CH4 of fuel = 20.15 mol%",
                               "  known rich = 50 kmol/h")])[0]["case"]
    wrong.append("metered and still loose" if metered["practically_undetermined"] else "")
    tap.tell([line for line in wrong if line], "a blend of nearly one analysis")


def main():
    tap = session.Tap()
    mixers(tap)
    blend(tap)
    return tap.finish()


sys.exit(main())
