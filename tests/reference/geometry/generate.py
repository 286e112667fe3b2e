"""Reference values of a disc cut by straight lines, to 80 digits.

Run: python3 generate.py (needs mpmath, any version from 1.3) rewrites the .csv files beside it; with --check it compares them
with what it gives. The same script gives the same bytes.

Method: the plain antiderivative of the half chord, G(x) = (x sqrt(r^2 - x^2) + r^2 asin(x/r))/2, and polynomials, with no
rearrangement against cancellation: 80 digits carry it. A spread of rows is integrated numerically as well (check_by_quadrature).
Inverses are bisected on the same expressions. Inputs are doubles, written so that reading gives the same double; the inputs
of an inverse are doubles near the wanted share, so that no rounding of an input enters a comparison.
"""

import csv
import io
import itertools
import pathlib
import sys

from mpmath import mp, mpf, sqrt, asin, acos, quad, nstr

mp.dps = 80
RADII = [1.0, 1.5, 0.3048, 2.75, 7.0]
ROWS_CHECKED = 0


def text(x):
    return nstr(x, 30, strip_zeros=True) if isinstance(x, mpf) else repr(x)


def half_chord(r, x):
    return sqrt(r * r - x * x)


def g(r, x):
    return (x * half_chord(r, x) + r * r * asin(x / r)) / 2


def strip_area(r, a, b):
    return 2 * (g(r, b) - g(r, a))


def strip_centroid(r, a, b):
    return mpf(2) / 3 * (half_chord(r, a) ** 3 - half_chord(r, b) ** 3) / strip_area(r, a, b)


def top(r, a, b):
    return r if a <= 0 <= b else half_chord(r, min(abs(a), abs(b)))


def cap_limits(r, a, b, c):
    """Ends of the line y = c (c >= 0) inside the strip, or None."""
    reach = half_chord(r, c)
    low, high = max(a, -reach), min(b, reach)
    return (low, high) if low < high else None


def cap(r, a, b, c):
    """Area, line, arc and first moments of {a < x < b, y > c}, c >= 0."""
    limits = cap_limits(r, a, b, c) if c < r else None
    if limits is None:
        return mpf(0), mpf(0), mpf(0), mpf(0), mpf(0)
    low, high = limits
    area = g(r, high) - g(r, low) - c * (high - low)
    arc = r * (asin(high / r) - asin(low / r))
    moment_y = (half_chord(r, low) ** 3 - half_chord(r, high) ** 3) / 3 - c * (high**2 - low**2) / 2
    moment_x = ((r * r - c * c) * (high - low) - (high**3 - low**3) / 3) / 2
    return area, high - low, arc, moment_y, moment_x


def corner(r, a, b, c):
    """Area, line, arc, centroid x and y of {a < x < b, y > c}, any c."""
    area, line, arc, moment_y, moment_x = cap(r, a, b, abs(c))
    if c < 0:
        whole = strip_area(r, a, b)
        arc = 2 * r * (asin(b / r) - asin(a / r)) - arc
        moment_y = strip_centroid(r, a, b) * whole - moment_y
        area = whole - area
    return area, line, arc, moment_y / area if area else mpf(0), moment_x / area if area else mpf(0)


def band_area(r, a, b, w):
    return strip_area(r, a, b) - 2 * cap(r, a, b, w)[0]


def bisect(f, low, high):
    """Root of a rising f on [low, high] to about 60 digits."""
    for _ in range(230):
        middle = (low + high) / 2
        if f(middle) < 0:
            low = middle
        else:
            high = middle
    return (low + high) / 2


def check(value, by_quadrature, what):
    global ROWS_CHECKED
    ROWS_CHECKED += 1
    if abs(value - by_quadrature) > mpf(10) ** -25 * abs(value):
        raise SystemExit(f"{what}: {nstr(value, 30)} against {nstr(by_quadrature, 30)} by quadrature")


def write(name, header, rows):
    """Writes a file, or with --check compares it with the one that is there."""
    memory = io.StringIO(newline="")
    out = csv.writer(memory, lineterminator="\n")
    out.writerow(header)
    for row in rows:
        out.writerow([text(x) for x in row])
    path = pathlib.Path(__file__).parent / name
    if "--check" in sys.argv:
        if path.read_text(encoding="utf-8") != memory.getvalue():
            raise SystemExit(f"{name} differs from what this script gives")
    else:
        path.write_text(memory.getvalue(), encoding="utf-8", newline="")
    print(name, len(rows))


THIN = [2e-9, 1e-8, 1e-6, 1e-4, 0.01]


def strips():
    """Pairs of faces: over the whole disc, thin anywhere, thin at the shell."""
    ratios = [-1.0, -0.97, -0.6, -0.15, -1e-7, 0.0, 1e-9, 0.05, 0.33, 0.75, 0.9999, 1.0]
    pairs = list(itertools.combinations(ratios, 2))
    for at in [-1.0, -0.8, -0.3, 0.0, 0.25, 0.7071, 0.95]:
        pairs += [(at, at + width) for width in THIN]
    pairs += [(1.0 - depth, 1.0) for depth in THIN] + [(1.0 - depth, 1.0 - depth / 4) for depth in THIN]
    for r in RADII:
        for a, b in pairs:
            a, b = max(-r, a * r), min(r, b * r)
            if a < b:
                yield r, a, b


def strip_rows():
    for n, (r, a, b) in enumerate(strips()):
        R, A, B = mpf(r), mpf(a), mpf(b)
        area = strip_area(R, A, B)
        if n % 37 == 0:
            check(area, quad(lambda x: 2 * half_chord(R, x), [A, (A + B) / 2, B]), f"strip {r} {a} {b}")
        arc = 2 * R * (asin(B / R) - asin(A / R))
        yield r, a, b, area, 2 * half_chord(R, A), 2 * half_chord(R, B), arc, strip_centroid(R, A, B)


def segment_rows():
    """The segment by its depth, and the depth by the area (a double near the segment's)."""
    for r in RADII:
        for share in [1e-9, 3e-9, 1e-8, 1e-7, 1e-6, 1e-5, 1e-4, 1e-3, 0.01, 0.05, 0.2, 0.35, 0.5, 0.65, 0.8, 0.95, 0.999, 1.0]:
            depth, R = 2 * r * share, mpf(r)
            segment = lambda h: strip_area(R, -R, h - R)
            wanted = float(segment(mpf(depth)))
            if share == 1.0:
                wanted = float(mpf(3.14) * R * R)
            yield r, depth, segment(mpf(depth)), wanted, bisect(lambda h: segment(h) - mpf(wanted), mpf(0), 2 * R)


PLACES = [(-1.0, 1.0), (-1.0, 0.2), (-0.2, 1.0), (0.2, 1.0), (0.85, 1.0), (-0.3, 0.4), (0.1, 0.5), (-0.9, -0.35), (0.4, 0.4 + 1e-7), (-1e-9, 1e-9),
          (1.0 - 2e-9, 1.0)]


def corner_rows():
    """Lines everywhere, thin corners at the highest point, lines that just touch either end of the arc."""
    count = 0
    for r in RADII:
        for left, right in PLACES:
            a, b = left * r, right * r
            R, A, B = mpf(r), mpf(a), mpf(b)
            peak = top(R, A, B)
            lines = [float(peak) * s for s in [-1.0 + 1e-9, -0.999, -0.8, -0.3, -1e-8, 0.0, 1e-9, 0.1, 0.45, 0.77, 0.95]]
            lines += [float(peak * (1 - mpf(depth))) for depth in THIN]
            for end in (A, B):
                lines += [float(half_chord(R, end) * (1 + mpf(shift))) for shift in (-1e-3, -1e-9, 1e-9, 1e-3)]
            for c in lines:
                if not -r < c < r:
                    continue
                C = mpf(c)
                area, line, arc, x, y = corner(R, A, B, C)
                if area == 0:
                    continue
                count += 1
                if count % 59 == 0 and C > 0:
                    low, high = cap_limits(R, A, B, C)
                    check(area, quad(lambda x: half_chord(R, x) - C, [low, (low + high) / 2, high]), f"corner {r} {a} {b} {c}")
                yield r, a, b, c, area, line, arc, x, y


def band_rows():
    for r in RADII:
        for left, right in PLACES:
            a, b = left * r, right * r
            R, A, B = mpf(r), mpf(a), mpf(b)
            peak = float(top(R, A, B))
            for share in [1e-9, 1e-6, 1e-3, 0.05, 0.2, 0.4, 0.6, 0.8, 0.9, 0.99, 0.9999]:
                w = share * peak
                yield r, a, b, w, band_area(R, A, B, mpf(w))


SHARES = [1e-14, 1e-12, 1e-9, 1e-6, 1e-3, 0.05, 0.12, 0.3, 0.49999, 0.5, 0.7, 0.9, 0.99]


def inverse_width_rows():
    for r in RADII:
        R = mpf(r)
        for left in [-1.0, -0.9999999, -0.7, -0.25, 0.0, 0.125, 0.6, 0.95, 0.9999999]:
            a = left * r
            whole = strip_area(R, mpf(a), R)
            for share in SHARES:
                area = float(whole * mpf(share))
                width = bisect(lambda w: strip_area(R, mpf(a), mpf(a) + w) - mpf(area), mpf(0), R - mpf(a))
                yield r, a, area, width


def inverse_corner_rows():
    """Line by the corner's area, and for less than half of the strip its depth below the highest point."""
    for r in RADII[:3]:
        R = mpf(r)
        for left, right in PLACES:
            a, b = left * r, right * r
            A, B = mpf(a), mpf(b)
            peak, whole = top(R, A, B), strip_area(R, A, B)
            for share in SHARES:
                area = float(whole * mpf(share))
                c = bisect(lambda d: corner(R, A, B, peak - d)[0] - mpf(area), mpf(0), 2 * peak)
                yield r, a, b, area, peak - c, c


def inverse_band_rows():
    for r in RADII[:3]:
        R = mpf(r)
        for left, right in PLACES:
            a, b = left * r, right * r
            A, B = mpf(a), mpf(b)
            peak, whole = top(R, A, B), strip_area(R, A, B)
            for share in SHARES:
                area = float(whole * mpf(share))
                yield r, a, b, area, bisect(lambda w: band_area(R, A, B, w) - mpf(area), mpf(0), peak)


if __name__ == "__main__":
    assert abs(strip_area(mpf(1), mpf(-1), mpf(1)) - mp.pi) < mpf(10) ** -75
    assert abs(acos(mpf(1) / 2) - mp.pi / 3) < mpf(10) ** -75
    write("strips.csv", ["radius", "left", "right", "area", "left_chord", "right_chord", "arc", "centroid"], list(strip_rows()))
    write("segments.csv", ["radius", "depth", "area", "wanted_area", "depth_of_wanted"], list(segment_rows()))
    write("corners.csv", ["radius", "left", "right", "line", "area", "length", "arc", "centroid_x", "centroid_y"], list(corner_rows()))
    write("bands.csv", ["radius", "left", "right", "half_width", "area"], list(band_rows()))
    write("inverse_widths.csv", ["radius", "left", "area", "width"], list(inverse_width_rows()))
    write("inverse_corners.csv", ["radius", "left", "right", "area", "line", "depth"], list(inverse_corner_rows()))
    write("inverse_bands.csv", ["radius", "left", "right", "area", "half_width"], list(inverse_band_rows()))
    print("rows also integrated numerically:", ROWS_CHECKED)
