#!/usr/bin/env python3
"""Reference vectors from the Python package fluids, version 1.3.1 exactly.

    pip install fluids==1.3.1
    python generate.py            writes the CSV files beside this script
    python generate.py --check    regenerates and compares with the committed files; exit status 1 if they differ

stichlmair.csv: fluids.packed_tower.Stichlmair_dry and Stichlmair_wet over beds and loads below flood.
orifice.csv:    head through an orifice from fluids.flow_meter.flow_meter_discharge: a discharge coefficient C and a
                diameter ratio of zero (beta = D2/D with D very large) make it the plain velocity head rho u^2/(2 C^2).
"""

import argparse
import itertools
import math
import pathlib
import sys

import fluids
from fluids.flow_meter import flow_meter_discharge
from fluids.packed_tower import Stichlmair_dry, Stichlmair_flood, Stichlmair_wet

HERE = pathlib.Path(__file__).parent
VERSION = "1.3.1"
# Ends of one in the last places differ between machines' mathematical libraries.
TOLERANCE = 1e-12

BEDS = [
    (260.0, 0.68, 32.0, 7.0, 1.0),
    (250.0, 0.97, 5.0, 3.0, 0.45),
    (250.0, 0.96, 5.0, 3.0, 0.45),
    (223.5, 0.954, 0.05, 1.0, 3.0),
    (190.0, 0.68, 48.0, 8.0, 2.0),
]
FLUIDS = [
    (1.19, 998.2, 1.81e-5),
    (3.0, 640.0, 8e-6),
    (0.15, 780.0, 7e-6),
    (25.0, 500.0, 1e-5),
]
LIQUIDS = [0.0002, 0.002, 0.01]
# Fractions of the velocity at flood.
FRACTIONS = [0.05, 0.3, 0.6, 0.8, 0.9, 0.97, 0.999]


def stichlmair():
    yield "specific_area,void_fraction,c1,c2,c3,liquid_velocity,vapour_density,liquid_density,vapour_viscosity,vapour_velocity,dry_gradient,wet_gradient"
    for bed, fluid, u_l in itertools.product(BEDS, FLUIDS, LIQUIDS):
        a, eps, c1, c2, c3 = bed
        rho_g, rho_l, mu_g = fluid
        common = dict(rhog=rho_g, rhol=rho_l, mug=mu_g, voidage=eps, specific_area=a, C1=c1, C2=c2, C3=c3)
        flood = Stichlmair_flood(Vl=u_l, **common)
        for fraction in FRACTIONS:
            u = float(f"{flood * fraction:.6g}")
            dry = Stichlmair_dry(Vg=u, rhog=rho_g, mug=mu_g, voidage=eps, specific_area=a, C1=c1, C2=c2, C3=c3)
            wet = Stichlmair_wet(Vg=u, Vl=u_l, **common)
            yield ",".join(repr(x) for x in (a, eps, c1, c2, c3, u_l, rho_g, rho_l, mu_g, u, dry, wet))


def orifice():
    yield "coefficient,density,velocity,pressure_drop"
    hole = 0.005
    area = math.pi / 4 * hole**2
    for c, rho, u in itertools.product((0.6, 0.73, 0.84), (0.5, 5.0, 40.0), (2.0, 10.0, 35.0)):
        # m = C A (2 rho dP)^0.5 for beta -> 0: solve the package's own formula for dP by its square.
        m1 = flow_meter_discharge(D=1e4, Do=hole, P1=2e5, P2=2e5 - 1.0, rho=rho, C=c)
        dp = (u * area * rho / m1) ** 2
        yield ",".join(repr(x) for x in (c, rho, u, dp))


def differs(committed, fresh):
    old, new = committed.splitlines(), fresh.splitlines()
    if len(old) != len(new) or old[0] != new[0]:
        return "another number of rows or another header"
    for number, (a, b) in enumerate(zip(old[1:], new[1:]), start=2):
        for x, y in zip(a.split(","), b.split(",")):
            if abs(float(x) - float(y)) > TOLERANCE * abs(float(y)):
                return f"line {number}: {x} committed, {y} now"
    return None


def main():
    parser = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    parser.add_argument("--check", action="store_true", help="compare with the committed files, write nothing")
    check = parser.parse_args().check
    if fluids.__version__ != VERSION:
        sys.exit(f"fluids {fluids.__version__} is installed; {VERSION} is needed: pip install fluids=={VERSION}")
    bad = False
    for name, rows in (("stichlmair.csv", stichlmair()), ("orifice.csv", orifice())):
        fresh = "\n".join(rows) + "\n"
        path = HERE / name
        if not check:
            path.write_text(fresh)
            continue
        why = differs(path.read_text(), fresh)
        print(f"{name}: {'agrees' if why is None else why}")
        bad = bad or why is not None
    sys.exit(1 if bad else 0)


if __name__ == "__main__":
    main()
