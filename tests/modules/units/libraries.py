"""Holds the factors against two libraries of units: libraries.py LIBRARY ROWS < FACTORS.

LIBRARY is pint or udunits; ROWS is numbers/units.tsv; FACTORS are the lines factors prints.
Prints what is wrong.  Exit status 77: the library is not here.
"""
import ctypes
import ctypes.util
import sys


def pint_factor():
    try:
        import pint
    except ImportError:
        sys.exit(77)
    units = pint.UnitRegistry()
    return lambda name, _: units.parse_expression(name).to_base_units().magnitude


def udunits_factor():
    path = ctypes.util.find_library("udunits2")
    if path is None:
        sys.exit(77)
    library = ctypes.CDLL(path)
    for name in ("ut_read_xml", "ut_parse", "ut_get_converter"):
        getattr(library, name).restype = ctypes.c_void_p
    library.cv_convert_double.restype = ctypes.c_double
    library.ut_set_error_message_handler(ctypes.cast(library.ut_ignore, ctypes.c_void_p))
    system = ctypes.c_void_p(library.ut_read_xml(None))

    def parse(name):
        return ctypes.c_void_p(library.ut_parse(system, name.encode(), 0))

    def factor(name, si_unit):
        converter = library.ut_get_converter(parse(name), parse(si_unit))
        if converter is None:
            return float("nan")
        return library.cv_convert_double(ctypes.c_void_p(converter), ctypes.c_double(1))

    return factor


def main():
    library, rows = sys.argv[1], sys.argv[2]
    factor = {"pint": pint_factor, "udunits": udunits_factor}[library]()
    ours = {}
    for line in sys.stdin:
        name, value, _ = line.split("\t")
        ours[name] = float(value)
    compared = 0
    for line in open(rows, encoding="utf-8"):
        if line.startswith(("#", "case\t")):
            continue
        cells = line.rstrip("\n").split("\t")
        unit, si_unit, name = cells[1], cells[2], cells[6 if library == "pint" else 7]
        if not name:
            continue
        theirs = factor(name, si_unit)
        apart = abs(theirs - ours.get(unit, float("nan"))) / abs(theirs)
        # What the row says of the library itself: how far its own value is from the definition.
        known = [part.split()[1] for part in cells[8].split(", ") if part.startswith(library + " ")]
        limit = 1.1 * float(known[0]) if known else 1e-14
        if not apart <= limit:
            print(f"{unit}: {ours.get(unit)} here, {theirs} in {library} as {name}")
        if known and not apart > 1e-9:
            print(f"{unit}: {library} is said to be off by {known[0]}, but is not")
        compared += 1
    if compared < 40:
        print(f"only {compared} units were compared")


main()
