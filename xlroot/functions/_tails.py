"""The regularised incomplete gamma and beta functions and their inverses, from scipy.

DLMF 8.2.4 and 8.17.2. Both tails are served, so that a small probability keeps its digits, and
the larger one is taken from the smaller (scipy's own is off by 2e-12 where x is next to nothing).
scipy is imported on first use: a solve without such functions does not wait for it.
"""

from __future__ import annotations


def gamma_below(a: float, x: float) -> float:
    """P(a, x), the part of the gamma integral below x >= 0."""
    from scipy.special import gammainc, gammaincc

    below = float(gammainc(a, x))
    return below if below <= 0.5 else 1.0 - float(gammaincc(a, x))


def gamma_above(a: float, x: float) -> float:
    """Q(a, x) = 1 - P(a, x)."""
    from scipy.special import gammainc, gammaincc

    above = float(gammaincc(a, x))
    return above if above <= 0.5 else 1.0 - float(gammainc(a, x))


def gamma_point_below(a: float, p: float) -> float:
    """The x with P(a, x) = p."""
    from scipy.special import gammaincinv

    return float(gammaincinv(a, p))


def gamma_point_above(a: float, q: float) -> float:
    """The x with Q(a, x) = q."""
    from scipy.special import gammainccinv

    return float(gammainccinv(a, q))


def beta_below(a: float, b: float, x: float) -> float:
    """I_x(a, b), the part of the beta integral below x in [0, 1]."""
    from scipy.special import betainc, betaincc

    below = float(betainc(a, b, x))
    return below if below <= 0.5 else 1.0 - float(betaincc(a, b, x))


def beta_above(a: float, b: float, x: float) -> float:
    """1 - I_x(a, b)."""
    from scipy.special import betainc, betaincc

    above = float(betaincc(a, b, x))
    return above if above <= 0.5 else 1.0 - float(betainc(a, b, x))


def beta_point_below(a: float, b: float, p: float) -> float:
    """The x with I_x(a, b) = p."""
    from scipy.special import betaincinv

    return float(betaincinv(a, b, p))


def beta_point_above(a: float, b: float, q: float) -> float:
    """The x with 1 - I_x(a, b) = q."""
    from scipy.special import betainccinv

    return float(betainccinv(a, b, q))
