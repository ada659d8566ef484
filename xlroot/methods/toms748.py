"""TOMS 748: inverse cubic and quadratic interpolation with double-length secant steps."""

from __future__ import annotations

from xlroot.methods.method import Family, Method, Need, Start, Trials
from xlroot.methods.regula_falsi import chord

SHRINK = 0.5
"""mu: an extra bisection follows when three steps did not halve the interval."""


class _Bracket:
    """The interval [a, b] and the last two points d, e that it left behind."""

    def __init__(self, start: Start) -> None:
        self.a, self.b, self.fa, self.fb = start.low, start.high, start.f_low, start.f_high
        self.d = self.e = self.fd = self.fe = 0.0

    def kept_inside(self, x: float, least: float) -> float:
        """A point strictly inside the interval, at least `least` from its ends where it can be."""
        a, b = self.a, self.b
        if b - a <= 2.0 * least or not a < x < b:
            return a + (b - a) / 2.0
        return min(max(x, a + least), b - least)

    def take(self, c: float, fc: float) -> None:
        """The paper's subroutine bracket: c becomes an end, the end it replaces becomes d."""
        self.e, self.fe = self.d, self.fd
        if (fc < 0.0) == (self.fa < 0.0):
            self.d, self.fd, self.a, self.fa = self.a, self.fa, c, fc
        else:
            self.d, self.fd, self.b, self.fb = self.b, self.fb, c, fc

    def distinct(self) -> bool:
        """Whether the four residuals allow inverse cubic interpolation."""
        values = (self.fa, self.fb, self.fd, self.fe)
        return len(set(values)) == 4

    def quadratic(self, newton_steps: int) -> float:
        """A zero of the quadratic through a, b, d, by Newton steps from the better end."""
        a, b, d, fa, fb, fd = self.a, self.b, self.d, self.fa, self.fb, self.fd
        slope = (fb - fa) / (b - a)
        bend = ((fd - fb) / (d - b) - slope) / (d - a)
        if bend == 0.0:
            return chord(a, fa, b, fb)
        x = a if (bend > 0.0) == (fa > 0.0) else b
        for _ in range(newton_steps):
            value = fa + (slope + bend * (x - b)) * (x - a)
            derivative = slope + bend * (2.0 * x - a - b)
            if derivative == 0.0:
                return chord(a, fa, b, fb)
            x -= value / derivative
        return x

    def cubic(self) -> float:
        """The inverse cubic through a, b, d, e at zero (the paper's ipzero)."""
        a, b, d, e = self.a, self.b, self.d, self.e
        fa, fb, fd, fe = self.fa, self.fb, self.fd, self.fe
        q11 = (d - e) * fd / (fe - fd)
        q21 = (b - d) * fb / (fd - fb)
        q31 = (a - b) * fa / (fb - fa)
        d21 = (b - d) * fd / (fd - fb)
        d31 = (a - b) * fb / (fb - fa)
        q22 = (d21 - q11) * fb / (fe - fb)
        q32 = (d31 - q21) * fa / (fd - fa)
        d32 = (d31 - q21) * fd / (fd - fa)
        q33 = (d32 - q22) * fa / (fe - fa)
        return a + (q31 + q32 + q33)


def trials(start: Start) -> Trials:
    """Algorithm 4.2 of the paper: two interpolations, a double secant step, perhaps a bisection."""
    box = _Bracket(start)

    def least() -> float:
        best = box.a if abs(box.fa) < abs(box.fb) else box.b
        return 0.5 * start.tolerance.at(best)

    c = box.kept_inside(chord(box.a, box.fa, box.b, box.fb), least())
    box.take(c, (yield c))
    first = True
    while True:
        width = box.b - box.a
        for newton_steps in (2, 3):
            if first or not box.distinct():
                c = box.quadratic(newton_steps)
            else:
                c = box.cubic()
                if not box.a < c < box.b:
                    c = box.quadratic(newton_steps)
            first = False
            c = box.kept_inside(c, least())
            box.take(c, (yield c))
        end, f_end = (box.a, box.fa) if abs(box.fa) < abs(box.fb) else (box.b, box.fb)
        c = end - 2.0 * f_end / (box.fb - box.fa) * (box.b - box.a)
        if not abs(c - end) <= 0.5 * (box.b - box.a):
            c = box.a + (box.b - box.a) / 2.0
        c = box.kept_inside(c, least())
        box.take(c, (yield c))
        if box.b - box.a >= SHRINK * width:
            c = box.a + (box.b - box.a) / 2.0
            box.take(c, (yield c))


TOMS748 = Method(
    "TOMS 748",
    Family.BRACKETING,
    Need.VALUE,
    "1.66 an evaluation",
    "G. E. Alefeld, F. A. Potra and Y. Shi, Algorithm 748: enclosing zeros of continuous "
    "functions, ACM Trans. Math. Softw. 21 (1995) 327-344",
    "an expensive smooth residual",
    trials,
)
