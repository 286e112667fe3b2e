"""Vapour shares that balance, for cases that can be solved by hand. See README.md beside this file for the derivation.

    python3 balance.py            self-test, then rewrite balance.json
    python3 balance.py --check    self-test, then recompute and compare with balance.json, relative 1e-13;
                                  exit code 1 on any difference

Needs mpmath. Areas are numerical integrals of the width of the disc, to 40 digits. The figures are computed here from the
definitions of the README and are not published values; the cases are invented.
"""

import json
import pathlib
import sys

sys.dont_write_bytecode = True

from mpmath import mp, mpf, nstr, pi, quad, sqrt

mp.dps = 40
FILE = pathlib.Path(__file__).parent / "balance.json"
G = mpf("9.80665")


def areas(case):
    """Areas of the compartments from first to last: the disc less a strip of the wall's thickness about each position."""
    r, half = mpf(case["diameter_m"]) / 2, mpf(case["thickness_m"]) / 2
    edges = [-r]
    for position in case["positions_m"]:
        edges += [mpf(position) - half, mpf(position) + half]
    edges.append(r)
    return [quad(lambda x: 2 * sqrt(r * r - x * x), [a, (a + b) / 2, b]) for a, b in zip(edges[::2], edges[1::2])]


def root_of(a, b, c):
    """The root of a x^2 + b x + c = 0 between 0 and 1, of which there must be one only."""
    if a == 0:
        roots = [-c / b]
    else:
        q = -(b + (1 if b >= 0 else -1) * sqrt(b * b - 4 * a * c)) / 2
        roots = [q / a, c / q]
    inside = [x for x in roots if 0 < x < 1]
    assert len(inside) == 1, roots
    return inside[0]


def static(sections, tallest):
    """Head of the vapour in Pa, the missing height filled at the density of the bottom row."""
    head = sum(mpf(s["height_m"]) * mpf(s["vapour_density"]) for s in sections)
    missing = tallest - sum(mpf(s["height_m"]) for s in sections)
    return G * (head + missing * mpf(sections[-1]["vapour_density"]))


def tallest(case):
    return max(sum(mpf(s["height_m"]) for s in side) for side in case["compartments"])


def coefficient(section, area):
    """K of: friction = K Q^2, Q the volume flow. Declared friction is resistance x height x F^2 and F^2 is density x (Q/area)^2."""
    return mpf(section["resistance"]) * mpf(section["height_m"]) * mpf(section["vapour_density"]) / area**2


def two_plain(case, area):
    """Both sides of one section: K1 (x m/rho1)^2 + S1 = K2 ((1 - x) m/rho2)^2 + S2."""
    (one,), (two,) = case["compartments"]
    m = mpf(case["vapour_kg_s"])
    c1 = coefficient(one, area[0]) * (m / mpf(one["vapour_density"])) ** 2
    c2 = coefficient(two, area[1]) * (m / mpf(two["vapour_density"])) ** 2
    gap = static([one], tallest(case)) - static([two], tallest(case))
    x = root_of(c1 - c2, 2 * c2, gap - c2)
    return [x, 1 - x]


def two_with_feed(case, area):
    """A feed's vapour enters the first side between its sections: above, the volume flow is that of the loads plus the change of
    the volume flow below, Q_up = x m/rho_low + (q_up - q_low)."""
    (up, low), (two,) = case["compartments"]
    m = mpf(case["vapour_kg_s"])
    r = m / mpf(low["vapour_density"])
    q = mpf(up["vapour_kg_s"]) / mpf(up["vapour_density"]) - mpf(low["vapour_kg_s"]) / mpf(low["vapour_density"])
    k_up, k_low = coefficient(up, area[0]), coefficient(low, area[0])
    c2 = coefficient(two, area[1]) * (m / mpf(two["vapour_density"])) ** 2
    gap = static([up, low], tallest(case)) - static([two], tallest(case))
    # k_up (r x + q)^2 + k_low (r x)^2 + gap = c2 (1 - x)^2
    x = root_of((k_up + k_low) * r**2 - c2, 2 * k_up * r * q + 2 * c2, k_up * q**2 + gap - c2)
    return [x, 1 - x]


def any_number_of_equal_density(case, area):
    """One density: static heads are equal, and shares go as area/(resistance x height)^0.5."""
    assert len({s["vapour_density"] for side in case["compartments"] for s in side}) == 1
    weights = [a / sqrt(mpf(s["resistance"]) * mpf(s["height_m"])) for a, (s,) in zip(area, case["compartments"])]
    return [w / sum(weights) for w in weights]


def drop(case, sections, area, share):
    """Pressure drop of a compartment at its share, by the definitions, section by section from the bottom."""
    bottom = sections[-1]
    change = (share * mpf(case["vapour_kg_s"]) - mpf(bottom["vapour_kg_s"])) / mpf(bottom["vapour_density"])
    total = static(sections, tallest(case))
    for s in sections:
        volume = mpf(s["vapour_kg_s"]) / mpf(s["vapour_density"]) + change
        f_factor = volume / area * sqrt(mpf(s["vapour_density"]))
        total += mpf(s["resistance"]) * mpf(s["height_m"]) * f_factor**2
    return total


def side(*sections):
    keys = ("height_m", "resistance", "vapour_density", "vapour_kg_s")
    return [dict(zip(keys, section)) for section in sections]


# Inputs as text, so that both readers take the same decimal number.
CASES = [
    (two_plain, dict(name="two sides, equal densities", diameter_m="3.0", positions_m=["0.15"], thickness_m="0.010", vapour_kg_s="20",
                     compartments=[side(("6.0", "80", "3.0", "10")), side(("6.0", "60", "3.0", "10"))])),
    (two_plain, dict(name="two sides, equal densities, unequal heights", diameter_m="2.4", positions_m=["-0.3"], thickness_m="0.012",
                     vapour_kg_s="11", compartments=[side(("7.5", "95", "2.6", "5")), side(("4.0", "95", "2.6", "6"))])),
    (two_plain, dict(name="two sides, unequal densities", diameter_m="3.0", positions_m=["0.15"], thickness_m="0.010", vapour_kg_s="20",
                     compartments=[side(("6.0", "80", "3.0", "11")), side(("6.0", "60", "3.6", "9"))])),
    (two_plain, dict(name="two sides, unequal densities and heights", diameter_m="3.4", positions_m=["-0.21"], thickness_m="0.016",
                     vapour_kg_s="30", compartments=[side(("5.2", "70", "6.5", "14")), side(("8.1", "45", "7.4", "16"))])),
    (two_with_feed, dict(name="feed vapour on the first side", diameter_m="3.0", positions_m=["0.05"], thickness_m="0.012",
                         vapour_kg_s="20",
                         compartments=[side(("4.0", "70", "2.9", "13"), ("5.0", "70", "3.2", "9")), side(("8.5", "60", "3.1", "11"))])),
    (two_with_feed, dict(name="subcooled feed on the first side condenses vapour", diameter_m="2.8", positions_m=["0.1"], thickness_m="0.010",
                         vapour_kg_s="16",
                         compartments=[side(("3.0", "90", "3.3", "7.5"), ("3.5", "55", "3.5", "9")), side(("6.5", "75", "3.4", "7"))])),
    (any_number_of_equal_density, dict(name="three sides", diameter_m="3.4", positions_m=["-0.45", "0.52"], thickness_m="0.012", vapour_kg_s="21",
                                       compartments=[side(("6.0", "80", "3.0", "7")), side(("6.0", "60", "3.0", "7")), side(("6.0", "110", "3.0", "7"))])),
    (any_number_of_equal_density, dict(name="three sides, unequal heights", diameter_m="4.0", positions_m=["-0.7", "0.4"], thickness_m="0.014",
                                       vapour_kg_s="27",
                                       compartments=[side(("4.5", "80", "2.8", "8")), side(("7.0", "60", "2.8", "9")), side(("5.5", "70", "2.8", "10"))])),
]


def solve(method, case):
    area = areas(case)
    shares = method(case, area)
    drops = [drop(case, sections, a, x) for sections, a, x in zip(case["compartments"], area, shares)]
    # the shares from the algebra must balance by the definitions
    assert max(drops) - min(drops) < mpf(10) ** -30 * max(drops), case["name"]
    assert abs(sum(shares) - 1) < mpf(10) ** -35
    return case | {"area_m2": area, "share": shares, "pressure_drop_pa": drops[0]}


def self_test():
    # a full circle, and a wall without thickness that halves it
    whole = areas(dict(diameter_m="2", thickness_m="0", positions_m=[]))
    assert abs(whole[0] - pi) < mpf(10) ** -30
    halves = areas(dict(diameter_m="2", thickness_m="0", positions_m=["0"]))
    assert all(abs(a - pi / 2) < mpf(10) ** -30 for a in halves)
    # a side of four times the resistance takes half as much
    one, four = side(("5", "10", "3", "5")), side(("5", "40", "3", "5"))
    shares = two_plain(dict(vapour_kg_s="10", compartments=[one, four]), halves)
    assert abs(shares[0] - mpf(2) / 3) < mpf(10) ** -30
    assert root_of(mpf(0), mpf(2), mpf(-1)) == mpf("0.5")
    # without feed vapour the two sections of the first side are one
    split = side(("2", "10", "3", "5"), ("3", "10", "3", "5"))
    assert abs(two_with_feed(dict(vapour_kg_s="10", compartments=[split, four]), halves)[0] - mpf(2) / 3) < mpf(10) ** -30


def text(value, indent=0):
    """JSON with 17 significant digits for results; inputs stay the text they are, as numbers."""
    pad, end = " " * (indent + 1), " " * indent
    if isinstance(value, dict):
        return "{\n" + ",\n".join(f"{pad}{json.dumps(k)}: {text(v, indent + 1) if k != 'name' else json.dumps(v)}" for k, v in value.items()) + f"\n{end}}}"
    if isinstance(value, list):
        return "[" + ", ".join(text(v, indent + 1) for v in value) + "]"
    return nstr(value, 17, strip_zeros=False) if isinstance(value, mpf) else value


def differences(a, b, where=""):
    if isinstance(a, dict) and isinstance(b, dict) and list(a) == list(b):
        return [d for k in a for d in differences(a[k], b[k], f"{where}/{k}")]
    if isinstance(a, list) and isinstance(b, list) and len(a) == len(b):
        return [d for k, (x, y) in enumerate(zip(a, b)) for d in differences(x, y, f"{where}/{k}")]
    if isinstance(a, (int, float)) and isinstance(b, (int, float)):
        return [] if abs(a - b) <= 1e-13 * max(abs(a), abs(b)) else [f"{where}: committed {a!r}, computed {b!r}"]
    return [] if a == b else [f"{where}: committed and computed differ"]


def main():
    if sys.argv[1:] not in ([], ["--check"]):
        sys.exit(__doc__)
    self_test()
    written = text({"cases": [solve(method, case) for method, case in CASES]}) + "\n"
    if sys.argv[1:]:
        found = differences(json.loads(FILE.read_text()), json.loads(written))
        for line in found:
            print(line)
        print(f"{len(found)} differences")
        sys.exit(1 if found else 0)
    FILE.write_text(written)


if __name__ == "__main__":
    main()
