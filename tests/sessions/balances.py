"""Balances worked out elsewhere (balance_cases/*.json), put into the language and solved.

A case holds components, boundaries with their streams, facts, and the full answer computed
independently of this program; `published` repeats figures of its source.  The names of its
components stand for components of ours, which changes no flow and no share."""
import json
import os
import sys

import session

FOLDER = "sessions/balance_cases"
STAND_INS = ("CH4", "CO2", "N2", "O2", "H2", "CO", "Ar", "He")
KINDS = {"mixer": "mix", "splitter": "split", "separator": "separate", "reactor": "react"}
STATUS = {"determined": ("determined", "redundant"), "underdetermined": ("underdetermined",),
          "conflict": ("contradictory",), "redundant": ("redundant",)}
HOUR = 3600.0
CLOSE = 2e-8                        # the cases carry twelve digits, the least squares fewer
KEPT = {"H2O", "CH4", "CO2", "N2", "O2", "H2", "H2S", "C2H6", "C3H8", "C3H6"}


class Case:
    """A case and its words in the language."""

    def __init__(self, name):
        self.data = json.loads(session.read("%s/%s.json" % (FOLDER, name)))
        self.mass = self.data["by"] == "mass"
        self.whole = len(self.data["components"]) == 1
        self.flow = "kg/h" if self.mass else "kmol/h"
        self.share = "kg/kg" if self.mass else "mol/mol"
        spare = [key for key in STAND_INS if key not in self.data["components"]]
        self.key = {c: c if c in KEPT else spare.pop(0) for c in self.data["components"]}
        self.lines = {}

    def stream(self, name):
        """A stream's name, safe from components and units."""
        return "s-" + name

    def part(self, term):
        """A flow: {"stream", "component"?}."""
        what = self.stream(term["stream"])
        return "%s of %s" % (self.key[term["component"]], what) if "component" in term else what

    def figure(self, fact, unit):
        """A figure with its uncertainty."""
        spread = " +/- %r" % fact["u"] if fact.get("u") else ""
        return "%r%s %s" % (fact["value"], spread, unit)

    def composition(self, fact):
        """All shares of a stream."""
        u = fact.get("u", {})
        return "(%s %s)" % (", ".join("%s %r%s" % (
            self.key[c], x, " +/- %r" % u[c] if c in u else "")
            for c, x in fact["values"].items()), self.share)

    def known(self, fact):
        """A fact as a line."""
        kind = fact["kind"]
        if kind in ("total", "comp"):
            return "%s = %s" % (self.part(fact), self.figure(fact, self.flow))
        if kind == "frac":
            dry = " dry" if "without" in fact else ""
            return "%s = %s%s" % (self.part(fact), self.figure(fact, self.share), dry)
        if kind == "composition":
            return "composition of %s = %s" % (self.stream(fact["stream"]), self.composition(fact))
        if kind == "ratio":
            return "%s = %s of %s" % (self.part(fact["num"]), self.figure(fact, self.share),
                                      self.part(fact["den"]))
        if kind == "split":
            inlet = self.data["boundaries"][fact["unit"]]["in"][0]
            return "%s = %s of %s" % (self.stream(fact["stream"]), self.figure(fact, self.share),
                                      self.stream(inlet))
        if kind == "linear":
            terms = ["%r * %s" % (term["coef"], self.part(term)) for term in fact["terms"]]
            return "%s = %s" % (" + ".join(terms), self.figure(fact, self.flow))
        raise ValueError("no words for " + kind)

    def boundary(self, name, unit):
        """A unit as a line."""
        kind = KINDS[unit["kind"]]
        if kind == "react" and not unit["reactions"] or kind == "split" and len(unit["in"]) > 1 \
                or kind == "mix" and len(unit["out"]) > 1:
            kind = "separate"
        line = "%s u-%s: %s = %s" % (kind, name, " + ".join(map(self.stream, unit["in"])),
                                     " + ".join(map(self.stream, unit["out"])))
        sides = [" + ".join("%r %s" % (abs(n), self.key[c]) for c, n in nu.items() if n * sign > 0)
                 for nu in unit["reactions"] for sign in (-1, 1)]
        if sides:
            line += " with " + ", ".join("%s = %s" % pair for pair in zip(sides[::2], sides[1::2]))
        return line

    def words(self):
        """The whole block."""
        lines = ["balance case"]
        lines += [self.boundary(*item) for item in self.data["boundaries"].items()]
        if not self.whole:
            lines.append("components " + ", ".join(self.key.values()))
        for stream, held in self.data["holds"].items():
            none = [self.key[c] for c in self.key if c not in held]
            if none:
                lines.append("absent %s of %s" % (", ".join(none), self.stream(stream)))
        for fact in self.data["facts"]:
            line = "known " + self.known(fact)
            self.lines[line] = fact["id"]
            lines.append(line)
        return "\n".join(lines + ["end", "solve case"]) + "\n"


class Answer:
    """The object under "balance", in the terms of a case."""

    def __init__(self, case, thing, masses):
        self.case, self.says, self.masses = case, thing, masses

    def total(self, stream):
        """The flow of a stream, or None."""
        found = self.says["streams"][self.case.stream(stream)]
        return per_hour(found["mass_flow"], 1) if self.case.mass \
            else per_hour(found["molar_flow"], 1e-3)

    def total_or_u(self, path):
        """The flow that a path of the case names, or with a 1 behind it its uncertainty."""
        if path[2:] != [1]:
            return self.total(path[1])
        u = self.says["streams"][self.case.stream(path[1])]["uncertainty"]
        return per_hour(u, 1 if self.case.mass else 1e-3)

    def shares(self, stream):
        """The fractions of a stream on the basis of the case."""
        if self.case.whole:
            return {c: 1.0 for c in self.case.key}
        x = self.says["streams"][self.case.stream(stream)]["fractions"]
        x = {c: x[key] for c, key in self.case.key.items()}
        if self.case.mass and None not in x.values():
            w = {c: v * self.masses[self.case.key[c]] for c, v in x.items()}
            return {c: v / sum(w.values()) for c, v in w.items()}
        return x


def per_hour(value, factor):
    return None if value is None else value * HOUR * factor


def far(got, want, scale=0.0, close=CLOSE):
    """Is GOT not WANT?  None is open."""
    if got is None or want is None:
        return got is not want
    return not abs(got - want) <= close * max(abs(want), scale)


def look_counts(case, answer):
    expect, says = case.data["expect"], answer.says
    wrong = []
    for key, ours in (("dof", "degrees_of_freedom"), ("redundant", "surplus")):
        if key in expect and expect[key] != says[ours]:
            wrong.append("%s %r, not %r" % (ours, says[ours], expect[key]))
    if "status" in expect and says["status"] not in STATUS[expect["status"]]:
        wrong.append("status %s, not %s" % (says["status"], expect["status"]))
    return wrong


def value_of(pair):
    return pair[0] if isinstance(pair, list) else pair


def look_streams(case, answer):
    expect, wrong = case.data["expect"], []
    largest = max([abs(value_of(v)) for v in expect.get("totals", {}).values() if v] or [0])
    for stream, want in expect.get("totals", {}).items():
        got = answer.total(stream)
        if far(got, value_of(want), largest):
            wrong.append("flow of %s: %r, not %r" % (stream, got, want))
        u = answer.says["streams"][case.stream(stream)]["uncertainty"]
        if isinstance(want, list) and (case.whole or not case.mass):
            u = per_hour(u or 0, 1 if case.mass else 1e-3)
            if far(u, want[1], 1e-9 * largest, 1e-5):
                wrong.append("u of %s: %r, not %r" % (stream, u, want[1]))
    for stream, want in expect.get("fractions", {}).items():
        got = answer.shares(stream)
        for component, x in want.items():
            if far(got[component], value_of(x), 1.0):
                wrong.append("%s of %s: %r, not %r" % (component, stream, got[component], x))
    for stream, (least, greatest) in expect.get("ranges", {}).items():
        range_ = answer.says["ranges"].get(case.stream(stream))
        if range_ is None:
            if far(least, greatest, largest):
                wrong.append("no range of " + stream)
            continue
        got = [per_hour(range_[end], 1 if case.mass and case.whole else 1e-3)
               for end in ("least", "greatest")]
        if not case.mass and (far(got[0], least, largest) or far(got[1], greatest, largest)):
            wrong.append("range of %s: %r, not %r .. %r" % (stream, got, least, greatest))
    negative = {name.split(".")[0] for name in expect.get("negative", [])}
    if negative != {name[2:] for name in answer.says["negative"]}:
        wrong.append("negative %r, not %r" % (answer.says["negative"], negative))
    return wrong


def look_open(case, answer):
    """What would close it, by total flows."""
    candidates = case.data["expect"].get("candidates")
    if not candidates:
        return []
    useful = {"flow of " + case.stream(name[6:]) for name in candidates["useful"]
              if name.startswith("total:")}
    offered = {text for group in answer.says["suggestions"] for text in group}
    flows = {text for text in offered if text in
             {"flow of " + case.stream(s) for s in case.data["expect"]["totals"]}}
    wrong = ["offered and of no use: " + text for text in flows - useful]
    return wrong + ([] if offered else ["nothing is offered"])


def look_conflict(case, answer):
    conflict = case.data["expect"].get("conflict")
    if not conflict:
        return []
    wrong = []
    got = {case.lines[line] for line in answer.says["conflict"]}
    if len(got) != len(conflict["smallest_set"]):
        wrong.append("set %r, not of the size of %r" % (got, conflict["smallest_set"]))
    suspects = {case.lines[one["statement"]] for one in answer.says["suspects"]}
    if got == set(conflict["smallest_set"]) and suspects != set(conflict["plausible"]) & got:
        wrong.append("suspects %r, not %r" % (suspects, conflict["plausible"]))
    return wrong


def look_measured(case, answer):
    expect, wrong = case.data["expect"], []
    if "chi2" not in expect:
        return []
    test = answer.says["global_test"]
    if not test:
        return ["no global test"] if expect["nu"] else []
    for key, want in (("chi2", expect["chi2"]), ("critical", expect["chi2_crit_95"]),
                      ("degrees_of_freedom", expect["nu"])):
        if far(test[key], want, 0, 1e-6):
            wrong.append("%s %r, not %r" % (key, test[key], want))
    found = {}
    for one in answer.says["adjustments"]:
        key = case.lines[one["statement"]]
        if one["component"]:
            key += ":" + next(c for c, k in case.key.items() if k == one["component"])
        found[key] = one
    for key, want in expect["measurements"].items():
        got = found.get(key)
        scale = 0.01 if got and got["unit"].endswith("mol%") else 1
        if not got:
            wrong.append("nothing on " + key)
        elif ":" not in key and far(got["reconciled"] * scale, want["estimate"], 0, 1e-7):
            wrong.append("%s: %r, not %r" % (key, got["reconciled"], want["estimate"]))
        elif far(got["z"], want["z"], 0, 1e-4):
            wrong.append("z of %s: %r, not %r" % (key, got["z"], want["z"]))
    return wrong


def look_published(case, answer):
    """What the source itself prints, where it is a flow or a share."""
    wrong = []
    for *path, value, tol in case.data["published"]:
        if path[0] == "totals" and abs(answer.total_or_u(path) - value) > tol:
            wrong.append("published %r: %r" % (path, value))
        if path[0] == "fractions" and abs(answer.shares(path[1])[path[2]] - value) > tol:
            wrong.append("published %r: %r" % (path, value))
    return wrong


def look(name):
    case = Case(name)
    words = case.words()
    masses = "".join("molar mass of %s in g/mol\n" % key for key in case.key.values())
    objects = session.answers(words + masses)
    wrong = session.faults(objects)
    if wrong:
        return wrong + words.splitlines()
    weights = {key: thing["answers"][0]["value"]
               for key, thing in zip(case.key.values(), objects[1:])}
    answer = Answer(case, objects[0]["balance"], weights)
    for part in (look_counts, look_streams, look_open, look_conflict, look_measured,
                 look_published):
        wrong += part(case, answer)
    status, text, _ = session.run(words, "text")
    if status or "nan" in text or "inf " in text:
        wrong.append("as text: status %d" % status)
    return wrong + (words.splitlines() if wrong else [])


def main():
    tap = session.Tap()
    folder = os.path.join(session.TOP, "tests", FOLDER)
    for file in sorted(os.listdir(folder)):
        name = file.removesuffix(".json")
        tap.tell(look(name), "balance: " + name)
    return tap.finish()


sys.exit(main())
