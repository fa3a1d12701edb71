"""What a balance says of facts that leave nothing, or too little, to stand on.

What hangs on last digits is held against the closed form of a mixer and its partial derivatives,
in exact fractions.  Facts that hold only where nothing flows are held against all their subsets,
looked through one by one with an exact simplex method of the test's own.  Flows that clash are held
against all subsets and all pairs of them, by elimination in exact fractions."""
import itertools
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


# ---- Where nothing flows ----

def feasible(rows):
    """Is there an x >= 0 with every row (coefficients, sign, right) held, sign "=" or "<"?  Phase
    one of the simplex method in exact fractions, by Bland's rule."""
    width = len(rows[0][0])
    slacks = sum(sign == "<" for _, sign, _ in rows)
    table, basic, slack = [], [], 0
    for number, (row, sign, right) in enumerate(rows):
        line = [Fraction(a) for a in row] + [Fraction(0)] * slacks + [Fraction(right)]
        if sign == "<":
            line[width + slack] = Fraction(1)
        if line[-1] < 0:
            line = [-a for a in line]
        own = sign == "<" and line[width + slack] > 0     # its slack will do to begin with
        basic.append(width + slack if own else width + slacks + number)
        slack += sign == "<"
        table.append(line)
    cost = [-sum(line[j] for line, b in zip(table, basic) if b >= width + slacks)
            for j in range(width + slacks + 1)]
    while True:
        enter = next((j for j in range(width + slacks) if cost[j] < 0), None)
        if enter is None:
            return cost[-1] == 0
        leave = min((i for i, line in enumerate(table) if line[enter] > 0),
                    key=lambda i: (table[i][-1] / table[i][enter], basic[i]))
        pivot = table[leave][enter]
        table[leave] = [a / pivot for a in table[leave]]
        for line in table + [cost]:
            if line is not table[leave] and line[enter]:
                by = line[enter]
                line[:] = [a - by * b if b else a for a, b in zip(line, table[leave])]
        basic[leave] = enter


class Chain:
    """Separators one behind the other, CH4 in CO2, with analyses and shares and no flow."""

    def __init__(self, chance, name):
        self.name = name
        self.units = [((0,), (1, 2))]
        if chance.random() < 0.6:
            self.units.append(((2,), (3, 4)))
        if chance.random() < 0.4:
            self.units.append(((1,), (len(self.units) * 2 + 1, len(self.units) * 2 + 2)))
        self.streams = 1 + 2 * len(self.units)
        facts = {}
        for _ in range(chance.randint(3, len(self.units) * 2 + 1)):
            if chance.random() < 0.75:
                s = chance.randrange(self.streams)
                facts[s, None] = Fraction(chance.randint(20, 980), 10)
            else:
                inlets, outlets = chance.choice(self.units)
                facts[chance.choice(outlets), inlets[0]] = Fraction(chance.randint(50, 950), 10)
        self.facts = sorted(facts.items(), key=str)

    def lines(self):
        """The facts as lines."""
        return ["known CH4 of %s-s%d = %.1f mol%%" % (self.name, s, value) if of is None
                else "known %s-s%d = %.1f %% of %s-s%d" % (self.name, s, value, self.name, of)
                for (s, of), value in self.facts]

    def text(self):
        """The balance."""
        units = ["  separate u%d: %s = %s" % (
            n, " + ".join("%s-s%d" % (self.name, s) for s in inlets),
            " + ".join("%s-s%d" % (self.name, s) for s in outlets))
            for n, (inlets, outlets) in enumerate(self.units)]
        return solved(*units, "  components CH4, CO2", *["  " + line for line in self.lines()],
                      name=self.name)

    def holds(self, which, flowing):
        """Can the facts WHICH hold, within their digits, with a flow in stream FLOWING?"""
        width, rows = 2 * self.streams, []
        for inlets, outlets in self.units:
            for c in (0, 1):
                row = [0] * width
                for s in inlets:
                    row[2 * s + c] = 1
                for s in outlets:
                    row[2 * s + c] = -1
                rows.append((row, "=", 0))
        for number in which:
            (s, of), value = self.facts[number]
            for side in (1, -1):
                figure = (value + side * Fraction(5, 100)) / 100
                row = [0] * width
                row[2 * s] += side
                if of is None:
                    row[2 * s] -= side * figure
                    row[2 * s + 1] -= side * figure
                else:
                    row[2 * s + 1] += side
                    row[2 * of] -= side * figure
                    row[2 * of + 1] -= side * figure
                rows.append((row, "<", 0))
        row = [0] * width
        row[2 * flowing] = row[2 * flowing + 1] = 1
        return feasible(rows + [(row, "=", 1)])

    def smallest(self):
        """The size of the smallest set that keeps a stream the facts speak of from flowing; 0."""
        spoken = sorted({t for (s, of), _ in self.facts for t in (s, of) if t is not None})
        everything = range(len(self.facts))
        still = [s for s in spoken if not self.holds(everything, s)]
        for size in range(1, len(self.facts) + 1):
            for which in itertools.combinations(everything, size):
                if any(not self.holds(which, s) for s in still):
                    return size
        return 0


def look_chain(chain, balance):
    """Clash or not, of least size, told in lines that clash."""
    size = chain.smallest()
    clash = balance["status"] == "contradictory"
    if clash != (size > 0):
        return ["%s: %s, smallest set %d\n%s" % (chain.name, balance["status"], size,
                                                 chain.text())]
    lines = chain.lines()
    which = [lines.index(line) for line in balance["conflict"]]
    if clash and (len(which) != size or all(chain.holds(which, s)
                                            for s in range(chain.streams))):
        return ["%s: %r, smallest set %d" % (chain.name, balance["conflict"], size)]
    return []


def chains(tap):
    """Separators at random."""
    chance = random.Random(SEED)
    some = [Chain(chance, "c%d" % i) for i in range(240)]
    balances, wrong = verdicts([c.text() for c in some])
    clashes = 0
    for chain in some:
        if chain.name in balances:
            wrong += look_chain(chain, balances[chain.name])
            clashes += balances[chain.name]["status"] == "contradictory"
    if not 40 < clashes < 200:
        wrong.append("%d of %d clash: the draw tells nothing" % (clashes, len(some)))
    tap.tell(wrong, "%d separators without a flow against all sets, seed %d" % (len(some), SEED))


PARTED = ("  separate membrane: feed = product + tail", "  components CH4, CO2",
          "  known product = 70 % of feed", "  known CH4 of feed = 60 mol%",
          "  known CH4 of product = 97 mol%")


def parted(tap):
    """70 % of a feed of 60 % cannot be of 97 %.  The share could be up to 60/97; the feed from .7 x
    97 to that and .3, as the tail has none or nothing else; the product from .3/.7 to .6/.7.  With
    a flow it can be solved on paper, and the same lines are named."""
    room = [(0, 100 * 60 / 97), (67.9, 97.9), (30 / 0.7, 60 / 0.7)]
    wrong = []
    balance = verdicts([solved(*PARTED)])[0]["case"]
    if balance["conflict"] != [line.strip() for line in PARTED[2:]]:
        wrong.append("the set is %r" % balance["conflict"])
    for one, ends in zip(balance["suspects"], room):
        wrong += [session.off(one[end], value, 1e-6 * max(value, 1), "abs")
                  for end, value in zip(("least", "greatest"), ends)]
    if len(balance["suspects"]) != 3 or "nothing flows in feed" not in balance["head"]:
        wrong.append("%r, %s" % (balance["suspects"], balance["head"]))
    flowing = verdicts([solved(*PARTED, "  known feed = 100 kmol/h")])[0]["case"]
    if flowing["status"] != "determined" or flowing["negative"] != ["tail"] \
            or flowing["impossible"] != balance["conflict"]:
        wrong.append("%(status)s, %(negative)r, %(impossible)r" % flowing)
    tap.tell([line for line in wrong if line], "a share and two analyses that do not go together")


def closed(tap):
    """A line that is closed may have an analysis, and all may go one way: no clash."""
    for name, lines in (("a closed vent", ("  known vent = 0 kmol/h", "  known CH4 of vent = 5 mol%",
                                           "  known CH4 of feed = 60 mol%")),
                        ("all to the product", ("  known out = 100 % of feed",
                                                "  known CH4 of vent = 5 mol%",
                                                "  known CH4 of feed = 60 mol%")),
                        ("an idle plant", ("  known feed = 0 kmol/h", "  known CH4 of out = 5 mol%",
                                           "  known CH4 of vent = 7 mol%"))):
        balance = verdicts([solved("  separate trap: feed = out + vent", "  components CH4, CO2",
                                   *lines)])[0]["case"]
        tap.tell("" if balance["status"] != "contradictory" else "%r" % balance["conflict"],
                 "no clash: " + name)


# ---- Flows that clash ----

def echelon(rows):
    """The rows without what others say; None if they say 0 = something (the last column)."""
    done = []
    for row in rows:
        row = list(row)
        for lead, other in done:
            if row[lead]:
                by = row[lead]
                row = [a - by * b for a, b in zip(row, other)]
        lead = next((j for j, a in enumerate(row[:-1]) if a), None)
        if lead is None:
            if row[-1]:
                return None
            continue
        row = [a / row[lead] for a in row]
        done = [(l, [a - other[lead] * b for a, b in zip(other, row)] if other[lead] else other)
                for l, other in done] + [(lead, row)]
    return done


class Meters:
    """Whole flows of a plant of a few units, in whole numbers typed to three decimals; one or two
    of the meters are wrong."""

    def __init__(self, chance, name):
        self.name = name
        flows, edges, self.units = [chance.randint(2000, 9000)], [0], []
        for _ in range(chance.randint(2, 4)):
            inlet = max(edges, key=lambda s: flows[s] * chance.random())
            edges.remove(inlet)
            parts = sorted(chance.sample(range(1, flows[inlet]), chance.choice((1, 1, 2))))
            outlets = [b - a for a, b in zip([0] + parts, parts + [flows[inlet]])]
            new = list(range(len(flows), len(flows) + len(outlets)))
            flows += outlets
            edges += new
            self.units.append((inlet, new))
        self.streams = len(flows)
        met = sorted(chance.sample(range(self.streams),
                                   chance.randint(self.streams - 2, self.streams)))
        self.meters = {s: Fraction(flows[s]) for s in met}
        for s in chance.sample(met, chance.choice((1, 2, 2))):
            self.meters[s] += chance.choice((-1, 1)) * chance.randint(5, 60)
            self.meters[s] = abs(self.meters[s]) or Fraction(3)
        self.balances = []
        for inlet, outlets in self.units:
            row = [Fraction(0)] * (self.streams + 1)
            row[inlet] = Fraction(1)
            for s in outlets:
                row[s] = Fraction(-1)
            self.balances.append(row)
        done = dict(echelon(self.balances))
        free = [j for j in range(self.streams) if j not in done]
        self.reduced = {}                 # meters in terms of the streams no balance gives
        for s, value in self.meters.items():
            row = done.get(s)
            self.reduced[s] = [-row[j] if row else Fraction(int(j == s)) for j in free] \
                + [value - (row[-1] if row else 0)]

    def line(self, s):
        """A meter as typed."""
        return "known %s-s%d = %.3f kmol/h" % (self.name, s, self.meters[s])

    def text(self):
        """The balance."""
        units = ["  separate u%d: %s-s%d = %s" % (
            n, self.name, inlet, " + ".join("%s-s%d" % (self.name, s) for s in outlets))
            for n, (inlet, outlets) in enumerate(self.units)]
        return solved(*units, *["  " + self.line(s) for s in self.meters], name=self.name)

    def rows(self, which):
        """The balances and the meters WHICH."""
        rows = list(self.balances)
        for s in which:
            row = [Fraction(0)] * (self.streams + 1)
            row[s], row[-1] = Fraction(1), self.meters[s]
            rows.append(row)
        return rows

    def agree(self, which):
        """Do the meters WHICH agree?"""
        return echelon([self.reduced[s] for s in which]) is not None

    def smallest(self):
        """The size of the smallest set that clashes; 0: none does."""
        for size in range(1, len(self.meters) + 1):
            if any(not self.agree(which)
                   for which in itertools.combinations(self.meters, size)):
                return size
        return 0

    def says(self, which, s):
        """What the meters WHICH say of stream S with no flow below nothing and all above it; None:
        nothing certain, or no such flows."""
        done = echelon(self.rows(which))
        found = next((row for lead, row in done if lead == s), None)
        if found is None or any(found[j] for j in range(self.streams) if j != s):
            return None
        rows = [(row[:-1], "=", row[-1]) for row in self.rows(which)]
        rows += [([-Fraction(j == t) for j in range(self.streams)], "<", Fraction(-1, 10 ** 6))
                 for t in range(self.streams)]
        return found[-1] if feasible(rows) else None

    def pairs(self):
        """Pairs at fault where no single meter is, with what each would have to say."""
        found = {}
        for pair in itertools.combinations(self.meters, 2):
            rest = [s for s in self.meters if s not in pair]
            if self.agree(rest):
                said = [self.says(rest, s) for s in pair]
                if None not in said:
                    found[pair] = said
        return found


def look_pairs(meters, balance):
    """Those told are pairs, with what they would say, and none is left out."""
    pairs = meters.pairs()
    lines = {meters.line(s): s for s in meters.meters}
    wrong, alone = [], False
    for s in meters.meters:
        rest = [t for t in meters.meters if t != s]
        alone = alone or (meters.agree(rest) and meters.says(rest, s) is not None)
    if alone:
        return ["a meter alone can be blamed, and pairs are told"] if balance["pairs"] else []
    count = len(balance["pairs"]) + balance["pairs_left"]
    if count != len(pairs):
        wrong.append("%d pairs, not %d" % (count, len(pairs)))
    for pair in balance["pairs"]:
        which = tuple(sorted(lines[one["statement"]] for one in pair))
        said = {lines[one["statement"]]: one["needed"] for one in pair}
        if which not in pairs:
            wrong.append("%r are no pair" % (which,))
            continue
        wrong += [session.off(said[s], float(value), 1e-6 * float(value) + 1e-6, "abs")
                  for s, value in zip(which, pairs[which])]
    return [line for line in wrong if line]


def look_meters(meters, balance):
    """A set of least size that clashes, and the pairs."""
    size = meters.smallest()
    if size == 0:
        return [] if balance["status"] != "contradictory" else ["no clash"]
    if balance["status"] != "contradictory":
        return ["%s, smallest set %d" % (balance["status"], size)]
    which = [int(line.split("-s")[1].split(" ")[0]) for line in balance["conflict"]]
    wrong = []
    if len(which) != size or meters.agree(which) or not balance["smallest"]:
        wrong.append("%r (smallest %r), of least size %d" % (which, balance["smallest"], size))
    return wrong + look_pairs(meters, balance)


def metered(tap):
    """Meters at random."""
    chance = random.Random(SEED)
    some = [Meters(chance, "w%d" % i) for i in range(220)]
    balances, wrong = verdicts([m.text() for m in some])
    paired = surplus = 0
    for meters in some:
        if meters.name in balances:
            balance = balances[meters.name]
            wrong += ["%s: %s\n%s" % (meters.name, line, meters.text())
                      for line in look_meters(meters, balance)]
            paired += bool(balance["pairs"])
            surplus = max(surplus, balance["surplus"])
    if paired < 40 or surplus < 4:
        wrong.append("%d with pairs, at most %d to spare: the draw tells nothing" % (paired,
                                                                                    surplus))
    tap.tell(wrong, "%d plants of meters against all sets and pairs, seed %d" % (len(some), SEED))


def slips(tap):
    """Three separators of 100 that part into 50 and 40, which share nothing: with two, 3 x 3 pairs
    are at fault; with three no pair is, and that is said."""
    lines = []
    for n in range(3):
        names = tuple("case-%d%s" % (n, s) for s in "abc")
        lines.append(["  separate u%d: %s = %s + %s" % (n, *names)]
                     + ["  known %s = %d kmol/h" % pair for pair in zip(names, (100, 50, 40))])
    two = verdicts([solved(*lines[0], *lines[1])])[0]["case"]
    wrong = "" if len(two["pairs"]) == 5 and two["pairs_left"] == 4 \
        else "%d pairs and %d" % (len(two["pairs"]), two["pairs_left"])
    tap.tell(wrong, "two slips that share nothing")
    three = solved(*lines[0], *lines[1], *lines[2])
    balance = verdicts([three])[0]["case"]
    said = [text for label, text in balance["says"] if label == "no line alone"]
    tap.tell("" if not balance["pairs"] and said and "no pair of lines" in said[0]
             else "%r %r" % (balance["pairs"], said), "three slips are more than a pair")


# ---- What is said not to be there ----

NOTHINGS = [
    # What cannot leave cannot enter: 40 % of 100 is CO2, which one of the two would have to take.
    ("two absences",
     ("  separate membrane: feed = product + tail", "  components CH4, CO2",
      "  known feed = 100 kmol/h", "  known CH4 of feed = 60 mol%", "  absent CO2 of product",
      "  absent CO2 of tail"),
     {2: 0, 3: 100, 4: 40, 5: 40}),
    # 2 % of a tail of 20 must come in with 100; a product of 80 could hold nothing else.
    ("a composition that leaves it out",
     ("  separate membrane: feed = product + tail", "  components CH4, CO2, H2S",
      "  known feed = 100 kmol/h of (CH4 60, CO2 40 mol%)", "  known H2S of tail = 2 mol%",
      "  known tail = 20 kmol/h"),
     {2: (0.4, 80.4), 3: 0, 4: 0}),
    # Two streams further on; of the feed 20 leave before.
    ("absences further up",
     ("  separate membrane: feed = product + tail", "  mix dosing: tail + blown = stack",
      "  components CH4, CO2, H2S", "  absent H2S of feed", "  absent H2S of blown",
      "  known feed = 100 kmol/h", "  known product = 20 kmol/h", "  known blown = 20 kmol/h",
      "  known H2S of stack = 2 kmol/h"),
     {3: (2, 22), 4: 2, 8: 0}),
    # Nothing comes in; without that line as much as leaves, or more.
    ("a flow of nothing",
     ("  separate membrane: feed = product + tail", "  components CH4, CO2",
      "  known feed = 0 kmol/h", "  known product = 70 kmol/h"),
     {2: (70, None), 3: 0}),
]


def nothings(tap):
    """By hand: the lines that clash with an absence, and what the others leave each to say."""
    for name, lines, want in NOTHINGS:
        balance = verdicts([solved(*lines)])[0]["case"]
        wrong = []
        if sorted(balance["conflict"]) != sorted(lines[i].strip() for i in want):
            wrong.append("the set is %r" % balance["conflict"])
        said = {one["statement"]: one for one in balance["suspects"]}
        for i, value in want.items():
            one = said.get(lines[i].strip())
            if one is None:
                wrong.append("not at fault: " + lines[i])
            elif not isinstance(value, tuple):
                wrong.append(session.off(one["needed"], value, 1e-7, "abs"))
            else:
                wrong.append(session.off(one["least"], value[0], 1e-7, "abs"))
                wrong.append(session.off(one["greatest"], value[1], 1e-7, "abs") if value[1]
                             else "" if one["greatest"] is None else "%r" % one)
        tap.tell([line for line in wrong if line], "a clash with " + name)


def beside_measured(tap):
    """Exact figures that clash through splits of unknown share, beside figures that can bend: what
    leaves a split has the share of what enters, so that two shares of one gas cannot differ.  The
    lines with ± are not blamed for it."""
    text = solved("split fork: a = b + c", "split two: c = d + e", "mix m: d + b = f",
                  "components CH4, CO2", "known CH4 of e = 30 mol%", "known CH4 of f = 32 mol%",
                  "known a = 100 ± 1 kmol/h", "known c = 40 ± 1 kmol/h",
                  "known b = 61 ± 1 kmol/h", "known CH4 of b = 31 ± 1 mol%", name="forks")
    balances, faults = verdicts([text])
    named = balances.get("forks", {}).get("conflict")
    tap.tell(faults + ([] if named == ["known CH4 of e = 30 mol%", "known CH4 of f = 32 mol%"]
                       else [repr(named)]), "exact figures are named, not those with ±")


def main():
    tap = session.Tap()
    nothings(tap)
    slips(tap)
    metered(tap)
    chains(tap)
    parted(tap)
    closed(tap)
    mixers(tap)
    blend(tap)
    beside_measured(tap)
    return tap.finish()


sys.exit(main())
