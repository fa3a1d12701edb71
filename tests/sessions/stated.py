"""Networks with more stated than needed, rounded as people round, and some of it wrong.

The networks are those of networks.py.  Their canonical facts (feeds, recoveries, shares) are typed
with 3, 4 or 6 digits, and beside them 1 to 6 more on any basis: molar, mass and reference volume
flows, mole, mass and trace fractions, concentrations, ratios, recoveries over several units, shares
and sums.  Rounding alone is never a contradiction.  A slip of 6 to 30 % in any figure at all is one
wherever the other figures can tell, and the figure that slipped is among the lines named.

Whether they can tell is worked out here: the network is simulated again from what is typed, slip
and all, and what that makes of the added facts is held against their typed figures.
"""
import copy
import decimal
import math
import random
import sys

import networks
import session

SEED = 20261202
# g/mol, CIAAW 2021 (Prohaska et al. 2022), as in tests/numbers/molar_masses.tsv.
MOLAR_MASS = {row["key"]: float(row["M_g_per_mol"])
              for row in session.rows("numbers/molar_masses.tsv")}
# m3/kmol of an ideal gas at 0 degC and 101.325 kPa: R of the SI (2019), 8.31446261815324 J/(mol K).
MOLAR_VOLUME = 8.31446261815324 * 273.15 / 101.325
DIGITS = (3, 4, 6)
COUNT = {"true": 1002, "wrong": 600}
# With slips none is larger: up to 60 units, one of 600 tried once named other lines.  A share that
# follows from two flows counts as exact, and may clash in a last digit before the slip does.
UNITS = {"true": (3, 4, 5, 6, 8, 8, 10, 12, 20, 40, 60),
         "wrong": (3, 4, 5, 6, 8, 8, 10, 12, 15, 20)}
# A slip shows where it moves an added fact by this many times what all rounding does there.
SHOWS = 10


def typed(value, digits, chance):
    """VALUE rounded to DIGITS, as somebody would type it: 21785 to three digits is 21800.  Zeros at
    the end may be typed or not."""
    exact = decimal.Decimal(repr(value))
    text = format(exact.quantize(decimal.Decimal(1).scaleb(exact.adjusted() + 1 - digits)), "f")
    if "." in text and chance.random() < 0.5:
        text = text.rstrip("0").rstrip(".")
    return text


class Stated:
    """One figure: the line it stands in, its true value as a function of a network, where it came
    from in the simulation, and what is typed."""

    def __init__(self, form, value, put=None):
        self.form = form                  # with %s where the figure goes
        self.value = value                # of a network
        self.put = put                    # puts a figure into a network to be simulated
        self.text = ""

    def type(self, net, digits, chance, factor=1.0):
        """Rounds the true value, times FACTOR."""
        self.text = typed(self.value(net) * factor, digits, chance)

    def half(self):
        """What the typed figure is good to: half a unit of its last digit, zeros at the end of a
        whole number uncounted and then 0.5 % at most."""
        number = decimal.Decimal(self.text)
        if "." in self.text:
            return 0.5 * 10.0 ** number.as_tuple().exponent
        zeros = len(self.text) - len(self.text.rstrip("0"))
        return min(0.5 * 10.0 ** zeros, 0.005 * abs(float(number)))


class Plant:
    """What is stated of a network."""

    def __init__(self, chance, name, net):
        self.chance = chance
        self.name = name
        self.net = net
        self.canonical = []
        self.compositions = []            # of a feed: its figures, with the rest or closed
        self.extra = []
        for feed in net.feeds:
            self.add_feed(feed)
        for number, unit in enumerate(net.units):
            self.add_unit(number, unit)

    def stream(self, s):
        """The name of a stream, no other plant's."""
        return "%s-s%d" % (self.name, s)

    def add_feed(self, s):
        """Its flow, and the fractions of all its components but the last."""
        def flow(net):
            return net.total(s)

        def put_flow(net, figure):
            net.flows[s] = [n * figure / net.total(s) for n in net.flows[s]]

        self.canonical.append(Stated("known %s = %%s kmol/h" % self.stream(s), flow, put_flow))
        parts = []
        for c in range(len(self.net.components) - 1):
            def share(net, c=c):
                return 100 * net.flows[s][c] / net.total(s)
            parts.append(Stated("known composition of %s = %%s mol%%" % self.stream(s), share))
        if parts:
            self.compositions.append((s, parts))

    def add_unit(self, number, unit):
        """A share of a split, recoveries of a separator."""
        kind, inlets, outlets, parameters = unit
        source = self.stream(inlets[0])
        for place, s in enumerate(outlets[1:]):
            for c in range(len(parameters[place])):
                def value(net, place=place, c=c):
                    return 100 * net.units[number][3][place][c]

                def put(net, figure, place=place, c=c):
                    net.units[number][3][place][c] = figure / 100
                name = self.stream(s)
                form = "known %s = %%s %%%% of %s" % (name, source)
                if kind == "separate":
                    component = self.net.components[c]
                    form = "known %s of %s = %%s %%%% of %s of %s" % (component, name, component,
                                                                      source)
                self.canonical.append(Stated(form, value, put))

    def quantity(self, s, c, kind):
        """Name and unit of a flow, and what it is: of stream S, or component C of it."""
        masses = [MOLAR_MASS[name] for name in self.net.components]
        name = self.stream(s) if c is None else "%s of %s" % (self.net.components[c],
                                                              self.stream(s))
        cs = range(len(masses)) if c is None else (c,)
        factor = {"kmol/h": lambda i: 1, "kg/h": lambda i: masses[i],
                  "Nm3/h": lambda i: MOLAR_VOLUME}[kind]
        return name, lambda net: sum(factor(i) * net.flows[s][i] for i in cs)

    def add_extra(self):
        """One more true fact, on a basis at random."""
        net, chance = self.net, self.chance
        made = [s for s in net.used if s not in net.feeds]
        s, other = chance.choice(made), chance.choice(net.used)
        c = chance.choice([None] + list(range(len(net.components))))
        kind = chance.choice(("flow", "flow", "fraction", "trace", "ratio", "recovery", "sum",
                              "share"))
        unit = chance.choice(("kmol/h", "kg/h", "Nm3/h"))
        name, value = self.quantity(s, c, unit)
        form = "known %s = %%s %s" % (name, unit)
        if kind == "fraction" and c is not None and len(net.components) > 1:
            form, value = self.fraction(s, c)
        elif kind == "trace" and c is not None and len(net.components) > 1:
            form, value = self.trace(s, c)
        elif kind in ("ratio", "sum") and other != s:
            form, value = self.of_two(kind, s, other, unit)
        elif kind == "recovery" and c is not None:
            form, value = self.recovery(s, c) or (form, value)
        elif kind == "share":
            form, value = self.share() or (form, value)
        if not any(one.form.split(" = ")[0] == form.split(" = ")[0]
                   for one in self.extra + self.canonical):
            self.extra.append(Stated(form, value))

    def fraction(self, s, c):
        """Of component C in stream S, by amount or by mass."""
        of, whole = self.quantity(s, c, "kmol/h")[1], self.quantity(s, None, "kmol/h")[1]
        unit = self.chance.choice(("mol%", "mass%"))
        if unit == "mass%":
            of, whole = self.quantity(s, c, "kg/h")[1], self.quantity(s, None, "kg/h")[1]
        return ("known %s of %s = %%s %s" % (self.net.components[c], self.stream(s),
                                             unit.replace("%", "%%")),
                lambda net: 100 * of(net) / whole(net))

    def trace(self, s, c):
        """The same in ppm, or as a concentration."""
        whole = self.quantity(s, None, "Nm3/h")[1]
        name = "known %s of %s = %%s " % (self.net.components[c], self.stream(s))
        if self.chance.random() < 0.5:
            of = self.quantity(s, c, "Nm3/h")[1]
            return name + "ppm", lambda net: 1e6 * of(net) / whole(net)
        of = self.quantity(s, c, "kg/h")[1]
        return name + "mg/Nm3", lambda net: 1e6 * of(net) / whole(net)

    def of_two(self, kind, s, other, unit):
        """Ratio or sum of two streams."""
        a, b = self.quantity(s, None, unit)[1], self.quantity(other, None, unit)[1]
        if kind == "sum":
            return ("known %s + %s = %%s %s" % (self.stream(s), self.stream(other), unit),
                    lambda net: a(net) + b(net))
        unit = {"kg/h": "kg/kg"}.get(unit, "mol/mol")
        if unit == "mol/mol":
            a, b = (self.quantity(one, None, "kmol/h")[1] for one in (s, other))
        return ("known %s / %s = %%s %s" % (self.stream(s), self.stream(other), unit),
                lambda net: a(net) / b(net))

    def recovery(self, s, c):
        """Of a component, from a stream that has more of it."""
        richer = [o for o in self.net.used if self.net.flows[o][c] > 1.02 * self.net.flows[s][c]]
        if not richer:
            return None
        other = self.chance.choice(richer)
        component = self.net.components[c]
        return ("known %s of %s = %%s %%%% of %s of %s" % (component, self.stream(s), component,
                                                           self.stream(other)),
                lambda net: 100 * net.flows[s][c] / net.flows[other][c])

    def share(self):
        """Of a split, the outlet that takes what the others leave."""
        splits = [unit for unit in self.net.units if unit[0] == "split"]
        if not splits:
            return None
        _, inlets, outlets, _ = self.chance.choice(splits)
        return ("known %s = %%s %%%% of %s" % (self.stream(outlets[0]), self.stream(inlets[0])),
                lambda net: 100 * net.total(outlets[0]) / net.total(inlets[0]))

    def figures(self):
        """All that are stated."""
        return self.canonical + [part for _, parts in self.compositions for part in parts] \
            + self.extra

    def again(self):
        """The network as the canonical facts are typed; None where that is none."""
        net = copy.deepcopy(self.net)
        for one in self.canonical:
            if one.put and "kmol/h" not in one.form:
                one.put(net, float(one.text))
        for s, parts in self.compositions:
            shares = [float(part.text) for part in parts]
            total = net.total(s)
            net.flows[s] = [total * x / 100 for x in shares + [100 - sum(shares)]]
        for one in self.canonical:
            if "kmol/h" in one.form:
                one.put(net, float(one.text))
        for kind, _, outlets, parameters in net.units:
            for c in range(len(parameters[0]) if parameters else 0):
                if sum(row[c] for row in parameters) >= 1:
                    return None
        if any(n <= 0 for s in net.feeds for n in net.flows[s]):
            return None
        net.settle()
        return net

    def text(self):
        """The balance as it is typed, and the question."""
        net = self.net
        lines = ["balance " + self.name]
        for number, (kind, inlets, outlets, _) in enumerate(net.units):
            lines.append("  %s u%d: %s = %s" % (kind, number,
                                                " + ".join(self.stream(s) for s in inlets),
                                                " + ".join(self.stream(s) for s in outlets)))
        lines.append("  components " + ", ".join(net.components))
        for one in self.canonical + self.extra:
            lines.append("  " + one.form % one.text)
        for s, parts in self.compositions:
            texts = [part.text for part in parts] + ["rest"]
            lines.append("  known composition of %s = (%s mol%%)" % (
                self.stream(s), ", ".join("%s %s" % pair for pair in zip(net.components, texts))))
        return "\n".join(lines + ["end", "solve " + self.name, ""])


def plant(chance, way, number, digits):
    """More than enough is known, all of it true."""
    name = "%s%d" % (way, number)
    made = Plant(chance, name, networks.make(chance, chance.choice(UNITS[way])))
    for _ in range(chance.randint(1, 6)):
        made.add_extra()
    for one in made.figures():
        one.type(made.net, digits, chance)
    return made


def noise(made):
    """By added fact: what rounding of all figures may do to it, in round numbers."""
    rounded = made.again()
    if rounded is None:
        return None
    return [one.half() + abs(one.value(rounded) - one.value(made.net)) for one in made.extra]


def slip(made, digits):
    """Makes one figure wrong, or two; those that are, and whether that must show."""
    chance = made.chance
    before = noise(made)
    if before is None:
        return None
    wrong = chance.sample(made.figures(), min(chance.choice((1, 1, 2)), len(made.figures())))
    for one in wrong:
        factor = 1 - chance.uniform(0.06, 0.3)
        if "%%" not in one.form and chance.random() < 0.5:
            factor = 1 + chance.uniform(0.06, 0.3)
        one.type(made.net, digits, chance, factor)
    after = made.again()
    if after is None:
        return None
    shown = max(abs(one.value(after) - float(one.text)) / most
                for one, most in zip(made.extra, before))
    return wrong, shown


def run_true(bad):
    """Rounding alone; how many clash."""
    chance = random.Random("%d true" % SEED)
    cases = []
    while len(cases) < COUNT["true"]:
        digits = DIGITS[len(cases) % len(DIGITS)]
        made = plant(chance, "true", len(cases), digits)
        if made.extra:
            cases.append((made, made.text(), digits))
    clashes = 0
    for some, balances, faults in networks.batches(cases):
        bad += faults
        for made, text, digits in some:
            balance = balances.get(made.name, {"status": "no answer"})
            if balance["status"] == "contradictory":
                clashes += 1
                bad.append("%s clashes: %s\n%s" % (made.name, balance["conflict"], text))
            elif balance["status"] != "redundant" or balance["surplus"] != len(made.extra):
                bad.append("%s: %s, %s to spare, not %d\n%s" % (
                    made.name, balance["status"], balance.get("surplus"), len(made.extra), text))
    return clashes


def run_wrong(bad):
    """Slips; how many that must show do not, of how many."""
    chance = random.Random("%d wrong" % SEED)
    cases, unseen, must = [], 0, 0
    while len(cases) < COUNT["wrong"]:
        digits = DIGITS[len(cases) % len(DIGITS)]
        made = plant(chance, "wrong", len(cases), digits)
        slipped = slip(made, digits) if made.extra else None
        if slipped:
            cases.append((made, made.text(), slipped))
    for some, balances, faults in networks.batches(cases):
        bad += faults
        for made, text, (wrong, shown) in some:
            balance = balances.get(made.name, {"status": "no answer", "conflict": []})
            named = [one.form.split(" = ")[0] for one in wrong]
            must += shown >= SHOWS
            if balance["status"] == "contradictory":
                if not any(line.startswith(form + " = ")
                           for line in balance["conflict"] for form in named):
                    bad.append("%s: %s is not in %s\n%s" % (made.name, named,
                                                            balance["conflict"], text))
            elif balance["status"] != "redundant":
                bad.append("%s: %s\n%s" % (made.name, balance["status"], text))
            elif shown >= SHOWS:
                unseen += 1
                print("# %s is unseen at %.3g: %s" % (made.name, shown, named))
    return unseen, must


def main():
    tap = session.Tap()
    bad = []
    clashes = run_true(bad)
    tap.tell(bad[:5], "%d networks of true figures, rounded, have as much to spare as was added, "
             "seed %d" % (COUNT["true"], SEED))
    tap.tell("" if clashes <= COUNT["true"] / 1000 else "%d" % clashes,
             "at most one in a thousand clashes")
    bad = []
    unseen, must = run_wrong(bad)
    tap.tell(bad[:5], "%d networks with one slip or two name it where they clash" % COUNT["wrong"])
    tap.tell("" if must > 0 and unseen <= 0.01 * must else "%d of %d" % (unseen, must),
             "of slips that show at most 1 % are unseen")
    print("# %d of %d slips show" % (must, COUNT["wrong"]))
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
