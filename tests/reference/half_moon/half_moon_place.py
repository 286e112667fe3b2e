"""Part of a disc beside a straight wall, and the panels and downcomers of a half-moon tray in it.

Every area is a numerical integral and every line is bisected on one: see half_moon_tray.py.
"""

from mpmath import mp, mpf, sqrt, quad

mp.dps = 30
BISECTIONS = 110
CLOSE = mpf(10) ** -26


class Place:
    """The part of a disc of radius r on the side u >= u0 of a straight wall face."""

    def __init__(self, r, u0):
        self.r, self.u0 = r, u0
        # half length of the wall face
        self.wall_half = sqrt(r * r - u0 * u0)
        # farthest |y| of the compartment: the disc's own top where the compartment holds the axis, else the wall's end
        self.y_top = r if u0 < 0 else self.wall_half
        self.area = self.between_u(u0, r)

    def root(self, v):
        d = self.r * self.r - v * v
        return sqrt(d) if d > 0 else mpf(0)

    def line_u(self, u):
        """Length of the line u = const inside the compartment (parallel to the wall)."""
        return 2 * self.root(u) if self.u0 <= u <= self.r else mpf(0)

    def line_y(self, y):
        """Length of the line y = const inside the compartment (square to the wall)."""
        if abs(y) > self.y_top:
            return mpf(0)
        h = self.root(y)
        return h - max(self.u0, -h)

    def between_u(self, a, b):
        return quad(self.line_u, [a, b])

    def between_y(self, a, b):
        # the width has a kink where the wall meets the shell: integrate piece by piece
        cuts = [y for y in (-self.wall_half, self.wall_half) if a < y < b]
        return quad(self.line_y, [a] + cuts + [b])

    def bisect(self, grows, low, high):
        """The argument in (low, high) at which the growing function `grows` crosses zero."""
        assert grows(low) <= 0 <= grows(high)
        for _ in range(BISECTIONS):
            mid = (low + high) / 2
            if grows(mid) < 0:
                low = mid
            else:
                high = mid
        return (low + high) / 2

    def corner(self, area):
        """y of the line that cuts off `area` at the end of large y."""
        return self.bisect(lambda y: area - self.between_y(y, self.y_top), mpf(0), self.y_top)

    def half_band(self, area):
        """w of the band |y| < w of `area`."""
        return self.bisect(lambda y: 2 * self.between_y(mpf(0), y) - area, mpf(0), self.y_top)

    def beyond_u(self, start, area):
        """u of the line that encloses `area` between the line at `start` and itself."""
        return self.bisect(lambda u: self.between_u(start, u) - area, start, self.r)

    def before_u(self, end, area):
        """u of the line that encloses `area` between itself and the line at `end`."""
        return self.bisect(lambda u: area - self.between_u(u, end), self.u0, end)

    # edge strips of an active panel: an annular sector along its arc and a strip along its piece of wall; where shell
    # and wall meet both are subtracted

    def strip_y(self, a, b, s):
        """Panel between the lines y = a and y = b."""
        arc = quad(lambda y: self.r / self.root(y), [a, b])
        wall = min(b, self.wall_half) - max(a, -self.wall_half)
        if self.u0 < 0:  # arc on the far side of the axis, beyond the ends of the wall
            for lo, hi in ((max(a, self.wall_half), b), (a, min(b, -self.wall_half))):
                if hi > lo:
                    arc += quad(lambda y: self.r / self.root(y), [lo, hi])
        return self.sector(arc, s) + s * max(wall, mpf(0))

    def strip_u(self, a, b, s):
        """Panel between the lines u = a and u = b: two arcs; wall only if the panel touches it, and none does."""
        assert a > self.u0
        return self.sector(2 * quad(lambda u: self.r / self.root(u), [a, b]), s)

    def sector(self, arc, s):
        return arc / self.r * (self.r**2 - (self.r - s) ** 2) / 2


def one_pass(line, inlet, weir, sign, length, top, bottom, apron):
    """A pass: `inlet` and `weir` are positions on the axis of flow, `sign` the direction of flow along it."""
    return {
        "inlet": inlet,
        "weir": weir,
        "length": length(weir),
        "inlet_length": length(inlet),
        "displaced": lambda h1: length(weir + sign * h1),
        "path": abs(weir - inlet),
        "top": top,
        "bottom": bottom,
        "apron_position": apron,
        "apron": length(apron),
        "name": line,
    }


def layout(place, flow, passes, f, fb, s):
    """The decks of a tray pair: [(name, [pass], strip area)]. One deck where the two are mirror images."""
    a = place.area
    top, bottom = f * a, fb * a
    if (flow, passes) == ("along", 1):
        c, cb = place.corner(top), place.corner(bottom)
        # the downcomer of the outlet corner ends in the inlet corner of the mirror image below: at y = +cb
        p = one_pass("whole panel", -cb, c, 1, place.line_y, top, bottom, cb)
        return [("every deck (mirror images)", [p], place.strip_y(-cb, c, s), place.between_y(-cb, c))]
    if (flow, passes) == ("along", 2):
        c, cb = place.corner(top / 2), place.corner(bottom / 2)
        w, wb = place.half_band(top), place.half_band(bottom)
        d1, d2 = [], []
        for name, k in (("panel at positive y", 1), ("panel at negative y", -1)):
            d1.append(one_pass(name, k * wb, k * c, k, place.line_y, top / 2, bottom / 2, k * cb))
            d2.append(one_pass(name, k * cb, k * w, -k, place.line_y, top / 2, bottom / 2, k * wb))
        return [
            ("end downcomers, central inlet", d1, 2 * place.strip_y(wb, c, s), 2 * place.between_y(wb, c)),
            ("central downcomer, end inlets", d2, 2 * place.strip_y(w, cb, s), 2 * place.between_y(w, cb)),
        ]
    if (flow, passes) == ("across", 1):
        wall, wall_b = place.beyond_u(place.u0, top), place.beyond_u(place.u0, bottom)
        shell, shell_b = place.before_u(place.r, top), place.before_u(place.r, bottom)
        d1 = [one_pass("whole panel", shell_b, wall, -1, place.line_u, top, bottom, wall_b)]
        d2 = [one_pass("whole panel", wall_b, shell, 1, place.line_u, top, bottom, shell_b)]
        return [
            ("downcomer along the wall", d1, place.strip_u(wall, shell_b, s), place.between_u(wall, shell_b)),
            ("downcomer at the shell", d2, place.strip_u(wall_b, shell, s), place.between_u(wall_b, shell)),
        ]
    if (flow, passes) == ("across", 2):
        panel = (a - top - bottom) / 2
        wall, wall_b = place.beyond_u(place.u0, top / 2), place.beyond_u(place.u0, bottom / 2)
        shell, shell_b = place.before_u(place.r, top / 2), place.before_u(place.r, bottom / 2)
        in_wall, in_shell = place.beyond_u(wall, panel), place.before_u(shell, panel)  # central inlet of deck 1
        dc_wall, dc_shell = place.beyond_u(wall_b, panel), place.before_u(shell_b, panel)  # central downcomer of deck 2
        assert abs(place.between_u(in_wall, in_shell) - bottom) < CLOSE and abs(place.between_u(dc_wall, dc_shell) - top) < CLOSE
        d1 = [
            one_pass("panel at the wall", in_wall, wall, -1, place.line_u, top / 2, bottom / 2, wall_b),
            one_pass("panel at the shell", in_shell, shell, 1, place.line_u, top / 2, bottom / 2, shell_b),
        ]
        d2 = [
            one_pass("panel at the wall", wall_b, dc_wall, 1, place.line_u, top / 2, bottom / 2, in_wall),
            one_pass("panel at the shell", shell_b, dc_shell, -1, place.line_u, top / 2, bottom / 2, in_shell),
        ]
        return [
            ("side downcomers, central inlet", d1, place.strip_u(wall, in_wall, s) + place.strip_u(in_shell, shell, s),
             place.between_u(wall, in_wall) + place.between_u(in_shell, shell)),
            ("central downcomer, side inlets", d2, place.strip_u(wall_b, dc_wall, s) + place.strip_u(dc_shell, shell_b, s),
             place.between_u(wall_b, dc_wall) + place.between_u(dc_shell, shell_b)),
        ]
    raise ValueError((flow, passes))
