"""Dry air by GERG-2008 against the reference equation of air in python3-iapws.

The library's equation is E. W. Lemmon, R. T. Jacobsen, S. G. Penoncello, D. G. Friend, J. Phys.
Chem. Ref. Data 29 (2000) 331, for N2 78.12, O2 20.96, Ar 0.92 mol%; it claims 0.1 % of density and
0.2 % of speed of sound, GERG-2008 (Kunz and Wagner 2012) about the same for air: density is held
to both together.
"""
import sys

import session

try:
    from iapws.humidAir import Air
except ImportError:
    print("1..0 # SKIP python3-iapws is not installed")
    sys.exit(0)

GAS = "gas ref = N2 78.12, O2 20.96, Ar 0.92 mol%\nset gas model GERG-2008\n"
STATES = [(T, p) for T in (230, 273.15, 300, 350, 450) for p in (0.1, 0.101325, 1, 3, 7, 10)]


def main():
    tap = session.Tap()
    text = GAS
    for T, p in STATES:
        at = "of ref at %r K, %r MPa(a)" % (T, p)
        text += "density %s in kg/m3\nspeed of sound %s in m/s\n" % (at, at)
    objects = session.answers(text)
    tap.tell(session.faults(objects), "every state is answered")
    got = [thing["answers"][0]["value"] for thing in objects if thing.get("answers")]
    for i, (T, p) in enumerate(STATES):
        air = Air(T=T, P=p)
        state = "%g K, %g MPa" % (T, p)
        tap.tell(session.off(got[2 * i], air.rho, 2e-3), "density at " + state)
        tap.tell(session.off(got[2 * i + 1], air.w, 2e-3), "speed of sound at " + state)
    return tap.finish()


sys.exit(main())
