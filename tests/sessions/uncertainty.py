"""Uncertainty through the language: published examples, another library, random trials."""
import itertools
import math
import os
import sys
import tempfile

import session

# The figures of ISO 6976 as a question asks for them: property, unit, in ideal volumes.
FIGURES = {
    "M": ("molar mass", "g/mol"), "Z": ("Z", ""), "V": ("molar volume", "m3/kmol"),
    "HcG": ("gross calorific value", "kJ/mol"), "HcN": ("net calorific value", "kJ/mol"),
    "HmG": ("gross calorific value", "MJ/kg"), "HmN": ("net calorific value", "MJ/kg"),
    "HvG": ("gross calorific value", "MJ/m3"), "HvN": ("net calorific value", "MJ/m3"),
    "HvG0": ("gross calorific value", "MJ/m3 ideal"),
    "HvN0": ("net calorific value", "MJ/m3 ideal"),
    "rho": ("density", "kg/m3"), "d": ("relative density", ""),
    "WG": ("wobbe", "MJ/m3"), "WN": ("net wobbe", "MJ/m3"),
}


def triangle(matrix):
    """The lower triangle L of a correlation matrix, L L^T = R (Cholesky)."""
    n = len(matrix)
    lower = [[0.0] * n for _ in range(n)]
    for i in range(n):
        for j in range(i + 1):
            rest = matrix[i][j] - sum(lower[i][k] * lower[j][k] for k in range(j))
            lower[i][j] = math.sqrt(rest) if i == j else rest / lower[j][j]
    return lower


def gas_of(parts, spreads, correlation):
    """Statements that define a gas: every part with its uncertainty.  Correlated parts share what
    is uncertain in them: x_i = mean + u_i sum L_ik z_k, z_k = 0 +/- 1 (JCGM 100:2008, F.1.2)."""
    if not correlation:
        return "gas g = %s mol/mol" % ", ".join(
            "%s %s%s" % (key, x, " +/- " + spreads[key] if key in spreads else "")
            for key, x in parts.items())
    lower = triangle([[float(correlation[a][b]) for b in parts] for a in parts])
    lets = ["let z%d = 0 +/- 1" % i for i in range(len(parts))]
    lines = ["%s (%s%s) mol/mol" % (key, x, "".join(
        " %s %.17g * z%d" % ("-" if f < 0 else "+", abs(f) * float(spreads[key]), k)
        for k, f in enumerate(lower[i]) if f)) for i, (key, x) in enumerate(parts.items())]
    return "\n".join(lets + ["gas g = " + ", ".join(lines)])


def example(tap, rows, correlation):
    """One example of the standard: its figures and their uncertainties to the printed digit."""
    first = rows[0]
    parts = {row["name"]: row["value"] for row in rows if row["kind"] == "x"}
    spreads = {row["name"]: row["value"] for row in rows if row["kind"] == "u_x"}
    published = [row for row in rows if row["kind"] in ("value", "u")]
    names = sorted({row["name"] for row in published})
    at = "at %s degC, %s kPa(a)" % (first["T_metering_C"], first["p_kPa"])
    at = at.replace("15.55 degC", "60 degF")
    burnt = "60 degF" if first["T_combustion_C"] == "15.55" else first["T_combustion_C"] + " degC"
    lines = ["set constants uncertain", "set parts independent", "set combustion at " + burnt,
             gas_of(parts, spreads, correlation)]
    for name in names:
        asked, unit = FIGURES[name]
        state = "" if name == "M" or name[:2] in ("Hc", "Hm") else " " + at
        lines.append("%s of g by ISO 6976%s%s as %s" % (asked, state, " in " + unit if unit else
                                                        " in mol/mol", name)
                     if unit else "%s of g by ISO 6976%s" % (asked, state))
    objects = session.answers("\n".join(lines) + "\n")
    tap.tell(session.faults(objects), first["case"] + ": every statement is understood")
    found = {}
    for name, thing in zip(names, objects[-len(names):]):
        found[name] = thing.get("answers", [{}])[0]
    for row in published:
        member = "value" if row["kind"] == "value" else "uncertainty"
        tap.tell(session.off(found[row["name"]].get(member), float(row["value"]),
                             float(row["tol"]), "abs"),
                 "%s: %s of %s" % (row["case"], row["kind"], row["name"]))


def standard(tap):
    """ISO 6976:2016, all examples with their own molar masses, R and Z, through the language."""
    rows = [row for row in session.rows("numbers/iso6976.tsv") if row["edition"] == "2016"]
    correlation = {row["part"]: row for row in session.rows("numbers/iso6976_correlation.tsv")}
    for case, group in itertools.groupby(rows, key=lambda row: row["case"]):
        example(tap, list(group), correlation if case.endswith("fullcorr") else None)


def settings(tap):
    """What the settings do, and that they last: set, listed, saved, opened, taken back."""
    question = "850 Nm3/h ± 2 % of N2 in Nm3/h\n"
    density = "density of CH4 at 20 degC, 50 bar(a)\n"
    with tempfile.TemporaryDirectory() as folder:
        name = os.path.join(folder, "kept.gw")
        sets = "set coverage 2\nset constants uncertain\nset parts independent\n"
        kept = session.answers(sets + 'save "%s"\n' % name + question + density)
        again = session.answers('open "%s"\n' % name + question + density + "set\n"
                                + 'save "%s2"\n' % name)
        tap.tell(session.faults(kept) + session.faults(again), "kept and opened")
        tap.tell("" if session.read(name) == session.read(name + "2") else "differs",
                 "kept, opened and kept again")
        tap.tell("" if [one["answers"] for one in kept[-2:]]
                 == [one["answers"] for one in again if one.get("answers")][-2:] else "differs",
                 "the same answers behind")
    answer = kept[-2]["answers"][0]
    # JCGM 100:2008, eq. 18: U = k u; 2 % of 850.
    tap.tell([one for one in (session.off(answer.get("uncertainty"), 17, 1e-12),
                              session.off(answer.get("expanded"), 34, 1e-12),
                              session.off(answer.get("coverage"), 2, 1e-12)) if one], "expanded")
    # GERG-2008 states 0.1 % with k = 2 for gases (Kunz and Wagner 2012), M of methane 0.0026 %.
    answer = kept[-1]["answers"][0]
    tap.tell(session.off(answer.get("uncertainty"), math.hypot(0.0005, 2.643e-5)
                         * answer["value"], 1e-3),
             "the equation's own uncertainty")
    rows = {row["name"]: row["values"] for thing in again if "card" in thing
            for row in thing["card"]["rows"]}
    tap.tell([name for name, value in (("coverage", "2"), ("constants", "uncertain"),
                                       ("parts", "independent"))
              if rows.get(name) != [value, "as set"]], "listed")
    back = session.answers("set constants uncertain\nundo\n" + density
                           + "set coverage 3\nset coverage 1\n" + question)
    tap.tell("uncertain all the same" if "uncertainty" in back[1]["answers"][0] else "",
             "constants are exact again")
    tap.tell("expanded all the same" if "expanded" in back[-1]["answers"][0] else "",
             "the uncertainty is standard again")


def main():
    tap = session.Tap()
    standard(tap)
    settings(tap)
    return tap.finish()


sys.exit(main())
