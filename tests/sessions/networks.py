"""Networks made at random, solved through the language: the truth behind them comes back.

A network is simulated first: feeds of known composition, units with known recoveries and shares,
recycles iterated until they close.  What a plant would know of it is then typed as a balance, in four
ways: just enough, too little, measured with noise, measured with noise and one gross error.  The
figures to come back are those of the simulation, which shares nothing with the program.  What is
known too often, right and wrong, is in stated.py.
"""
import math
import random
import re
import sys

import metered
import session

SEED = 20261201
HOUR = 3600.0
COMPONENTS = ("CH4", "CO2", "N2", "H2", "CO", "O2", "C2H6", "Ar")
BATCH = 20
RANKED = 60                        # component flows up to which ranks are worked out here too
WAYS = ("determined", "short", "noisy", "gross")
COUNT = {"determined": 400, "short": 400, "noisy": 300, "gross": 200}


class Network:
    """Streams s0, s1 ... with component flows in kmol/h, and the units between them."""

    def __init__(self, chance, most):
        self.chance = chance
        self.components = COMPONENTS[:chance.randint(1, len(COMPONENTS))]
        self.flows = []
        self.feeds = []
        self.units = []                   # kind, inlets, outlets, parameters
        self.open = []
        for _ in range(chance.randint(1, 2)):
            self.feed()
        for _ in range(chance.randint(2, most)):
            self.grow()
        self.recycle()
        self.settle()
        self.used = sorted({s for _, inlets, outlets, _ in self.units for s in inlets + outlets})
        self.feeds = [s for s in self.feeds if s in self.used]

    def stream(self):
        """A new stream, empty as yet."""
        self.flows.append([0.0] * len(self.components))
        return len(self.flows) - 1

    def feed(self):
        """A stream from outside."""
        s = self.stream()
        self.flows[s] = [self.chance.uniform(1, 100) for _ in self.components]
        self.feeds.append(s)
        self.open.append(s)
        return s

    def grow(self):
        """One more unit behind what is open."""
        chance = self.chance
        kind = chance.choice(("mix", "separate", "separate", "split"))
        if kind == "mix":
            if len(self.open) < 2:
                self.feed()
            inlets = chance.sample(self.open, 2)
            outlets, parameters = [self.stream()], None
        else:
            inlets = [chance.choice(self.open)]
            outlets = [self.stream() for _ in range(chance.randint(2, 3))]
            width = len(self.components) if kind == "separate" else 1
            parameters = [[chance.uniform(0.05, 0.9 / (len(outlets) - 1)) for _ in range(width)]
                          for _ in outlets[1:]]
        self.units.append((kind, inlets, outlets, parameters))
        for s in inlets:
            self.open.remove(s)
        self.open += outlets

    def recycle(self):
        """Now and then something that leaves goes back into a mixer before it."""
        mixers = [u for u in self.units if u[0] == "mix"]
        ends = [s for s in self.open if s not in self.feeds]
        if mixers and len(ends) > 1 and self.chance.random() < 0.6:
            s = self.chance.choice(ends)
            self.chance.choice(mixers)[1].append(s)
            self.open.remove(s)

    def settle(self):
        """Component flows, swept until nothing moves."""
        for _ in range(5000):
            moved = 0.0
            for kind, inlets, outlets, parameters in self.units:
                total = [sum(self.flows[s][c] for s in inlets)
                         for c in range(len(self.components))]
                for place, s in enumerate(outlets):
                    new = [self.out(kind, parameters, place, c) * n for c, n in enumerate(total)]
                    moved = max(moved, max(abs(a - b) / (abs(a) + 1e-30)
                                           for a, b in zip(new, self.flows[s])))
                    self.flows[s] = new
            if moved < 1e-14:
                return

    @staticmethod
    def out(kind, parameters, place, c):
        """The share of component C that goes to the outlet at PLACE; the last outlet (place 0)
        takes what the others leave."""
        if kind == "mix":
            return 1.0
        at = c if kind == "separate" else 0
        if place == 0:
            return 1.0 - sum(row[at] for row in parameters)
        return parameters[place - 1][at]

    def total(self, s):
        """kmol/h."""
        return sum(self.flows[s])

    def sound(self):
        """Every stream holds something, and a recycle does not go round for ever."""
        most = max(self.total(f) for f in self.feeds)
        return all(1e-4 * most < self.total(s) < 50 * most for s in self.used)


def written(value, digits):
    """VALUE as somebody would type it."""
    text = "%.*g" % (digits, value)
    if "e" in text:
        text = "%.*f" % (max(0, digits - 1 - math.floor(math.log10(abs(value)))), value)
    return text


class Facts:
    """What is known of a network, as lines; each line with the true value of its figure."""

    def __init__(self, network, name, digits):
        self.net = network
        self.name = name
        self.digits = digits
        self.lines = []

    def stream(self, s):
        """The name of a stream, no other network's."""
        return "%s-s%d" % (self.name, s)

    def add(self, form, value, unit, digits=None):
        """FORM = VALUE UNIT."""
        self.lines.append(("known %s = %%s %s" % (form, unit), value, digits or self.digits))
        return len(self.lines) - 1

    def canonical(self):
        """Just enough: the feeds whole, every recovery and share."""
        net = self.net
        for f in net.feeds:
            self.add(self.stream(f), net.total(f), "kmol/h")
            if len(net.components) > 1:
                parts = [100 * n / net.total(f) for n in net.flows[f]]
                texts = [written(x, self.digits) for x in parts[:-1]]
                texts.append("rest")
                self.lines.append(("known composition of %s = (%s mol%%)" % (
                    self.stream(f),
                    ", ".join("%s %s" % pair for pair in zip(net.components, texts))), None, 0))
        for kind, inlets, outlets, parameters in net.units:
            if kind == "mix":
                continue
            source = self.stream(inlets[0])
            for place, s in enumerate(outlets[1:]):
                if kind == "split":
                    self.add(self.stream(s), 100 * parameters[place][0], "%% of %s" % source)
                else:
                    for c, component in enumerate(net.components):
                        self.add("%s of %s" % (component, self.stream(s)),
                                 100 * parameters[place][c],
                                 "%% of %s of %s" % (component, source))

    def text(self, wrong=None, factor=1.0):
        """The balance; the figure of line WRONG is multiplied by FACTOR."""
        net = self.net
        lines = ["balance " + self.name]
        for number, (kind, inlets, outlets, _) in enumerate(net.units):
            lines.append("  %s u%d: %s = %s" % (
                kind, number, " + ".join(self.stream(s) for s in inlets),
                " + ".join(self.stream(s) for s in outlets)))
        lines.append("  components " + ", ".join(net.components))
        for number, (form, value, digits) in enumerate(self.lines):
            if value is None:
                lines.append("  " + form)
            else:
                value *= factor if number == wrong else 1.0
                lines.append("  " + form.replace("%s", written(value, digits)).replace("%%", "%"))
        return "\n".join(lines + ["end", "solve " + self.name, ""])


class Study:
    """Runs networks in batches and keeps what was wrong with each."""

    def __init__(self):
        self.wrong = {way: [] for way in WAYS}
        self.counts = {}
        self.suggested = []
        self.reconciled = self.alarms = self.freedom = 0
        self.chi2 = 0.0
        self.off = []
        self.rate = {"not found": 0, "no minimum": 0, "gross missed": 0, "gross unnamed": 0}

    def fail(self, way, name, what):
        """One thing that is not so."""
        self.wrong[way].append("%s: %s" % (name, what))


def near(got, want, tol):
    """Both in kmol/h."""
    return got is not None and abs(got - want) <= tol


def flows_of(stream, components):
    """Component flows in kmol/h of a stream of the answer; None where not fixed."""
    total = stream.get("molar_flow")
    fractions = stream.get("fractions") or {}
    if total is None:
        return [None] * len(components)
    return [total * HOUR / 1000 * fractions[c] if fractions.get(c) is not None else None
            for c in components]


def far(facts, balance, tol):
    """Streams whose flows are not the truth within TOL of it."""
    net = facts.net
    wrong = []
    for s in net.used:
        truth = net.flows[s]
        stream = balance["streams"].get(facts.stream(s))
        if stream is None:
            wrong.append("%s is missing" % facts.stream(s))
            continue
        total = stream.get("molar_flow")
        if total is None or not near(total * HOUR / 1000, net.total(s), tol * net.total(s)):
            wrong.append("%s: %r, not %r" % (facts.stream(s), total, net.total(s) / HOUR * 1000))
            continue
        for name, got, want in zip(net.components, flows_of(stream, net.components), truth):
            if not near(got, want, tol * net.total(s)):
                wrong.append("%s of %s: %r, not %r" % (name, facts.stream(s), got, want))
    return wrong


def make(chance, most):
    """A network that can be a plant."""
    while True:
        network = Network(chance, most)
        if network.sound():
            return network


def size(chance):
    """How many units at most: small ones as a rule, now and then a large one."""
    return chance.choice((3, 4, 5, 6, 8, 8, 10, 12, 20, 60))


def metered_size(chance):
    """The same where networks take longer."""
    return chance.choice((3, 4, 5, 5, 6, 6, 8, 8, 10, 12, 15, 20) if chance.random() < 0.97 else (60,))


def told(texts):
    """The balances that answer, by name, and the faults."""
    # Said once: a setting has all that leans on it worked out again.
    objects = session.answers("set total tolerance 10 %\n" + "".join(texts))
    return ({thing["balance"]["name"]: dict(thing["balance"], notes=thing["notes"],
                                            taken=thing["taken"])
             for thing in objects if "balance" in thing}, session.faults(objects))


def batches(cases):
    """CASES, BATCH at a time, with what the program answers to their texts."""
    for start in range(0, len(cases), BATCH):
        some = cases[start:start + BATCH]
        yield some, *told([text for _, text, _ in some])


def determined(chance, name):
    """Just enough; figures of twelve digits."""
    facts = Facts(make(chance, size(chance)), name, 12)
    facts.canonical()
    return facts, facts.text(), None


def short(chance, name):
    """One figure less."""
    facts = Facts(make(chance, size(chance)), name, 12)
    facts.canonical()
    lines = [i for i, line in enumerate(facts.lines) if line[1] is not None]
    taken = facts.lines.pop(chance.choice(lines))
    return facts, facts.text(), taken


def noisy(chance, name):
    """Measured with noise; one in ten poorly."""
    case = metered.Metered(chance, make(chance, metered_size(chance)), name,
                           chance.random() < 0.1)
    return case, case.text(), None


def gross(chance, name):
    """Measured with noise, and one figure far off: by 8 to 14 standard deviations of what it is
    adjusted by, u sqrt (1 - h), taken back to the figure itself: u / sqrt (1 - h)."""
    while True:
        case = metered.Metered(chance, make(chance, min(metered_size(chance), 12)), name,
                               False)
        balance = told([case.text()])[0].get(name, {})
        found = {one["statement"]: one for one in balance.get("adjustments", [])}
        lines = [line for line in case.lines if line.measured() and len(line.figures) == 1]
        chance.shuffle(lines)
        for line in lines[:5]:
            one = found.get(line.text())
            if not one or one["z"] is None or (case.columns() <= RANKED and not case.counted(line)[2]):
                continue
            rest = 1 - (one["uncertainty"] / line.u[0]) ** 2
            off = chance.choice((-1, 1)) * chance.uniform(8, 14) / math.sqrt(max(rest, 1e-6))
            # No figure below zero or of another kind; what others check, but hardly, is left out.
            if abs(off) * line.u[0] < 0.3 * line.typed[0] and case.fits(line, off):
                return case, case.text(line, off), (line, off)


def look_determined(study, way, facts, balance, _):
    """Solved, and as simulated."""
    if balance["status"] != "determined":
        study.fail(way, facts.name, "status " + balance["status"])
    elif balance["degrees_of_freedom"] != 0 or balance["surplus"] != 0:
        study.fail(way, facts.name, "counts %(degrees_of_freedom)d, %(surplus)d" % balance)
    for one in balance["practically_undetermined"][:2]:
        study.fail(way, facts.name, "%(what)s is said to hang on last digits" % one)
    for line in far(facts, balance, 1e-7)[:2]:
        study.fail(way, facts.name, line)


def look_short(study, way, facts, balance, _):
    """Short by one; what is called fixed is as simulated; ranges hold the truth."""
    net = facts.net
    if balance["status"] != "underdetermined" or balance["degrees_of_freedom"] != 1:
        study.fail(way, facts.name, "status %(status)s, short by %(degrees_of_freedom)d" % balance)
        return
    for s in net.used:
        stream = balance["streams"].get(facts.stream(s), {})
        total = stream.get("molar_flow")
        if total is not None and not near(total * HOUR / 1000, net.total(s),
                                          1e-7 * net.total(s)):
            study.fail(way, facts.name, "%s is not fixed at %r" % (facts.stream(s), total))
        for part, got, want in zip(net.components, flows_of(stream, net.components),
                                   net.flows[s]):
            if got is not None and not near(got, want, 1e-7 * net.total(s)):
                study.fail(way, facts.name, "%s of %s: fixed at %r" % (part, facts.stream(s), got))
        limits = balance.get("ranges", {}).get(facts.stream(s))
        if limits:
            slack = 1e-7 * net.total(s)
            flow = net.total(s)
            least = (limits["least"] or 0.0) * HOUR / 1000
            greatest = limits["greatest"]
            if flow < least - slack or (greatest is not None
                                        and flow > greatest * HOUR / 1000 + slack):
                study.fail(way, facts.name, "%s: %r lies outside its range" % (
                    facts.stream(s), flow))
    if not balance["suggestions"]:
        study.fail(way, facts.name, "nothing is suggested")
    else:
        study.suggested.append((facts, balance["suggestions"][0]))


def follow(study, way, chance):
    """Any one of the facts suggested, told as it is, settles the network."""
    cases = []
    for facts, names in study.suggested:
        what, stream = chance.choice(names).split(" of ")
        s = int(stream.rsplit("-s", 1)[1])
        net = facts.net
        if what == "flow":
            facts.add(stream, net.total(s), "kmol/h")
        else:
            share = net.flows[s][net.components.index(what)] / net.total(s)
            facts.add("%s of %s" % (what, stream), 100 * share, "mol%")
        cases.append((facts, facts.text(), facts.lines[-1][0]))
    for some, balances, faults in batches(cases):
        study.wrong[way] += faults
        for facts, _, line in some:
            status = balances.get(facts.name, {}).get("status")
            if status != "determined":
                study.fail(way, facts.name, "%s is no help: %s" % (line, status))
            else:
                for one in far(facts, balances[facts.name], 1e-5)[:2]:
                    study.fail(way, facts.name, one)


def look_noisy(study, way, case, balance, _):
    """Found, of one piece, no further off than the truth, and counted as the rank has it."""
    said = " ".join(balance["notes"] + balance["taken"])
    plainly = "held there" not in said and "last digit typed" not in said
    test = balance.get("global_test") or {"degrees_of_freedom": 0, "chi2": 0.0, "passed": True}
    truth = case.misfit(case.net.flows)
    if test["chi2"] > truth * (1 + 1e-6) + 1e-6:
        study.rate["no minimum"] += 1
        return
    if case.columns() <= RANKED and plainly:
        checked, missing, _ = case.counted()
        got = test["degrees_of_freedom"], balance["degrees_of_freedom"]
        if got != (checked, missing):
            study.fail(way, case.name, "%d check each other, %d open" % got
                       + "; by rank %d and %d" % (checked, missing))
    if balance["status"] == "contradictory":
        study.fail(way, case.name, "a clash: %r" % balance["conflict"][:3])
    for line in list(case.judge(balance))[:2]:
        study.fail(way, case.name, line)
    if balance["status"] == "reconciled" and not case.poor:
        study.reconciled += 1
        study.alarms += not test["passed"]
        study.chi2 += test["chi2"]
        study.freedom += test["degrees_of_freedom"]
        study.off += list(case.off(balance))


def look_gross(study, way, case, balance, bad):
    """An alarm, and the culprit among the suspects."""
    if balance["status"] != "reconciled":
        study.fail(way, case.name, "status " + balance["status"])
        return
    study.rate["gross missed"] += balance["global_test"]["passed"]
    if not balance["global_test"]["passed"]:
        named = [suspect["statement"] for suspect in balance["suspects"]]
        study.rate["gross unnamed"] += bad[0].text(bad[1]) not in named


LOOK = {"determined": look_determined, "short": look_short, "noisy": look_noisy,
        "gross": look_gross}
MAKE = {"determined": determined, "short": short, "noisy": noisy, "gross": gross}


def run(study, way):
    """All networks of one way."""
    chance = random.Random("%d %s" % (SEED, way))
    cases = [MAKE[way](chance, "%s%d" % (way, number)) for number in range(COUNT[way])]
    for some, balances, faults in batches(cases):
        lost = [one for one in faults if way == "noisy" and one.endswith("did not converge")]
        study.rate["not found"] += len(lost)
        study.wrong[way] += [one for one in faults if one not in lost]
        for facts, _, hint in some:
            if facts.name in balances:
                LOOK[way](study, way, facts, balances[facts.name], hint)
            elif not lost:
                study.fail(way, facts.name, "no answer")
    study.counts[way] = len(cases)


def tell_noisy(tap, study):
    """What all noisy networks come to together."""
    n = study.reconciled
    # Of n tests at 95 % so many fail: mean and three standard deviations of the binomial.
    spread = 3 * math.sqrt(n * 0.05 * 0.95)
    tap.tell("" if abs(study.alarms - 0.05 * n) <= spread else "%d" % study.alarms,
             "false alarms: 5 %% of %d tests, within %.1f" % (n, spread))
    # Chi2 of all together has the mean of its freedom, and four of its standard deviations.
    spread = 4 * math.sqrt(2 * study.freedom)
    tap.tell("" if abs(study.chi2 - study.freedom) <= spread else "%r" % study.chi2,
             "chi2 of all: %d within %.0f" % (study.freedom, spread))
    # The figures of a network go together, so that no binomial bounds this.
    inside = sum(off <= 1.96 for off in study.off) / max(len(study.off), 1)
    tap.tell("" if 0.93 <= inside <= 0.97 else "%g" % inside,
             "95 %% intervals hold the truth of 93 to 97 %% of %d figures" % len(study.off))


def main():
    tap = session.Tap()
    study = Study()
    ways = sys.argv[1:] or WAYS
    for way in ways:
        run(study, way)
        tap.tell(study.wrong[way], "%d networks, %s, seed %d" % (study.counts[way], way, SEED))
    # Measured with this seed: of noisy networks two are not found and one settles where it does not
    # fit best, all of them metered poorly or hardly; of gross errors 8 % are not the figure that
    # stands out most, as bent figures so far off shift the others too.
    bounds = {"not found": ("noisy", 0.01), "no minimum": ("noisy", 0.01),
              "gross missed": ("gross", 0.05), "gross unnamed": ("gross", 0.1)}
    for rate, (way, bound) in bounds.items():
        if way in ways:
            share = study.rate[rate] / study.counts[way]
            tap.tell("" if share <= bound else "%g" % share, "%s: at most %g of %s" % (
                rate, bound, way))
    if "noisy" in ways:
        tell_noisy(tap, study)
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
