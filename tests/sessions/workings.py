"""How answers came about: what `workings` tells of every kind of answer.

For each statement: the last step to every figure has the figure of the answer, bit for bit; every
step's formula gives its value again from the figures it tells, both as it writes them and by an
evaluator of its own here over the formula and its symbols; every step has a unit and a source; the
shares of an uncertainty add up to one.  No figure is compared with one of this program alone: the
two sides are the record and the answer, or the record and arithmetic done here."""
import math
import re
import sys

from session import answers, run, Tap

PREAMBLE = """
gas raw = CH4 58.2, CO2 rest, N2 1.4, O2 0.4, H2S 850 ppm mol% dry
gas fuel = CH4 92.1, C2H6 4.3, C3H8 rest mol%
gas heavy = CH4 85, C2H6 8, C3H8 4, nC4H10 2, nC5H12 1 mol%
gas damp = raw saturated at 38 degC, 25 mbar(g)
gas byweight = CO2 5.02, N2 rest mass%
gas off = CH4 60.1, CO2 40.0 mol%
gas lab = CH4 55.2, CO2 35.1, O2 1.8, N2 7.3 mol%
gas leaky = CH4 57, CO2 36, O2 1.9, N2 4.9 mol%
gas flue = N2 rest, CO2 11.9, O2 3.4, NO 180 ppm vol% dry
gas stated with molar mass 19.8 g/mol, gross calorific value 39.1 MJ/Sm3
gas doubtful = CH4 58.2 ± 0.3, CO2 39.9 ± 0.3, N2 1.9 mol%
stream feed = 850 Nm3/h of raw at 38 degC, 25 mbar(g), saturated
stream mix = feed + 120 kg/h of C3H8 at 15 degC, 2 bar(g)
stream purge = 5 % of mix
stream product = mix - purge
stream tail = mix keeping CO2 98 %, CH4 1.2 %
reference vendor = 68 degF, 14.7 psia, 36 %RH
let q = 850 Nm3/h
let m = CO2 of feed in kg/h
let e = 4.2 MJ/kg
"""

# Every kind of value and conversion, every property, every treatment, sums.
STATEMENTS = """
850 Nm3/h of raw in kg/h
feed in kg/h, kmol/h, scfm, m3/h, Nm3/h dry, MW gross, MW net, Sm3/h real
2150 acfm of air at 95 degF, 14.2 psia, 60 %RH in Nm3/h dry, kg/h
120 kg/h of C3H8 in Nm3/h
5 kmol/h of CH4 in kg/h
3 MW gross of fuel in Nm3/h
3 MW net of fuel in kg/h
850 Nm3/h dry of damp in kg/h
900 m3/h of raw at 20 degC, 2 bar(a), Z 0.98 in kg/h
900 m3/h of raw at 20 degC, 2 bar(a), ideal in Nm3/h
50 L of N2 at 200 bar(g), 15 degC in kg, Nm3
CO2 of feed in kg/h, kmol/h, Nm3/h, mol%, mass%, kg/m3, ppmw
H2S of raw in mg/m3 at normal
H2S of feed in gr/100scf counted as S
NO of flue in mg/m3 at normal, dry, 3 %O2
NO of flue in mg/Nm3 counted as NO2, dry
NO of flue in ppm dry, 3 %O2
raw in mass%
feed in mol%
CO2 of raw in vol% real
25 ppm of H2S in mg/m3 at 20 degC, 1 atm
50 ppm of H2S within raw in ppmw
12 mg/Nm3 of H2S in ppm
200 mg/Nm3 of NO at 5 %O2 in mg/Nm3 dry, 3 %O2
40 ppmw of H2S within raw in ppm
4.7 kWh/Nm3 of H2 in kWh/kg
35 MJ/kg of fuel in MJ/Sm3
purge / feed in mol/mol, kg/kg, MJ/MJ gross
CO2 of product / CO2 of feed in mol/mol
2 * feed in kg/h
feed * 3 h in kg
98 % of CO2 of mix in kg/h
CO2 of feed + CO2 of tail in kg/h
CO2 of mix - CO2 of tail in kmol/h
12 bar(g) in psi(g)
12 bar(g) in bar(a)
1 bar(a) in mbar(vac)
20 degC + 5 K in degF
30 degC - 10 degC in K(diff)
site pressure in kPa
850 Nm3/h + 100 scfm in Sm3/h
850 m3/h at 20 degC, 2 bar(a) in Nm3/h
850 Nm3/h in kmol/h
25 mg/Nm3 in mg/Sm3
q * 3 h in Nm3
e * 20 kg/h in kW
m in lb/h
ln(2.5) in mol/mol
sqrt(2) * exp(1) in mol/mol
molar mass of raw
density of raw at 20 degC, 5 bar(g)
density of raw at 20 degC, 5 bar(g) in mol/L
density of raw at 20 degC, 5 bar(g), ideal
molar volume of raw at 20 degC, 5 bar(g)
relative density of raw
relative density of fuel at 15 degC, 1.01325 bar(a), real
Z of raw at 20 degC, 50 bar(a)
Z of raw at 20 degC, 50 bar(a), ideal
gross calorific value of fuel in MJ/m3, MJ/kg, kJ/mol, MJ/Nm3, MJ/m3 real
net calorific value of fuel in MJ/m3, MJ/kg, kJ/mol, kWh/Nm3, MJ/Sm3 real
gross calorific value of stated in MJ/Sm3
wobbe of fuel
wobbe of fuel in MJ/Sm3 real
net wobbe of fuel
wobbe of fuel - wobbe of raw in MJ/m3
cp of raw at 20 degC, 5 bar(a)
cv of raw at 20 degC, 5 bar(a)
kappa of raw at 20 degC, 5 bar(a)
speed of sound of raw at 20 degC, 5 bar(a)
cp of raw at 20 degC, 5 bar(a), ideal
speed of sound of raw at 20 degC, 5 bar(a), ideal
cp of raw at 20 degC, 5 bar(a) in J/(mol*K)
viscosity of raw at 20 degC
viscosity of CH4 at 20 degC
second virial coefficient of raw at 20 degC
second virial coefficient of CH4 at 20 degC
water dew point of feed
water dew point of raw at -10 degC, 25 mbar(g), dew point -20 degC
water dew point of air at 20 degC, 1 bar(a), 60 %RH
hydrocarbon dew point of heavy at 40 bar(a)
water content of damp
water content of feed in kg/h
relative humidity of feed at 45 degC, 25 mbar(g)
relative humidity of air at 30 degC, 1 bar(a), dew point 12 degC
flammable limits of fuel
lower flammable limit of raw
upper flammable limit of CH4
partial pressure of CO2 of feed
temperature of feed
pressure of feed in kPa
stated total of lab
composition of mix
lab normalised in mol%
lab normalised into N2 in mol%
lab without air normalised in mol%
leaky without air by N2 normalised in mol%
lab without CO2 normalised in mol%
damp dried in mol%
raw wetted to 3.1 mol% in mol%
raw saturated at 10 degC, 2 bar(a) in mass%
off in mass%
byweight in mol%
100 Nm3/h of (CH4 60, CO2 40 mol%) in kg/h
100 Nm3/h of (raw 60, air 40 mol%) in kg/h
100 Nm3/h of (CH4 12, CO2 7 kg) in kg/h
100 Nm3/h of (N2 rest, H2S 41 mg/Nm3 mol%) in kg/h
mix in kg/h, lb/h
product in kg/h
tail in mol%
feed dried in kg/h
feed wetted to 4 mol% in kg/h
"""

MODELS = """
density of raw at 20 degC, 50 bar(a)
cp of raw at 20 degC, 50 bar(a)
900 m3/h of raw at 20 degC, 50 bar(a) in Nm3/h
"""

NAMES = {"sqrt": math.sqrt, "ln": math.log, "exp": math.exp, "min": min, "max": max}
SOLVED_WITHOUT_FIGURES = re.compile(r"Z\(rho|H_a|f_i|c_p/R|c_v/R|dp/|psat = p_w|sum_i")
TOLERANCE = 1e-9


class Checks(Tap):
    def check(self, name, wrong):
        self.tell(wrong, name)


def arithmetic(text):
    """What FIGURES, a formula with figures put in, comes to."""
    return eval(text.replace("^", "**"), {"__builtins__": {}}, NAMES)   # our own output, no names


def symbols_of(step):
    return {symbol["symbol"]: symbol["value"] for symbol in step["symbols"]}


def formula_value(expression, symbols, terms):
    """An evaluator of its own: a formula's right side with symbols, sums over terms."""
    tokens = re.findall(r"[A-Za-z_][A-Za-z_0-9]*|[0-9.]+|[-+*/^(),]", expression)

    def expression_of(at, scope):
        value, at = product(at, scope)
        while at < len(tokens) and tokens[at] in "+-":
            right, after = product(at + 1, scope)
            value, at = (value + right if tokens[at] == "+" else value - right), after
        return value, at

    def product(at, scope):
        value, at = power(at, scope)
        while at < len(tokens) and tokens[at] not in "+-),":
            if tokens[at] in "*/":
                right, after = power(at + 1, scope)
                value, at = (value * right if tokens[at] == "*" else value / right), after
            else:
                right, at = power(at, scope)
                value *= right
        return value, at

    def power(at, scope):
        value, at = atom(at, scope)
        if at < len(tokens) and tokens[at] == "^":
            exponent, at = atom(at + 1, scope)
            value = value ** exponent
        return value, at

    def atom(at, scope):
        token = tokens[at]
        if token == "-":
            value, at = power(at + 1, scope)
            return -value, at
        if token == "(":
            value, at = expression_of(at + 1, scope)
            return value, at + 1
        if token[0].isdigit():
            return float(token), at + 1
        if at + 1 < len(tokens) and tokens[at + 1] == "(" and (token in NAMES or token == "sum"):
            if token == "sum":
                total = 0.0
                for term in terms:
                    value, after = expression_of(at + 2, {**scope, **term["values"]})
                    total += value
                return total, after + 1
            values, at = [], at + 1
            while tokens[at] in "(,":
                value, at = expression_of(at + 1, scope)
                values.append(value)
            return NAMES[token](*values), at + 1
        return scope[token], at + 1

    value, end = expression_of(0, symbols)
    if end != len(tokens):
        raise ValueError("left over: %r" % tokens[end:])
    return value


def apart(got, want):
    return abs(got - want) > TOLERANCE * max(abs(got), abs(want), 1e-300)


def recompute(step):
    """Complaints on a step whose formula does not give its value."""
    formula, symbols = step["formula"], symbols_of(step)
    if not formula:
        return []
    if "solved" in step:
        if SOLVED_WITHOUT_FIGURES.search(formula):
            return []
        left, right = (arithmetic(side) for side in step["figures"].split(" = "))
        return ["%s: %r is not %r" % (step["step"], left, right)] if apart(left, right) else []
    name, right = formula.split(" = ", 1)
    if name.endswith("_i"):
        wrong = []
        for term in step["terms"]:
            want = term["values"][name]
            for got in (arithmetic(term["figures"]),
                        formula_value(right, {**symbols, **term["values"]}, [])):
                if abs(got - want) > 1e-9 * max(abs(want), 1e-3):
                    wrong.append("%s, %s: %r, not %r" % (step["step"], term["of"], got, want))
        return wrong
    return ["%s: %r, not %r" % (step["step"], got, step["value"])
            for got in (arithmetic(step["figures"]),
                        formula_value(right, symbols, step["terms"])) if apart(got, step["value"])]


def unsourced(step):
    """Complaints on a step that does not say where something is from."""
    wrong = [] if step["source"] else ["%s has no source" % step["step"]]
    if not step["unit"] and not step["formula"].startswith("a = "):
        wrong.append("%s has no unit" % step["step"])
    return wrong


def look_at(statement, answer, workings):
    """All complaints on one statement."""
    if "error" in answer:
        return [answer["error"]["message"]]
    if "error" in workings:
        return [workings["error"]["message"]]
    steps = workings["workings"]
    plain = [step for step in steps if step["share"] is None]
    wrong = [line for step in plain for line in recompute(step) + unsourced(step)]
    told = [step["value"] for step in plain if step["formula"].startswith("a = ")]
    figures = [figure["value"] for figure in answer["answers"]]
    if told[-len(figures):] != figures:
        wrong.append("told %r, answered %r" % (told[-len(figures):], figures))
    if plain[-1]["value"] != figures[-1]:
        wrong.append("the last step is %r" % plain[-1])
    return ["%s: %s" % (statement, line) for line in wrong]


def check_all(tap, name, preamble, statements):
    lines = [line for line in statements.strip().splitlines() if line]
    text = preamble + "".join("%s\nworkings\n" % line for line in lines)
    objects = [thing for thing in answers(text)]
    offset = len(objects) - 2 * len(lines)
    for i, line in enumerate(lines):
        answer, workings = objects[offset + 2 * i], objects[offset + 2 * i + 1]
        tap.check("%s%s" % (name, line), look_at(line, answer, workings))


def shares(tap):
    """The inputs of an uncertainty, each with its share of the variance."""
    objects = answers(PREAMBLE + "850 Nm3/h ± 2 % of doubtful in kg/h\nworkings\n")
    answer, workings = objects[-2], objects[-1]
    inputs = [step for step in workings["workings"] if step["share"] is not None]
    u = answer["answers"][0]["uncertainty"]
    tap.check("the shares add up to one",
              [] if abs(sum(step["share"] for step in inputs) - 1) < 1e-12 else [repr(inputs)])
    tap.check("there is one for each uncertain figure",
              [] if len(inputs) == 3 else [repr([step["step"] for step in inputs])])
    tap.check("they make the uncertainty",
              [] if not apart(math.sqrt(sum(step["value"] ** 2 for step in inputs)), u)
              else [repr(u)])
    tap.check("their figures give them",
              [step["step"] for step in inputs if apart(arithmetic(step["figures"]),
                                                        step["value"])])


def kept(tap):
    """The last answer's workings outlast what comes after it, and nothing else is told of it."""
    ask = "feed in kg/h, m3/h\nworkings\n"
    later = ("set site pressure 0.9 bar\nworkings\n", "undo\nundo\nworkings\n",
             "gas raw = CH4 100 mol%\nworkings\n", "nonsense of raw\nworkings\n",
             "forget tail\nforget purge\nworkings\n", "help gas\nlist\nshow raw\nworkings\n",
             "set digits 8; set gas model ideal; let q = 3 kg; workings\n")
    for change in later:
        objects = [thing for thing in answers(PREAMBLE + ask + change) if "workings" in thing]
        tap.check("kept after " + " ".join(change.split("\n")[:-2]),
                  [] if len(objects) == 2 and objects[0]["workings"] == objects[1]["workings"]
                  else ["%d records, which differ" % len(objects)])
    objects = answers("workings\n1 kg/h of CH4 in Nm3/h\nworkings\n")
    tap.check("there are none before an answer",
              [] if objects[0].get("error", {}).get("kind") == "workings-none"
              and "workings" in objects[2] else [repr(objects[0])])
    many = "".join("%d kg/h of CH4 in Nm3/h\n" % (i + 1) for i in range(700))
    objects = answers(PREAMBLE + many + "workings\n")
    tap.check("the last of many answers is told of",
              [] if objects[-1]["workings"][-1]["value"] == objects[-2]["answers"][0]["value"]
              else [repr(objects[-1])])


def names_once(tap):
    """A name's steps stand once, behind those of the names it leans on."""
    objects = answers(PREAMBLE + "product in kg/h, Nm3/h\nproduct in lb/h\nworkings\n")
    steps = [step["step"] for step in objects[-1]["workings"]]
    tap.check("each name once", [] if steps.count("total of the parts of raw") == 1 else steps)
    order = ["total of the parts of raw", "amount of the blend", "share of mix",
             "amount of the remainder"]
    places = [steps.index(name) for name in order if name in steps]
    tap.check("in order of dependence",
              [] if len(places) == 4 and places == sorted(places) else steps)


def short_names(tap):
    """Of two names of sources, one the beginning of the other, the one that is meant is explained."""
    text = "second virial coefficient of CH4 at 20 degC\nworkings\n"
    _, out, _ = run(text, "text")
    explained = [line.strip().split(":")[0] for line in out.splitlines() if " W. M. Haynes" in line]
    tap.check("the longer name of a source alone", [] if explained == ["CRC 2014 6"] else explained)


def others(tap):
    """Statements that answer without being questions."""
    text = PREAMBLE + "let dose = 100 kg/h\nstream fed = feed + dose of C3H8\n"
    objects = answers(text + "trim dose so wobbe of fed = 30 MJ/m3\nworkings\n")
    trimmed, workings = objects[-2], objects[-1]
    tap.check("a trim has its quantities",
              [] if workings.get("workings", [{}])[-1].get("value")
              == trimmed["answers"][0]["value"] else [repr(workings)[:300]])
    objects = answers(text + "check feed against 1018 kg/h\nworkings\n")
    steps = objects[-1].get("workings", [])
    tap.check("a check has both figures",
              [line for step in steps for line in recompute(step)]
              if [step["step"] for step in steps][-3:-1] == ["stated less computed", "deviation"]
              else [repr(objects[-1])[:300]])


BALANCE = """
balance plant
  mix      dosing:    biogas + recycle = mixed
  separate membrane:  mixed = sweet + rich
  split    purge-tee: rich = vent + recycle
  known biogas = 850 Nm3/h of (CH4 60, CO2 40 mol%)
  known CO2 of rich = 98 % of CO2 of mixed
  known vent = 50 % of rich
  known CH4 of sweet = 97.2 mol%
end
solve plant
workings
sweet in kg/h
workings
"""


def balances(tap):
    """A solved balance, and a stream it made."""
    solved, workings, answer, after = [thing for thing in answers(BALANCE)][-4:]
    steps = {step["step"]: step for step in workings.get("workings", [])}
    wrong = [line for step in steps.values() for line in recompute(step) + unsourced(step)]
    for name, stream in solved["balance"]["streams"].items():
        step = steps.get("flow of " + name, {"value": None})
        if stream["molar_flow"] is not None and step["value"] != stream["molar_flow"]:
            wrong.append("%s: %r, not %r" % (name, step["value"], stream["molar_flow"]))
    for name in ("dosing", "membrane", "purge-tee"):
        if apart(steps["into " + name]["value"], steps["out of " + name]["value"]):
            wrong.append(name + " is not closed")
    if steps["degrees of freedom of plant"]["value"] != 0:
        wrong.append("freedom")
    tap.check("a balance has its facts, its count and its flows", wrong)
    tap.check("a stream it made says so",
              look_at("sweet in kg/h", answer, after)
              + ([] if any(step["source"] == "solution of balance plant"
                           for step in after["workings"]) else ["no such step"]))


CLASH = """
balance plant
  separate membrane: feed = product + tail
  known feed = 850 kmol/h of (CH4 60, CO2 40 mol%)
  known CH4 of product = 97 mol%
  known tail = 300 kmol/h
  known CH4 of tail = 2 mol%
end
solve plant
workings
"""


def clash(tap):
    """In less out is 0.6 feed - 0.97 (feed - tail) - 0.02 tail = -0.37 850 + 0.95 300, by hand."""
    solved, workings = answers(CLASH)[-2:]
    steps = {step["step"]: step for step in workings.get("workings", [])}
    step = steps.get("gap around membrane, CH4")
    if step is None:
        return tap.check("a clash shows what does not close", sorted(steps))
    wrong = recompute(step) + unsourced(step)
    if apart(step["value"], -29.5 / 3.6) or apart(solved["balance"]["gap"]["value"], -29.5):
        wrong.append("%r, %r" % (step["value"], solved["balance"]["gap"]))
    shares = {term["of"]: term["values"] for term in step["terms"]}
    for line, share in (("known feed = 850 kmol/h of (CH4 60, CO2 40 mol%)", -0.37),
                        ("known tail = 300 kmol/h", 0.95)):
        if apart(shares[line]["k_i"], share):
            wrong.append("%s: %r" % (line, shares[line]))
    return tap.check("a clash shows what does not close", wrong)


def forms(tap):
    text = PREAMBLE + "850 Nm3/h of raw in kg/h\nworkings\n"
    status, out, _ = run(text, "text")
    page = out.split("_/")[1].splitlines()
    tap.check("a simple conversion fits a screen",
              [] if status == 0 and len(page) <= 26 else [str(len(page))])
    everything = PREAMBLE + "".join("%s\nworkings\n" % line
                                    for line in STATEMENTS.split("\n") if line)
    _, out, _ = run(everything, "text")
    inside, wide = False, []
    for line in out.splitlines():
        inside = line.startswith("      _/ ") or (inside and line[:6] == "      ")
        if inside and len(line) > 100 and "_/" not in line:
            wide.append(line)
    tap.check("no line is longer than the page", wide[:5])
    _, out, _ = run(text, "csv")
    steps = len(answers(text)[-1]["workings"])
    tap.check("a row a step in CSV",
              [] if out.count("\nworkings,") == steps > 5 else [str(out.count("\nworkings,"))])


def main():
    tap = Checks()
    check_all(tap, "", PREAMBLE, STATEMENTS)
    for model in ("ideal", "Peng-Robinson", "GERG-2008", "AGA8-DETAIL"):
        check_all(tap, model + ": ", PREAMBLE + "set gas model %s\n" % model, MODELS)
    check_all(tap, "1995: ", PREAMBLE + "set calorific values ISO 6976:1995\n",
              "wobbe of fuel\nnet calorific value of fuel in MJ/m3 real\n")
    check_all(tap, "altitude: ", PREAMBLE + "set site altitude 1200 m\n",
              "12 bar(g) in bar(a)\nsite pressure in bar\n")
    shares(tap)
    kept(tap)
    names_once(tap)
    short_names(tap)
    others(tap)
    balances(tap)
    clash(tap)
    forms(tap)
    return tap.finish()


if __name__ == "__main__":
    sys.exit(main())
