"""Networks made at random that are metered: figures with ± on every basis, some exact, some streams
without any.

Beside the lines each figure is kept as what it is a function of: left, or left / right, of component
flows.  So what the program answers is judged without it: whether its streams balance, whether
another point (the truth) would fit better, and by rank how many figures check each other and what
stays open.
"""
import math

import session

HOUR = 3600.0
COMPONENTS = ("CH4", "CO2", "N2", "H2", "CO", "H2O", "C2H6", "O2")
NORMAL = 22.413969545014137             # m3/kmol of an ideal gas at 0 degC, 101.325 kPa: R T / p
MOLAR = {row["key"]: float(row["M_g_per_mol"]) for row in session.rows("numbers/molar_masses.tsv")}


def form(pairs):
    """A linear form: column (stream, component) to coefficient."""
    terms = {}
    for column, coefficient in pairs:
        terms[column] = terms.get(column, 0.0) + coefficient
    return terms


def value(terms, flows):
    """A form at FLOWS, by stream and component."""
    return sum(coefficient * flows[s][c] for (s, c), coefficient in terms.items())


class Figure:
    """FACTOR left / right, or FACTOR left: as typed, in the unit of its line."""

    def __init__(self, left, right=None, factor=1.0):
        self.left, self.right, self.factor = left, right, factor

    def at(self, flows):
        """Its value there."""
        over = value(self.right, flows) if self.right else 1.0
        return self.factor * value(self.left, flows) / over

    def row(self, flows):
        """Its gradient there, but for a factor."""
        if not self.right:
            return dict(self.left)
        ratio = value(self.left, flows) / value(self.right, flows)
        return form(list(self.left.items())
                    + [(column, -ratio * x) for column, x in self.right.items()])


class Line:
    """A line of the balance: WORDS, with a place for each figure, and the figures; U of each, 0 where
    it is exact.  CLOSED: a whole analysis, whose figures have a common factor."""

    def __init__(self, words, figures, u, closed=False):
        self.words, self.figures, self.u, self.closed = words, figures, u, closed
        self.typed = None

    def measured(self):
        """Is any figure of it?"""
        return any(u > 0 for u in self.u)

    def rows(self, flows):
        """The gradients of its figures; of a closed analysis all but the last, which follows."""
        figures = self.figures[:-1] if self.closed else self.figures
        return [figure.row(flows) for figure in figures]

    def text(self, off=0.0):
        """As typed; every figure is out by OFF of its uncertainties."""
        return self.words.format(*(
            plain(y + off * u) + (" ± " + plain(u) if u > 0 else "")
            for y, u in zip(self.typed, self.u)))

    def void(self, flows):
        """Is it a share of a stream that does not flow?"""
        return any(figure.right and not abs(value(figure.right, flows)) > 0
                   for figure in self.figures)

    def misfit(self, flows):
        """What the line adds to the sum of squares at FLOWS."""
        seen = [(y, figure.at(flows), u) for y, figure, u in zip(self.typed, self.figures, self.u)
                if u > 0]
        factor = 1.0
        if self.closed and seen:
            factor = (sum(y * x / u ** 2 for y, x, u in seen)
                      / sum(x * x / u ** 2 for _, x, u in seen))
        return sum(((y - factor * x) / u) ** 2 for y, x, u in seen)


class Metered:
    """A network and its lines.  NAME: of the balance; its streams are named after it."""

    def __init__(self, chance, network, name, poor):
        self.chance, self.net, self.name, self.poor = chance, network, name, poor
        self.net.components = COMPONENTS[:len(network.components)]
        self.parts = range(len(self.net.components))
        self.lines = []
        self.kept = set()
        self.choose()

    # ---- What is metered ----

    def stream(self, s):
        """The name of a stream, no other network's."""
        return "%s-s%d" % (self.name, s)

    def total(self, s, weights=None):
        """The flow of a stream; WEIGHTS by component."""
        return form(((s, c), weights[c] if weights else 1.0) for c in self.parts)

    def spread(self, figure, whole):
        """A standard uncertainty for FIGURE: good meters, now and then a poor one; those of a whole
        analysis leave its total near one."""
        truth = figure.at(self.net.flows)
        part = truth / figure.factor if figure.right else 0.0
        room = min(part, 1 - part) / part if 0 < part < 1 else 1.0
        worst = 0.15 if self.poor and not whole else 0.02
        return truth * room * math.exp(self.chance.uniform(math.log(0.002), math.log(worst)))

    def add(self, words, figures, exact=None, closed=False):
        """One more line; a figure is exact now and then."""
        if words.split(" = ")[0] in self.kept:
            return
        self.kept.add(words.split(" = ")[0])
        exact = self.chance.random() < 0.15 if exact is None else exact
        u = [0.0 if exact else self.spread(figure, len(figures) > 1) for figure in figures]
        self.lines.append(Line(words, figures, u, closed))

    def flow(self, s, exact=None):
        """The flow of a stream, on any basis."""
        masses = [MOLAR[c] for c in self.net.components]
        dry = [float(c != "H2O") for c in self.net.components]
        ways = [("kmol/h", None, 1), ("kmol/h", None, 1), ("kg/h", masses, 1),
                ("t/d", masses, 0.024), ("Nm3/h", None, NORMAL), ("kmol/h dry", dry, 1),
                ("Nm3/h dry", dry, NORMAL)]
        if not any(dry):
            ways = ways[:5]
        unit, weights, factor = self.chance.choice(ways)
        self.add("known %s = {0} %s" % (self.stream(s), unit),
                 [Figure(self.total(s, weights), None, factor)], exact)

    def part(self, s):
        """The flow of a component."""
        c = self.chance.choice(self.parts)
        unit, factor = self.chance.choice((("kmol/h", 1), ("kg/h", MOLAR[self.net.components[c]])))
        self.add("known %s of %s = {0} %s" % (self.net.components[c], self.stream(s), unit),
                 [Figure({(s, c): 1.0}, None, factor)])

    def fraction(self, s):
        """One component of an analysis."""
        c = self.chance.choice(self.parts)
        key = self.net.components[c]
        masses = [MOLAR[other] for other in self.net.components]
        dry = [float(other != "H2O") for other in self.net.components]
        ways = [("mol%", 1.0, None, 100), ("mol%", 1.0, None, 100),
                ("mass%", MOLAR[key], masses, 100), ("ppm", 1.0, None, 1e6),
                ("mg/Nm3", 1e6 * MOLAR[key] / NORMAL, None, 1)]
        if key != "H2O" and any(dry[other] for other in self.parts if other != c):
            ways += [("mol% dry", 1.0, dry, 100)]
        unit, weight, weights, factor = self.chance.choice(ways)
        self.add("known %s of %s = {0} %s" % (key, self.stream(s), unit),
                 [Figure({(s, c): weight}, self.total(s, weights), factor)])

    def analysis(self, s, exact=None):
        """All of a stream's components."""
        weights, unit = self.chance.choice(((None, "mol%"), ([MOLAR[c] for c in self.net.components],
                                                             "mass%")))
        whole = self.total(s, weights)
        figures = [Figure({(s, c): whole[s, c]}, whole, 100) for c in self.parts]
        rest = self.chance.random() < 0.3
        most = max(self.parts, key=lambda c: figures[c].at(self.net.flows))
        if rest:
            figures.pop(most)
        places = ["%s rest" % key if rest and c == most else "%s {%d}" % (key, c - (rest and c > most))
                  for key, c in zip(self.net.components, self.parts)]
        self.add("known composition of %s = (%s %s)" % (self.stream(s), ", ".join(places), unit),
                 figures, exact, closed=not rest)

    def share(self, unit, place, exact=None):
        """The share of an outlet in what enters a split."""
        _, inlets, outlets, _ = unit
        self.add("known %s = {0} %% of %s" % (self.stream(outlets[place]), self.stream(inlets[0])),
                 [Figure(self.total(outlets[place]), self.total(inlets[0]), 100)], exact)

    def recovery(self, unit, place, c, exact=None):
        """How much of a component goes to an outlet."""
        _, inlets, outlets, _ = unit
        key, s, source = self.net.components[c], outlets[place], inlets[0]
        self.add("known %s of %s = {0} %% of %s of %s" % (key, self.stream(s), key,
                                                          self.stream(source)),
                 [Figure({(s, c): 1.0}, {(source, c): 1.0}, 100)], exact)

    def several(self, _):
        """Two streams behind one meter, or the ratio of two."""
        s, other = self.chance.sample(self.net.used, 2)
        if self.chance.random() < 0.5:
            self.add("known %s + %s = {0} kmol/h" % (self.stream(s), self.stream(other)),
                     [Figure(form(list(self.total(s).items()) + list(self.total(other).items())))])
        else:
            self.add("known %s / %s = {0} mol/mol" % (self.stream(s), self.stream(other)),
                     [Figure(self.total(s), self.total(other))])

    def any(self, s):
        """Something about a stream."""
        ways = [self.flow, self.flow, self.several]
        if len(self.parts) > 1:
            ways += [self.part, self.fraction, self.fraction, self.analysis]
        self.chance.choice(ways)(s)

    def choose(self):
        """What is known: as a designer would have it and some more, or as a plant has it."""
        chance = self.chance
        if chance.random() < 0.6:
            self.designed(chance.choice((0.0, 0.0, 0.05, 0.15)))
            for _ in range(chance.randint(1, 3 + len(self.net.units) // 2)):
                self.any(chance.choice(self.net.used))
        else:
            for s in self.net.used:
                if chance.random() < 0.7:
                    self.flow(s)
                if chance.random() < 0.4:
                    self.any(s)
            self.designed(0.5)
        if not any(line.measured() for line in self.lines):
            self.flow(chance.choice(self.net.used), False)
        for line in self.lines:
            line.typed = [figure.at(self.net.flows) + (chance.gauss(0, u) if u > 0 else 0.0)
                          for figure, u in zip(line.figures, line.u)]

    def designed(self, missing):
        """Feeds, recoveries and shares, some of which are MISSING."""
        chance = self.chance
        for s in self.net.feeds:
            if chance.random() >= missing:
                self.flow(s)
            if len(self.parts) > 1 and chance.random() >= missing:
                self.analysis(s)
        for unit in self.net.units:
            places = range(1, len(unit[2])) if unit[0] != "mix" else ()
            for place in places:
                if unit[0] == "split" or len(self.parts) == 1:
                    if chance.random() >= missing:
                        self.share(unit, place)
                    continue
                for c in self.parts:
                    if chance.random() >= missing:
                        self.recovery(unit, place, c)

    # ---- In words ----

    def text(self, wrong=None, off=0.0):
        """The balance; the figure of line WRONG is out by OFF of its uncertainties."""
        lines = ["balance " + self.name]
        for number, (kind, inlets, outlets, _) in enumerate(self.net.units):
            lines.append("  %s u%d: %s = %s" % (
                kind, number, " + ".join(self.stream(s) for s in inlets),
                " + ".join(self.stream(s) for s in outlets)))
        lines.append("  components " + ", ".join(self.net.components))
        lines += ["  " + line.text(off if line is wrong else 0.0) for line in self.lines]
        return "\n".join(lines + ["end", "solve " + self.name, ""])

    # ---- What must come of it ----

    def misfit(self, flows):
        """The sum of squares at FLOWS."""
        return sum(line.misfit(flows) for line in self.lines)

    def columns(self):
        """How many flows there are to find."""
        return len(self.net.used) * len(self.parts)

    def held(self):
        """Rows of what holds exactly, at the truth: balances, splits, exact figures."""
        flows = self.net.flows
        for kind, inlets, outlets, _ in self.net.units:
            for c in self.parts:
                yield form([((s, c), 1.0) for s in inlets] + [((s, c), -1.0) for s in outlets])
            for s in outlets if kind == "split" else ():
                inlet = inlets[0]
                into, out = sum(flows[inlet]), sum(flows[s])
                for c in self.parts:
                    yield form([((s, c), into), ((inlet, c), -out)]
                               + [((inlet, k), flows[s][c]) for k in self.parts]
                               + [((s, k), -flows[inlet][c]) for k in self.parts])
        for line in self.lines:
            if not line.measured():
                yield from line.rows(flows)

    def counted(self, without=None):
        """By rank, at the truth: how many measured figures others check, what stays open, and
        whether the figure of the line WITHOUT is among those checked."""
        space, flows, count = Space(), self.net.flows, 0
        for row in self.held():
            space.take(row)
        exact = space.rank
        for line in self.lines:
            for row in line.rows(flows) if line.measured() and line is not without else ():
                space.take(row)
                count += 1
        all_but_one = space.rank
        for row in without.rows(flows) if without else ():
            space.take(row)
            count += 1
        return (count - (space.rank - exact), self.columns() - space.rank,
                space.rank == all_but_one)

    def fits(self, line, off):
        """Does the figure of LINE stay a share where it is one, OFF of its uncertainties out?"""
        figure, y = line.figures[0], line.typed[0] + off * line.u[0]
        return not figure.right or " / " in line.words or y < 0.999 * figure.factor

    def judge(self, balance):
        """What is not as it must be, whatever was measured: what the answer does not add up to."""
        flows = [self.answered(balance, s) for s in range(len(self.net.flows))]
        most = max(self.net.total(s) for s in self.net.used)
        for number, (_, inlets, outlets, _) in enumerate(self.net.units):
            for c in self.parts:
                sides = [sum(flows[s][c] for s in side) for side in (inlets, outlets)]
                if abs(sides[0] - sides[1]) > 1e-7 * most:       # NaN where one is not known
                    yield "%s of u%d: %r in, %r out" % (self.net.components[c], number, *sides)
        adjusted = {one["statement"]: one for one in balance.get("adjustments", [])}
        for line in self.lines:
            one, figure = adjusted.get(line.text()), line.figures[0]
            alone = len(line.figures) == 1 and not line.words.startswith("known composition")
            if one and alone and line.measured() and not line.void(flows):
                here = figure.at(flows)
                if abs(here - one["reconciled"]) > 1e-6 * abs(one["reconciled"]) + 0.01 * line.u[0]:
                    yield "%s: moved to %r, the streams say %r" % (line.text(),
                                                                   one["reconciled"], here)

    def answered(self, balance, s):
        """Component flows of the answer in kmol/h; NaN where they are not known."""
        stream = balance["streams"].get(self.stream(s), {})
        total, parts = stream.get("molar_flow"), stream.get("fractions") or {}
        if len(self.parts) == 1 and total is not None:
            return [total * HOUR / 1000]
        return [math.nan if total is None or parts.get(c) is None
                else total * HOUR / 1000 * parts[c] for c in self.net.components]

    def off(self, balance):
        """How far each flow and share of the answer is from the truth, in its own uncertainty."""
        for s in self.net.used:
            stream = balance["streams"].get(self.stream(s), {})
            total, u = stream.get("molar_flow"), stream.get("uncertainty")
            if total is not None and u:
                yield abs(total * HOUR / 1000 - self.net.total(s)) / (u * HOUR / 1000)
            spread = stream.get("fraction_uncertainties") or {}
            for c, x in (stream.get("fractions") or {}).items():
                truth = self.net.flows[s][self.net.components.index(c)] / self.net.total(s)
                if x is not None and spread.get(c):
                    yield abs(x - truth) / spread[c]


class Space:
    """The rank of rows told one after the other, each scaled to one."""

    def __init__(self):
        self.pivots = {}                # column: row with 1 there
        self.rank = 0

    def take(self, row):
        """One more row."""
        row = dict(row)
        most = max(map(abs, row.values()))
        if most == 0:
            return
        row = {column: x / most for column, x in row.items()}
        while True:
            known = [column for column in row if column in self.pivots]
            if not known:
                break
            for column in known:
                x = row.get(column, 0.0)
                if x:
                    for other, y in self.pivots[column].items():
                        row[other] = row.get(other, 0.0) - x * y
                row.pop(column, None)
        row = {column: x for column, x in row.items() if abs(x) > 1e-9}
        if row:
            pivot = max(row, key=lambda column: abs(row[column]))
            self.pivots[pivot] = {column: x / row[pivot] for column, x in row.items()}
            self.rank += 1


def plain(figure):
    """FIGURE in twelve digits, as somebody would type it."""
    digits = max(0, 11 - math.floor(math.log10(abs(figure)))) if figure else 0
    return "%.*f" % (digits, figure)
