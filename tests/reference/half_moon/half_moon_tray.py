"""Reference values of whole half-moon sieve trays, every intermediate, independent of the program.

Run in this folder (needs mpmath, any version from 1.3):

    python3 half_moon_tray.py            self-test, then rewrite half_moon_tray.json
    python3 half_moon_tray.py --check    self-test, then recompute and compare with half_moon_tray.json, relative 1e-12;
                                         exit code 1 on any difference

Method: every area is a numerical integral of the width of the compartment, every line is found by bisection on such an
integral, and everything is carried to 30 digits. No closed form of a disc segment is used for a result, so that a slip in
one cannot be shared.

Frame: the axis of the column is the origin, x points across the wall, y along it. All geometry is worked in u >= u0, where
u0 is the wall face and u points from the wall to the shell (u = x for the side "last", u = -x for the side "first").

Standing of the figures: computed here from the published equations named beside each function. They are a second
calculation, not published values. Published values appear in `self_test` only.
Loads are of an invented case.
"""

import json
import pathlib
import sys

sys.dont_write_bytecode = True

from mpmath import mp, mpf, sqrt, asin, quad, nstr, pi

from half_moon_equations import (
    G, CLOSE, aeration, bennett, crest, csb_cubic, csb_fit, dry_head_m, entrainment, orifice_coefficient,
    small_hole_area_factor, system_limit, weep_onset, weep_rate,
)
from half_moon_place import Place, layout

mp.dps = 30
FILE = pathlib.Path(__file__).parent / "half_moon_tray.json"


# ---------------------------------------------------------------- one tray pair


def rate(given):
    i = {k: mpf(v) for k, v in given.items() if isinstance(v, (int, float))}
    load = {k: mpf(v) for k, v in given["load"].items()}
    passes = given["passes"]
    r = i["diameter_m"] / 2
    first = given["side"] == "first"
    half = i["thickness_m"] / 2
    u0 = -(i["wall_position_m"] - half) if first else i["wall_position_m"] + half
    place = Place(r, u0)
    area = place.area
    f, fb, s = i["downcomer_top_fraction"], i["downcomer_bottom_fraction"], i["edge_strip_m"]
    hw, ts, dh = i["weir_height_m"], i["tray_spacing_m"], i["hole_diameter_m"]
    hole_fraction, is_open = i["hole_fraction"], i["weir_open"]
    rho_v, rho_l, sigma = load["rho_v"], load["rho_l"], load["sigma"]
    drho = rho_l - rho_v
    vapour, q = load["vapour_kg_s"] / rho_v, load["liquid_kg_s"] / rho_l
    q_pass = q / passes
    density_term = sqrt(rho_v / drho)
    sigma_mn = sigma * 1000

    # flood, on net area
    net = area - f * area
    flv = load["liquid_kg_s"] / load["vapour_kg_s"] * sqrt(rho_v / rho_l)
    ts_mm = min(max(ts * 1000, mpf(150)), mpf(915))
    fit, cubic = csb_fit(flv, ts_mm), csb_cubic(flv, ts_mm)
    csb = min(fit, cubic) if flv < mpf("0.03") else fit
    sigma_factor = (sigma_mn / 20) ** mpf("0.2")
    f_ha = small_hole_area_factor(hole_fraction)
    u_flood = csb * sigma_factor * i["system_factor"] * f_ha / density_term
    u_net = vapour / net
    approach = u_net / u_flood
    psi = entrainment(flv, approach)
    flood = {
        "flow_parameter": flv,
        "csb_fit_m_s": fit,
        "csb_cubic_m_s": cubic,
        "csb_m_s": csb,
        "sigma_factor": sigma_factor,
        "hole_area_factor": f_ha,
        "flood_velocity_m_s": u_flood,
        "net_area_m2": net,
        "net_velocity_m_s": u_net,
        "fraction_of_flood": approach,
        "entrainment_fraction": psi,
        "entrained_liquid_kg_s": psi * load["liquid_kg_s"] / (1 - psi),
    }

    # system limit, on the area of the whole compartment
    c_op, l_op = vapour / area * density_term, q / area
    big_f, ratio, c1, c2 = system_limit(c_op, l_op, sigma_mn, rho_v, drho)
    limit = {
        "capacity_factor_m_s": c_op,
        "liquid_velocity_m_s": l_op,
        "liquid_to_capacity_ratio": ratio,
        "density_function": big_f,
        "c1_m_s": c1,
        "c2_m_s": c2,
        "system_limit_m_s": min(c1, c2),
        "fraction_of_limit": c_op / min(c1, c2),
    }

    def place_on_axis(v):
        return -v if given["flow"] == "across" and first else v

    decks = []
    for name, rows, strip, between_lines in layout(place, given["flow"], passes, f, fb, s):
        active = area - f * area - fb * area - strip
        # the lines found by bisection must leave just this between them
        assert abs(between_lines - strip - active) < CLOSE * 100, (name, between_lines - strip - active)
        holes = hole_fraction * active
        u_a, u_h = vapour / active, vapour / holes
        ks, fva = u_a * density_term, u_a * sqrt(rho_v)
        co = orifice_coefficient(i["deck_thickness_m"] / dh, hole_fraction)
        dry = dry_head_m(co, rho_v, rho_l, u_h)
        residual = 6 * sigma / (G * rho_l * dh)
        beta = aeration(fva)
        out, wept = [], mpf(0)
        for row in rows:
            weir = row["length"] * is_open
            cr = crest(q_pass, row["length"], is_open, row["displaced"])
            how = cr["crest_m"]
            phi, cb, hl = bennett(ks, hw, q_pass / weir)
            onset = weep_onset((hw + how) * 1000, dh * 1000, rho_v)
            fr, w = weep_rate(u_h, rho_v, rho_l, hl)
            wept += w * holes / passes
            p = {
                "name": row["name"],
                "liquid_m3_s": q_pass,
                "weir_position_m": place_on_axis(row["weir"]),
                "inlet_position_m": place_on_axis(row["inlet"]),
                "apron_position_m": place_on_axis(row["apron_position"]),
            }
            if given["flow"] == "across":
                p["weir_from_wall_face_m"] = row["weir"] - u0
            p |= {
                "weir_length_m": row["length"],
                "inlet_length_m": row["inlet_length"],
                "apron_length_m": row["apron"],
                "flow_path_m": row["path"],
                "downcomer_top_area_m2": row["top"],
                "downcomer_bottom_area_m2": row["bottom"],
                "weir_load_m3_s_m": q_pass / weir,
                "weir_load_m3_h_m": q_pass / weir * 3600,
            }
            p |= cr
            p |= {
                "bennett_cb": cb,
                "liquid_head_m": hl,
                "liquid_head_fair_m": beta * (hw + how),
                "weep_onset_hole_velocity_m_s": onset,
                "hole_velocity_over_onset": u_h / onset,
                "weep_froude": fr,
                "weep_rate_m3_s_m2": w,
            }
            out.append((row, p))
        n = len(out)
        head = dry + sum(p["liquid_head_m"] for _, p in out) / n + residual
        fair = dry + sum(p["liquid_head_fair_m"] for _, p in out) / n + residual
        deck = {
            "name": name,
            "net_area_m2": net,
            "edge_strip_area_m2": strip,
            "active_area_m2": active,
            "hole_area_m2": holes,
            "active_velocity_m_s": u_a,
            "hole_velocity_m_s": u_h,
            "f_factor_pa05": fva,
            "bennett_ks_m_s": ks,
            "bennett_froth_density": phi,
            "aeration_factor": beta,
            "orifice_coefficient": co,
            "dry_head_m": dry,
            "residual_head_m": residual,
            "liquid_head_m": sum(p["liquid_head_m"] for _, p in out) / n,
            "liquid_head_fair_m": sum(p["liquid_head_fair_m"] for _, p in out) / n,
            "total_head_m": head,
            "total_head_fair_m": fair,
            "drop_pa": head * rho_l * G,
            "drop_fair_pa": fair * rho_l * G,
            "weep_fraction": wept / q,
            "greatest_crest_m": max(p["crest_m"] for _, p in out),
            "passes": out,
        }
        decks.append(deck)

    # downcomers: the liquid of a deck backs up against the crest of the deck below, which is the other one of the pair
    # (or its own mirror image)
    for k, deck in enumerate(decks):
        below = decks[(k + 1) % len(decks)]
        finished = []
        for row, p in deck["passes"]:
            window = row["apron"] * i["clearance_m"]
            ada = min(row["top"], window)
            hda = mpf(165) * (q_pass / ada) ** 2 / 1000
            backup = deck["total_head_m"] + hw + below["greatest_crest_m"] + hda
            p["downcomer"] = {
                "apron_area_m2": ada,
                "apron_loss_m": hda,
                "crest_below_m": below["greatest_crest_m"],
                "backup_m": backup,
                "froth_height_m": backup / i["downcomer_froth_density"],
                "froth_fraction": backup / i["downcomer_froth_density"] / (ts + hw),
                "top_velocity_m_s": q_pass / row["top"],
                "residence_s": (row["top"] + row["bottom"]) / 2 * ts / q_pass,
                "apron_velocity_m_s": q_pass / window,
            }
            finished.append(p)
        deck["passes"] = finished

    return {
        "name": given["name"],
        "inputs": {k: v for k, v in given.items() if k != "name"},
        "place": {
            "area_m2": area,
            "wall_face_position_m": -u0 if first else u0,
            "wall_face_length_m": 2 * place.wall_half,
            "share_of_shell": area / (pi * r * r),
        },
        "flood": flood,
        "system_limit": limit,
        "decks": decks,
        "pair": {
            "drop_pa": sum(d["drop_pa"] for d in decks) / len(decks),
            "drop_fair_pa": sum(d["drop_fair_pa"] for d in decks) / len(decks),
        },
    }


# ---------------------------------------------------------------- cases


# Rows of the invented pressurised hydrocarbon splitter: kg/s, kg/m3, Pa s, N/m.
FEED_UPPER = dict(vapour_kg_s=25.8086, liquid_kg_s=13.1758, rho_v=15.952, rho_l=540.25, mu_v=8.722e-6, mu_l=1.195e-4, sigma=7.911e-3)
FEED_LOWER = dict(vapour_kg_s=18.116, liquid_kg_s=30.4836, rho_v=17.265, rho_l=537.83, mu_v=8.834e-6, mu_l=1.164e-4, sigma=7.332e-3)
DRAW_UPPER = dict(vapour_kg_s=11.0721, liquid_kg_s=17.5975, rho_v=16.818, rho_l=535.19, mu_v=8.673e-6, mu_l=1.157e-4, sigma=7.425e-3)
DRAW_LOWER = dict(vapour_kg_s=11.3537, liquid_kg_s=7.9155, rho_v=17.161, rho_l=535.99, mu_v=8.768e-6, mu_l=1.157e-4, sigma=7.343e-3)
# Invented, of the kind of a vacuum column: flow parameter 0.012.
VACUUM = dict(vapour_kg_s=4.0, liquid_kg_s=2.8, rho_v=0.216, rho_l=739.7, mu_v=7.03e-6, mu_l=7.04e-4, sigma=2.01e-2)


def case(name, side, flow, passes, load, **changes):
    given = {
        "name": name,
        "diameter_m": 3.2,
        "wall_position_m": 0.25,
        "thickness_m": 0.012,
        "side": side,
        "flow": flow,
        "passes": passes,
        "tray_spacing_m": 0.6,
        "weir_height_m": 0.05,
        "weir_open": 1.0,
        "clearance_m": 0.04,
        "downcomer_top_fraction": 0.12,
        "downcomer_bottom_fraction": 0.12,
        "hole_fraction": 0.1,
        "hole_diameter_m": 0.0127,
        "deck_thickness_m": 0.0025,
        "edge_strip_m": 0.0,
        "system_factor": 1.0,
        "downcomer_froth_density": 0.5,
        "load": load,
    }
    assert set(changes) <= set(given)
    return given | changes


# The wall at +0.25 m makes the side "first" the larger one; at -0.25 m (the vacuum case) the side "last" is.
CASES = [
    case("along, one pass, larger side", "first", "along", 1, FEED_UPPER),
    case("along, one pass, smaller side, edge strip", "last", "along", 1, DRAW_LOWER, edge_strip_m=0.025, hole_fraction=0.12),
    case("along, two passes, larger side", "first", "along", 2, FEED_LOWER, downcomer_top_fraction=0.16,
         downcomer_bottom_fraction=0.16, clearance_m=0.05),
    case("along, two passes, smaller side", "last", "along", 2, DRAW_UPPER, downcomer_top_fraction=0.15,
         downcomer_bottom_fraction=0.15, clearance_m=0.05, hole_fraction=0.08),
    case("across, one pass, larger side", "first", "across", 1, FEED_UPPER, system_factor=0.95),
    case("across, one pass, smaller side", "last", "across", 1, DRAW_LOWER, downcomer_top_fraction=0.1,
         downcomer_bottom_fraction=0.1, weir_open=0.8),
    case("across, two passes, larger side, sloped downcomers", "first", "across", 2, FEED_LOWER, downcomer_top_fraction=0.16,
         downcomer_bottom_fraction=0.112),
    case("across, two passes, smaller side", "last", "across", 2, DRAW_UPPER, downcomer_top_fraction=0.14,
         downcomer_bottom_fraction=0.14),
    case("across, one pass, larger side, vacuum", "last", "across", 1, VACUUM, wall_position_m=-0.25, tray_spacing_m=0.5,
         weir_height_m=0.02, clearance_m=0.015, downcomer_top_fraction=0.05, downcomer_bottom_fraction=0.05, hole_fraction=0.13,
         weir_open=0.6),
]


# ---------------------------------------------------------------- self-test


def self_test():
    def near(value, printed, half_unit, what):
        assert abs(value - mpf(printed)) <= mpf(half_unit), f"{what}: {nstr(value, 10)} against {printed}"

    # half-moon check values, R 1.5 m (computed figures of the method notes, printed to five decimals)
    e5 = "0.00000501"
    p = Place(mpf("1.5"), mpf("0.2"))
    near(p.area, "2.93607", e5, "side area")
    near(p.area / (pi * p.r**2), "0.41537", e5, "share")
    c = mpf("0.9")
    near(p.between_y(c, p.y_top), "0.38410", e5, "corner")
    near(p.line_y(c), "1.0000", "0.0000501", "corner weir")
    near(p.between_y(-c, c), "2.16788", e5, "left between two corners")
    near(p.between_u(p.u0, mpf("0.35")), "0.44218", e5, "wall strip")
    near(p.line_u(mpf("0.35")), "2.91719", e5, "wall strip weir")
    near(p.between_u(mpf("1.25"), p.r), "0.28135", e5, "arc segment")
    near(p.line_u(mpf("1.25")), "1.65831", e5, "arc segment weir")

    # The large side (x0 -0.2, c 0.9): the notes print 0.61874, and that is wrong. It is G(ym) - G(c) - x0 (ym - c) with
    # ym = (R^2 - x0^2)^0.5 = 1.48661, which stops where the wall ends. On the side that holds the axis the compartment goes
    # on above the wall's end, bounded by the arc left and right, up to y = R: a cap of 0.00358 m2. Verified here twice: as a
    # numerical integral over y up to R, and over u, whose lower boundary y = c and upper boundary are single-valued.
    p = Place(mpf("1.5"), mpf("-0.2"))
    right = p.between_y(c, p.y_top)
    over_u = quad(lambda u: p.root(u) - c, [p.u0, p.root(c)])
    cap = quad(lambda y: 2 * p.root(y), [p.wall_half, p.r])
    assert abs(right - over_u) < CLOSE * 100
    near(right, "0.62232", e5, "corner of the large side")
    near(right - cap, "0.61874", e5, "corner of the large side, as the notes cut it")
    # the inverses return what they were given
    assert abs(p.corner(right) - c) < CLOSE and abs(p.half_band(2 * p.between_y(mpf(0), c)) - c) < CLOSE
    # the arc by the integral is the arc by the angle
    assert abs(p.strip_y(-c, c, mpf("0.01")) - (asin(c / p.r) * (p.r**2 - (p.r - mpf("0.01")) ** 2) + mpf("0.018"))) < CLOSE

    # Treybal Eq. 6.34 on a full circle, D 2.0 m, W/D 0.75, q 0.010 (figures of the method notes)
    disc = Place(mpf(1), mpf("-0.999999999"))
    at = disc.bisect(lambda u: mpf("1.5") - disc.line_u(u), mpf(0), mpf(1))
    r = crest(mpf("0.010"), mpf("1.5"), mpf(1), lambda h1: disc.line_u(at + h1))
    near(r["effective_weir_length_m"], "1.4561", "0.0000501", "effective weir")
    near(r["h1_m"], "0.02406", e5, "h1")
    near(r["constriction_factor"], "1.0200", "0.0000501", "Fw")

    near(csb_fit(mpf("0.01"), mpf("304.8")), "0.0697", "0.0000501", "Fair fit")
    near(csb_cubic(mpf("0.01"), mpf("304.8")), "0.0613", "0.0000501", "cubic")
    near(csb_cubic(mpf("0.2"), mpf("609.6")), "0.0765", "0.0000501", "cubic")
    near(entrainment(mpf("0.1"), mpf("0.8")), "0.0349", "0.0000501", "entrainment")
    near(orifice_coefficient(mpf(1), mpf("0.1")), "0.836", "0.000501", "Co")
    near(weep_onset(mpf(72), mpf(5), mpf("0.72")), "14.42", "0.06", "weep onset (its K2 was rounded to 30.6)")
    # Benitez, example 4.9 type tray: Ks 0.08235, hL 1.725 cm, hsig printed 0.869 cm
    phi, _, hl = bennett(mpf("0.08235"), mpf("0.05"), mpf("8.15e-4") / mpf("0.7187"))
    near(phi, "0.2742", "0.000101", "froth density")
    near(hl, "0.01725", "0.0000101", "Bennett head")
    near(6 * mpf("0.07") / (G * 986 * mpf("0.005")), "0.00869", "0.0000051", "residual head")
    # Dutta, example 5.1: aeration 0.610 at Fva 1.9
    near(aeration(mpf("1.068") * mpf("1.1") * sqrt(mpf("2.643"))), "0.610", "0.01", "aeration factor")
    near(system_limit(mpf(1), mpf("0.01"), mpf(57), mpf("0.72"), mpf("953.28"))[3], "0.1727", "0.0000501", "system limit, flat branch")
    # at C = C1 the liquid term is the one of C1: the definition, put back
    f, ratio, c1, _ = system_limit(mpf("0.06"), mpf("0.009"), mpf(57), mpf("0.72"), mpf("953.28"))
    assert abs(c1 + mpf("1.4") * (c1 * mpf("0.009") / mpf("0.06")) - mpf("0.445") * (1 - f) * (57 / mpf("953.28")) ** mpf("0.25")) < CLOSE


# ---------------------------------------------------------------- file


def text(value, indent=0):
    """JSON. A result has 17 significant digits; an input is the shortest text that reads to the same double."""
    pad, end = " " * (indent + 1), " " * indent
    if isinstance(value, dict):
        return "{\n" + ",\n".join(f"{pad}{json.dumps(k)}: {text(v, indent + 1)}" for k, v in value.items()) + "\n" + end + "}"
    if isinstance(value, list):
        return "[\n" + ",\n".join(pad + text(v, indent + 1) for v in value) + "\n" + end + "]"
    if isinstance(value, mpf):
        return f"{nstr(value, 17, strip_zeros=False, min_fixed=0, max_fixed=0)}"
    return json.dumps(value)


def differences(a, b, where=""):
    if isinstance(a, dict) and isinstance(b, dict):
        if list(a) != list(b):
            return [f"{where}: keys differ"]
        return [d for k in a for d in differences(a[k], b[k], f"{where}/{k}")]
    if isinstance(a, list) and isinstance(b, list):
        if len(a) != len(b):
            return [f"{where}: {len(a)} against {len(b)} entries"]
        return [d for k, (x, y) in enumerate(zip(a, b)) for d in differences(x, y, f"{where}/{k}")]
    if isinstance(a, (int, float)) and isinstance(b, (int, float)):
        return [] if abs(a - b) <= 1e-12 * max(abs(a), abs(b)) else [f"{where}: committed {a!r}, computed {b!r}"]
    return [] if a == b else [f"{where}: committed {a!r}, computed {b!r}"]


def main():
    if sys.argv[1:] not in ([], ["--check"]):
        sys.exit(__doc__)
    self_test()
    written = text({"cases": [rate(c) for c in CASES]}) + "\n"
    if sys.argv[1:]:
        found = differences(json.loads(FILE.read_text()), json.loads(written))
        for line in found:
            print(line)
        print(f"{len(found)} differences")
        sys.exit(1 if found else 0)
    FILE.write_text(written)


if __name__ == "__main__":
    main()
