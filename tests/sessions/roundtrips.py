"""Random figures go there and back through the language: any unit, any order, nothing lost.

All cases are made first; one run answers the way there, a second the way back with the figures of
the first.  A case that fails is shown with both statements; the seed makes it again."""
import math
import random
import sys

import session

SEED = 20261201
CLOSE = 1e-12           # relative, of every round trip
COMPONENTS = ("N2", "O2", "CO2", "CH4", "C2H6", "C3H8", "H2", "CO", "Ar", "He", "H2S", "C2H4")
TRACES = ("SO2", "NO2", "NO", "CO", "H2S", "NH3", "C6H6", "HCl")
FLOWS = ("kg/h", "lb/h", "t/day", "g/s", "kmol/h", "lbmol/h", "mol/s", "Nm3/h", "Sm3/h", "scfm",
         "slpm", "MMscfd", "Nm3/h real", "scfm real", "m3/h", "acfm", "L/min")
AMOUNTS = ("kg", "lb", "mol", "kmol", "Nm3", "scf", "m3", "L")
WET = ("kg/h", "kmol/h", "Nm3/h", "m3/h", "scfm", "kg/h dry", "kmol/h dry", "Nm3/h dry",
       "scfm dry")
SHARES = ("mol%", "mol/mol", "ppm", "ppb")
# With how many make a bar.
PRESSURES = {"bar(a)": 1, "bar(g)": 1, "kPa(a)": 100, "kPa(g)": 100, "psia": 14.5, "psig": 14.5,
             "mbar(a)": 1000, "mbar(g)": 1000, "atm": 1, "mmHg": 750, "inH2O(g)": 401,
             "kgf/cm2": 1}
PLAIN = (("kJ/kg", "Btu/lb", "kcal/kg"), ("kW", "Btu/h", "MMBtu/h", "kcal/h"),
         ("m3", "ft3", "L", "bbl"), ("m", "ft", "inch", "mm"), ("kg/m3", "lb/ft3", "g/L"),
         ("m2", "ft2", "cm2"), ("Pa*s", "cP"), ("h", "s", "day", "min"))

deal = random.Random(SEED)


def between(low, high, digits=6):
    """A figure from LOW to HIGH as it is typed, even in its logarithm where both are above 0."""
    if low > 0:
        return "%.*g" % (digits, math.exp(deal.uniform(math.log(low), math.log(high))))
    return "%.*g" % (digits, deal.uniform(low, high))


def gas_parts():
    """Some components with their shares in mol%, adding up to 100 as typed."""
    names = deal.sample(COMPONENTS, deal.randint(2, 7))
    weights = [deal.expovariate(1) + 0.02 for _ in names]
    shares = [round(100 * w / sum(weights), 4) for w in weights]
    shares[-1] = round(100 - sum(shares[:-1]), 4)
    return list(zip(names, shares))


def gas_list(parts, unit="mol%"):
    """A list as typed, one unit for all."""
    return ", ".join("%s %r" % part for part in parts) + " " + unit


def state(moist=False):
    """A state of a gas far from condensing; with water, often."""
    items = ["%s %s" % deal.choice(((between(15, 80), "degC"), (between(60, 180), "degF"),
                                    (between(290, 350), "K"))),
             "%s %s" % deal.choice(((between(0.8, 5), "bar(a)"), (between(1, 400), "kPa(g)"),
                                    (between(12, 70), "psia")))]
    if moist:
        items.append(deal.choice(("saturated", between(5, 99) + " %RH", "water %s mol%%" %
                                  between(0.05, 9), "dew point %s degC" % between(2, 15))))
    deal.shuffle(items)
    return ", ".join(items)


class Trip:
    """A figure, the statement that restates it, and how to ask for the way back."""

    def __init__(self, value, there, back, scale=None):
        self.value = float(value)
        self.there = there
        self.back = back            # a text with FIGURE for the figure
        self.scale = scale          # what the difference is measured by; the figure itself, or more

    def way_back(self, figure):
        """The statement that must give the figure of this trip again."""
        return self.back.replace("FIGURE", repr(figure))

    def wrong(self, figure, returned):
        """What is wrong with the figure that came back."""
        scale = self.scale(self.value) if self.scale else abs(self.value)
        if returned is not None and abs(returned - self.value) <= CLOSE * scale:
            return []
        return ["seed %d: %s\n%s\n%r, not %r" % (SEED, self.there, self.way_back(figure),
                                                 returned, self.value)]


class Group:
    """Cases of one kind, with the statements that stand before them in both runs."""

    def __init__(self, name):
        self.name = name
        self.before = []
        self.trips = []
        self.equal = []             # pairs of statements with the same figures


def flow_trips(group, gases, units, count, moist=False):
    """Flows or amounts of gases from one unit to another at a state."""
    for _ in range(count):
        gas, here, there, at = deal.choice(gases), *deal.sample(units, 2), \
            state(moist)
        figure = between(0.01, 1e5)
        group.trips.append(Trip(figure, "%s %s of %s at %s in %s" % (figure, here, gas, at, there),
                                "FIGURE %s of %s at %s in %s" % (there, gas, at, here)))


def flows(gases):
    groups = []
    for model in ("ideal", "auto"):
        group = Group("flows and amounts, gas model " + model)
        group.before.append("set gas model " + model)
        flow_trips(group, gases, FLOWS, 400)
        flow_trips(group, gases, AMOUNTS, 100)
        groups.append(group)
        group = Group("wet and dry flows, gas model " + model)
        flow_trips(group, gases, WET, 250, moist=True)
        groups.append(group)
    return groups


def concentrations(gases):
    group = Group("concentrations")
    for _ in range(300):
        trace, at, here = deal.choice(TRACES), state(), deal.choice(("ppm", "ppb", "vol%", "mol%"))
        figure = between(0.001, 50 if "%" in here else 5000)
        there = deal.choice(("mg/m3", "ug/m3", "g/m3", "mg/Nm3", "mg/Sm3", "gr/100scf", "mol/m3"))
        held = " at " + at if there in ("mg/m3", "ug/m3", "g/m3", "mol/m3") else ""
        group.trips.append(Trip(figure, "%s %s of %s in %s%s" % (figure, here, trace, there, held),
                                "FIGURE %s of %s%s in %s" % (there, trace, held, here)))
    for _ in range(100):
        trace, gas, figure = deal.choice(TRACES), deal.choice(gases), between(0.001, 5000)
        group.trips.append(Trip(figure, "%s ppm of %s within %s in ppmw" % (figure, trace, gas),
                                "FIGURE ppmw of %s within %s in ppm" % (trace, gas)))
    return group


def kept(gases):
    """A figure told in a unit and kept in a let counts as it did: real, dry, at its reference."""
    group = Group("figures kept in a let")
    for number in range(120):
        moist = number % 2 == 1
        gas, units, at = deal.choice(gases), WET if moist else FLOWS, state(moist)
        figure, (here, there) = between(0.01, 1e5), deal.sample(units, 2)
        flow = "%s %s of %s at %s in " % (figure, here, gas, at)
        group.before.append("let f%d = %s%s" % (number, flow, there))
        group.equal.append((flow + here, "f%d of %s at %s in %s" % (number, gas, at, here)))
    return group


def humidities(gases):
    group = Group("humidities")
    for _ in range(100):
        gas, at, figure = deal.choice(gases), state(), between(3, 99)
        there, unit, word = deal.choice((("water dew point", "degC", "dew point"),
                                         ("H2O", "mol%", "water"), ("H2O", "ppm", "water")))
        group.trips.append(Trip(
            figure, "%s of (1 kg/h of %s at %s, %s %%RH) in %s" % (there, gas, at, figure, unit),
            "relative humidity of (1 kg/h of %s at %s, %s FIGURE %s) in %%RH"
            % (gas, at, word, unit)))
    return group


def plain_units():
    group = Group("temperatures, pressures and plain units")
    group.before.append("set site pressure %s mbar" % between(850, 1040))
    zero = {"degC": 273.15, "degF": 459.67, "K": 0.0, "degR": 0.0}
    for _ in range(150):
        here, there = deal.sample(sorted(zero), 2)
        figure = between(200, 1200) if zero[here] == 0 else between(-100, 900)
        group.trips.append(Trip(figure, "%s %s in %s" % (figure, here, there),
                                "FIGURE %s in %s" % (there, here),
                                lambda t, here=here: abs(t) + zero[here]))
    for _ in range(250):
        here, there = deal.sample(sorted(PRESSURES), 2)
        bar = PRESSURES[here]
        # Half a bar at least; a gauge pressure is known no better than its absolute one.
        figure = between(0.5 * bar, 200 * bar)
        group.trips.append(Trip(figure, "%s %s in %s" % (figure, here, there),
                                "FIGURE %s in %s" % (there, here),
                                lambda p, bar=bar: abs(p) + bar))
    for _ in range(150):
        here, there = deal.sample(deal.choice(PLAIN), 2)
        figure = between(1e-4, 1e6)
        group.trips.append(Trip(figure, "%s %s in %s" % (figure, here, there),
                                "FIGURE %s in %s" % (there, here)))
    return group


def same_in_any_order(gases_parts):
    """Pairs of statements that must give the same figures."""
    group = Group("order and units of input do not matter")
    for number, parts in enumerate(gases_parts):
        other = parts[:]
        deal.shuffle(other)
        mixed = []
        for name, share in other:
            unit, factor = deal.choice((("mol%", 1), ("mol/mol", 100), ("ppm", 1e-4),
                                        ("ppb", 1e-7)))
            mixed.append("%s %r %s" % (name, share / factor, unit))
        group.before.append("gas o%d = %s" % (number, ", ".join(mixed)))
        at = state().split(", ")
        one, two = "g%d at " % number + ", ".join(at), "o%d at " % number + ", ".join(at[::-1])
        for question in ("molar mass of {} in g/mol", "density of {} in kg/m3",
                         "100 Nm3/h of {} in kg/h, m3/h, scfm", parts[0][0] + " of {} in mg/m3"):
            bare = "molar mass" in question
            group.equal.append(tuple(question.format(gas.split(" ")[0] if bare else gas)
                                     for gas in (one, two)))
        kg = between(1, 1e3, 4)
        group.equal.append(("%s kg/h of g%d in Nm3/h" % (kg, number),
                            "%r g/s of o%d in Nm3/h" % (float(kg) / 3.6, number)))
    return group


class Parts:
    """Streams put together and taken apart, and the figures that must agree."""

    def __init__(self, gases, count):
        self.statements, self.same, self.whole = [], [], []
        self.gases = gases
        for number in range(count):
            self.blend(number)

    def blend(self, n):
        (one, parts), (two, _) = deal.sample(self.gases, 2)
        add = self.statements.append
        add("stream a%d = %s %s of %s at %s" % (n, between(1, 1e3), deal.choice(FLOWS[:12]), one,
                                                 state(deal.random() < 0.5)))
        add("stream b%d = %s %s of %s at %s" % (n, between(1, 1e3), deal.choice(FLOWS[:12]), two,
                                                 state(deal.random() < 0.5)))
        add("stream m%d = a%d + b%d" % (n, n, n))
        add("stream w%d = b%d + a%d" % (n, n, n))
        add("stream back%d = m%d - b%d" % (n, n, n))
        add("stream p%d = %s %% of m%d" % (n, between(1, 99), n))
        add("stream q%d = m%d - p%d" % (n, n, n))
        add("stream r%d = p%d + q%d" % (n, n, n))
        keep = deal.choice(parts)[0]
        add("stream k%d = m%d keeping %s %s %%, rest %s %%" % (n, n, keep, between(1, 99),
                                                             between(1, 99)))
        add("stream t%d = m%d - k%d" % (n, n, n))
        add("stream u%d = k%d + t%d" % (n, n, n))
        for whole, again in (("m", "w"), ("a", "back"), ("m", "r"), ("m", "u")):
            for unit in ("kg/h", "kmol/h", "kg/h dry"):
                self.same.append(("%s%d in %s" % (whole, n, unit), "%s%d in %s" % (again, n, unit),
                                  "m%d in %s" % (n, unit)))
        self.same.append(("m%d in mol/mol" % n, "p%d in mol/mol" % n, None))
        self.same.append(("m%d in mol/mol" % n, "r%d in mol/mol" % n, None))
        self.whole += ["%s%d in %s" % (stream, n, unit) for stream in "abmpqkt"
                       for unit in ("mol/mol", "kg/kg")]


def ask(statements):
    """Every statement that answers, with its answers; those that fail, with their sentence."""
    figures, failed = {}, {}
    for thing in session.answers("\n".join(statements) + "\n"):
        if "error" in thing:
            failed[thing["statement"]] = thing["error"]["message"]
        else:
            figures[thing["statement"]] = thing["answers"]
    return figures, failed


def first(figures, statement):
    """The one figure of a statement, or none."""
    found = figures.get(statement)
    return found[0]["value"] if found else None


def by_part(answers):
    """Figures by component, or by their place."""
    return {answer["what"].split(" of ")[0] if " of " in answer["what"] else str(i):
            answer["value"] for i, answer in enumerate(answers)}


def trips(tap, groups, definitions):
    there = definitions[:]
    for group in groups:
        there += group.before + [trip.there for trip in group.trips]
        there += [statement for pair in group.equal for statement in pair]
    figures, failed = ask(there)
    tap.tell(["%s: %s" % item for item in failed.items()], "every statement there is understood")
    back = definitions[:]
    for group in groups:
        back += group.before + [trip.way_back(first(figures, trip.there)) for trip in group.trips
                                if trip.there in figures]
    returned, failed = ask(back)
    tap.tell(["%s: %s" % item for item in failed.items()], "every statement back is understood")
    for group in groups:
        wrong = []
        for trip in group.trips:
            figure = first(figures, trip.there)
            wrong += trip.wrong(figure, first(returned, trip.way_back(figure)))
        for one, two in group.equal:
            values = [[answer["value"] for answer in figures.get(each, [])] for each in (one, two)]
            if not values[0] or len(values[0]) != len(values[1]) or not all(
                    math.isclose(a, b, rel_tol=CLOSE) for a, b in zip(*values)):
                wrong.append("seed %d: %s %r\n%s %r" % (SEED, one, values[0], two, values[1]))
        tap.tell(wrong, "%s: %d cases" % (group.name, len(group.trips) + len(group.equal)))


def compositions(tap, gases, definitions):
    """mol% to mass% and back, by lists made of the answers."""
    figures, failed = ask(definitions + ["%s in %s" % (gas, unit) for gas in gases
                                         for unit in ("mass%", "mol%", "kg/kg", "mol/mol")])
    again = []
    for gas in gases:
        for unit in ("mass%", "kg/kg"):
            parts = by_part(figures.get("%s in %s" % (gas, unit), [])).items()
            name = "x%s%s" % (gas, unit[0:2].strip("/"))
            again += ["gas %s = %s" % (name, gas_list(parts, unit)), name + " in mol%"]
    returned, failed_again = ask(definitions + again)
    failed.update(failed_again)
    wrong = ["%s: %s" % item for item in failed.items()]
    for gas in gases:
        want = by_part(figures["%s in mol%%" % gas])
        for unit in ("mass%", "kg/kg"):
            name = "x%s%s" % (gas, unit[0:2].strip("/"))
            got = by_part(returned.get(name + " in mol%", []))
            wrong += ["seed %d: %s in %s: %s %r, not %r" % (SEED, gas, unit, part, got.get(part),
                                                            value)
                      for part, value in want.items()
                      if not math.isclose(got.get(part, math.inf), value, rel_tol=CLOSE)]
    tap.tell(wrong, "compositions by mass and by amount: %d gases" % len(gases))
    wholes(tap, figures, ["%s in %s" % (gas, unit) for gas in gases
                          for unit in ("kg/kg", "mol/mol")], "gases")


def wholes(tap, figures, statements, what):
    """Fractions add up to one, but for the rounding of each."""
    wrong = []
    for statement in statements:
        values = [answer["value"] for answer in figures.get(statement, [])]
        if abs(math.fsum(values) - 1) > 1e-15 * len(values) or not values:
            wrong.append("seed %d: %s: %r" % (SEED, statement, values))
    tap.tell(wrong, "fractions of %d %s add up to 1" % (len(statements), what))


def apart(tap, parts, definitions):
    statements = definitions + parts.statements
    statements += [each for trio in parts.same for each in trio if each] + parts.whole
    figures, failed = ask(statements)
    tap.tell(["%s: %s" % item for item in failed.items()], "every blend and split is understood")
    wrong = []
    for one, two, scale in parts.same:
        left, right = (by_part(figures.get(each, [])) for each in (one, two))
        # What is left over after a subtraction is known no better than what it was taken from.
        least = abs(first(figures, scale)) if scale else 0
        if not left or any(abs(left.get(part, 0) - right.get(part, 0))
                           > CLOSE * max(abs(left.get(part, 0)), least)
                           for part in set(left) | set(right)):
            wrong.append("seed %d: %s %r\n%s %r" % (SEED, one, left, two, right))
    tap.tell(wrong, "blends taken apart give the parts: %d cases" % len(parts.same))
    wholes(tap, figures, parts.whole, "streams")


def main():
    tap = session.Tap()
    made = [gas_parts() for _ in range(60)]
    gases = ["g%d" % i for i in range(len(made))]
    definitions = ["gas %s = %s" % (gas, gas_list(parts)) for gas, parts in zip(gases, made)]
    trips(tap, flows(gases) + [concentrations(gases), kept(gases), humidities(gases),
                               plain_units(), same_in_any_order(made)], definitions)
    compositions(tap, gases, definitions)
    apart(tap, Parts(list(zip(gases, made)), 40), definitions)
    return tap.finish()


sys.exit(main())
