"""The balances of tables/demo worked out apart from the program, and held against what it says.

Speaks TAP.  Arguments: what `--format json` printed for upgrading.gw and header.gw.
Upgrading: by hand, component by component, from the recycle's closed form; the recovery of CO2 that
meets the stated methane of the sweet gas by halving.  Molar masses: CIAAW 2021; Nm3 by R of CODATA
2018.  Header: least squares under two sums, by the normal equations of two multipliers; uncertainty
as in R. S. H. Mah, Chemical Process Structures and Information Flows (1990), chapter 8."""
import json
import math
import sys

NORMAL = 8.314462618 * 273.15 / 101325                      # m3/mol
M = dict(CH4=16.043, CO2=44.009, N2=28.014)


def upgrading(recovered):
    """Nm3/h of each component in every stream; RECOVERED: share of each that goes into rich."""
    feed = dict(CH4=850 * 0.60, CO2=850 * 0.385, N2=850 * 0.015)
    back = 0.45                                             # of rich: the vent takes 55 %
    mixed = {key: x / (1 - back * recovered[key]) for key, x in feed.items()}
    rich = {key: x * recovered[key] for key, x in mixed.items()}
    return dict(biogas=feed, mixed=mixed, rich=rich,
                sweet={key: x - rich[key] for key, x in mixed.items()},
                vent={key: 0.55 * x for key, x in rich.items()},
                recycle={key: back * x for key, x in rich.items()})


def upgraded():
    low, high = 0.5, 1.0
    for _ in range(100):
        middle = 0.5 * (low + high)
        streams = upgrading(dict(CH4=0.07, N2=0.30, CO2=middle))
        sweet = streams["sweet"]
        if sweet["CH4"] / sum(sweet.values()) < 0.964:
            low = middle
        else:
            high = middle
    return streams


METERS = ["grid-gas", "sweet-gas", "total", "boiler-1", "boiler-2", "drier"]
STATED = [410, 472, 884, 431, 296, 118]
SPREAD = [4, 5, 9, 5, 4, 2]
SUMS = [[1, 1, -1, 0, 0, 0], [0, 0, 1, -1, -1, -1]]


def reconciled():
    """Adjusted figures, their uncertainties, chi-squared, and the test value of each meter."""
    V = [u * u for u in SPREAD]
    gap = [sum(a * x for a, x in zip(row, STATED)) for row in SUMS]
    (a, b), (_, d) = [[sum(p * q * v for p, q, v in zip(r, s, V)) for s in SUMS] for r in SUMS]
    det = a * d - b * b
    inverse = [[d / det, -b / det], [-b / det, a / det]]
    lam = [sum(m * g for m, g in zip(row, gap)) for row in inverse]
    moved = [v * sum(row[i] * k for row, k in zip(SUMS, lam)) for i, v in enumerate(V)]
    taken = [v * v * sum(SUMS[r][i] * inverse[r][s] * SUMS[s][i] for r in (0, 1) for s in (0, 1))
             for i, v in enumerate(V)]
    chi2 = sum(g * k for g, k in zip(gap, lam))
    return ([x - m for x, m in zip(STATED, moved)],
            [math.sqrt(v - t) for v, t in zip(V, taken)], chi2,
            [abs(m) / math.sqrt(t) for m, t in zip(moved, taken)])


def things(name):
    with open(name, encoding="utf-8") as file:
        return [json.loads(line) for line in file]


class Tell:
    def __init__(self):
        self.count = self.wrong = 0

    def near(self, got, want, what, rel=1e-9):
        self.count += 1
        good = isinstance(got, (int, float)) and abs(got - want) <= rel * abs(want)
        self.wrong += not good
        print("%s %d - %s" % ("ok" if good else "not ok", self.count, what))
        if not good:
            print("#   %r, not %.12g" % (got, want))


def main(upgrading_file, header_file):
    tell = Tell()
    streams = upgraded()
    printed = things(upgrading_file)
    solved = next(t["balance"] for t in printed if t.get("balance"))
    for name, stream in solved["streams"].items():
        want = streams[name]
        moles = sum(want.values()) / NORMAL / 3600
        tell.near(stream["molar_flow"], moles, "flow of " + name)
        tell.near(stream["mass_flow"], sum(x * M[k] for k, x in want.items()) / NORMAL / 3.6e6,
                  "mass of " + name, 2e-6)
        for key, x in stream["fractions"].items():
            tell.near(x, want[key] / sum(want.values()), "%s of %s" % (key, name))
    answers = {a["label"]: a["value"] for t in printed for a in t.get("answers", [])
               if "label" in a}
    vent = streams["vent"]
    tell.near(answers["what goes round"], sum(x * M[k] for k, x in streams["recycle"].items())
              / NORMAL / 1000, "what goes round", 2e-6)
    tell.near(answers["methane slip"], vent["CH4"] / NORMAL * M["CH4"] / 1000, "methane slip", 2e-6)
    tell.near(answers["CO2 vented"], vent["CO2"] / NORMAL * M["CO2"] * 24e-6, "CO2 vented", 2e-6)
    solved = next(t["balance"] for t in things(header_file) if t.get("balance"))
    values, spreads, chi2, z = reconciled()
    by_name = solved["streams"]
    for name, value, u in zip(METERS, values, spreads):
        tell.near(by_name[name]["molar_flow"], value / NORMAL / 3600, "reconciled " + name)
        tell.near(by_name[name]["uncertainty"], u / NORMAL / 3600, "uncertainty of " + name, 1e-6)
    tell.near(solved["global_test"]["chi2"], chi2, "global test", 1e-6)
    for name, one in zip(METERS, z):
        got = [a["z"] for a in solved["adjustments"] if name in a["statement"].split("=")[0]]
        tell.near(got[0] if len(got) == 1 else None, one, "test value of " + name, 1e-6)
    print("1..%d" % tell.count)
    return tell.wrong > 0 or tell.count < 40


if __name__ == "__main__":
    sys.exit(main(*sys.argv[1:]))
