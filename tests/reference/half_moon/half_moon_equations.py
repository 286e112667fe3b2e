"""Published sieve-tray equations as the reference of half-moon trays uses them, SI unless a name says otherwise.

Each one names its source. "From memory" and "read second-hand" are the standing of the constants, as the program's own notes
give them; none is confirmed here.
"""

from mpmath import mp, mpf, sqrt, exp, log

mp.dps = 30
G = mpf("9.80665")  # standard gravity, m/s2, in every formula of this folder
CLOSE = mpf(10) ** -26


def csb_fit(flv, ts_mm):
    """Fair flood chart, m/s at 20 mN/m: Perry's Chemical Engineers' Handbook, 8th ed., Eq. 14-90."""
    return mpf("0.0105") + mpf("8.127e-4") * ts_mm ** mpf("0.755") * exp(-mpf("1.463") * flv ** mpf("0.842"))


def csb_cubic(flv, ts_mm):
    """Fair flood chart, m/s at 20 mN/m: an independent digitisation of the chart by cubics, read second-hand."""
    x, y = log(flv), ts_mm
    a = mpf("1.10748e-6") * y + mpf("4.5284e-4")
    b = mpf("4.04865e-6") * y + mpf("7.99395e-4")
    c = mpf("-3.09381e-5") * y + mpf("-6.25024e-3")
    d = mpf("3.00232e-5") * y + mpf("1.40453e-2")
    return ((a * x + b) * x + c) * x + d


def entrainment(flv, f):
    """Fraction entrained, from memory (usually credited to Ogboja and Kuye 1990)."""
    return exp(-(mpf("6.692") + mpf("1.956") * f) * flv ** (mpf("-0.132") + mpf("0.654") * f))


def small_hole_area_factor(a_f):
    """Applied Process Design, vol. II: 0.80 at 0.06, 1.00 at 0.10."""
    assert a_f >= mpf("0.06")
    return min(5 * a_f + mpf("0.5"), mpf(1))


def orifice_coefficient(p, a):
    """Regression of the published orifice chart, read second-hand: p thickness over hole diameter, a hole fraction."""
    return mpf("0.62074") + mpf("0.79300") * a + mpf("0.13576") * p**2


def dry_head_m(co, rho_v, rho_l, u_h):
    """Published US form 0.186 in of liquid at ft/s, in SI with 50.8 mm; u_h on hole area."""
    return mpf("50.8") / 1000 / co**2 * rho_v / rho_l * u_h**2


def bennett(ks, hw, weir_load):
    """Bennett, Agrawal and Cook 1983, froth regime: (froth density, Cb, clear-liquid head in m); weir load m3/(s m)."""
    phi = exp(-mpf("12.55") * ks ** mpf("0.91"))
    cb = mpf("0.501") + mpf("0.439") * exp(-mpf("137.8") * hw)
    return phi, cb, phi * (hw + cb * (weir_load / phi) ** (mpf(2) / 3))


def aeration(fva):
    """From memory: a fit of the aeration factor, Fva in Pa^0.5."""
    return 1 - mpf("0.3469") * fva ** mpf("0.177")


def weep_k2(h_mm):
    """Least squares on the points of Coulson and Richardson, vol. 6, after Eduljee."""
    assert 10 <= h_mm <= 120
    return mpf("17.944") + mpf("4.637") * log(h_mm) - mpf("0.39226") * log(h_mm) ** 2


def weep_onset(h_mm, hole_mm, rho_v):
    """Least hole velocity without weeping, m/s (Coulson and Richardson, vol. 6, after Eduljee)."""
    return (weep_k2(h_mm) - mpf("0.90") * (mpf("25.4") - hole_mm)) / sqrt(rho_v)


def weep_rate(u_h, rho_v, rho_l, hc):
    """Lockett and Banik: (Froude number, m3/(s m2) of hole area). From memory."""
    fr = u_h**2 * rho_v / (G * hc * (rho_l - rho_v))
    if fr < mpf("0.2"):
        return fr, mpf("0.0200") * fr ** mpf("-0.5") - mpf("0.0300")
    return fr, mpf("0.00125") * fr ** mpf("-1.533")


def crest(q, length, open_share, displaced):
    """Francis weir with constriction (Treybal, Mass-Transfer Operations, 3rd ed., Eq. 6.34, here with the real line).

    `displaced(h1)` is the length of the weir line moved by h1 in the direction the liquid flows.
    """
    w = length * open_share
    weff, h1 = w, mpf(0)
    for _ in range(1000):
        h1 = mpf("0.666") * (q / weff) ** (mpf(2) / 3)
        new = open_share * min(length, displaced(h1))
        assert new > 0
        done = abs(new - weff) <= CLOSE * weff
        weff = new
        if done:
            break
    else:
        raise ArithmeticError("the weir crest did not converge")
    h1 = mpf("0.666") * (q / weff) ** (mpf(2) / 3)
    fw = (w / weff) ** (mpf(2) / 3)
    return {
        "displaced_line_m": displaced(h1),
        "effective_weir_length_m": weff,
        "h1_m": h1,
        "constriction_factor": fw,
        "crest_m": mpf("0.664") * fw * (q / w) ** (mpf(2) / 3),
    }


def system_limit(c_op, l_op, sigma_mn, rho_v, drho):
    """Stupin and Kister, at constant L/V: the liquid rate rises with C in its operating ratio. From memory."""
    f = 1 / (1 + mpf("1.4") * sqrt(drho / rho_v))
    common = (1 - f) * (sigma_mn / drho) ** mpf("0.25")
    ratio = l_op / c_op
    c1 = mpf("0.445") * common / (1 + mpf("1.4") * ratio)  # solves c1 = 0.445 common - 1.4 ratio c1
    c2 = mpf("0.356") * common
    return f, ratio, c1, c2
