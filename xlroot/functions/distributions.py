"""Probability distributions and their quantiles.

Densities and distribution functions are written with the incomplete gamma and beta functions of
scipy.special (Cephes and Boost), imported when first used. Names and argument checks follow
Excel's documentation; definitions NIST/SEMATECH e-Handbook, section 1.3.6.6.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import Any

from xlroot.functions.entry import Entry, Gives, Takes, by_form, worksheet
from xlroot.values import Fault

N, L = Takes.NUMBER, Takes.LOGICAL
HALF_ROOT = math.sqrt(0.5)

NORMSDIST = by_form("NORMSDIST", f"0.5*erfc(-{HALF_ROOT!r}*{{0}})")
GAUSS = by_form("GAUSS", f"0.5*erf({HALF_ROOT!r}*{{0}})")


def special() -> Any:
    """scipy.special."""
    import scipy.special

    return scipy.special


def made(
    names: str | tuple[str, ...],
    takes: tuple[Takes, ...],
    rule: Callable[..., float | Fault],
    *,
    optional: int = 0,
) -> Entry:
    """An entry whose result is checked: not finite is #NUM!."""

    def checked(*arguments: float) -> float | Fault:
        try:
            result = rule(*arguments)
        except (ArithmeticError, ValueError):
            return Fault.NUM
        if isinstance(result, Fault):
            return result
        number = float(result)
        return number if math.isfinite(number) else Fault.NUM

    checked.__module__ = rule.__module__
    return worksheet(names, *takes, optional=optional, gives=Gives.NUMBER)(checked)


# -- normal -----------------------------------------------------------------------------------


def _phi(z: float) -> float:
    return math.exp(-0.5 * z * z) / math.sqrt(2.0 * math.pi)


def _normal_cdf(z: float) -> float:
    return 0.5 * math.erfc(-z * HALF_ROOT)


def _normal_inv(p: float) -> float | Fault:
    return float(special().ndtri(p)) if 0.0 < p < 1.0 else Fault.NUM


def _normal(x: float, middle: float, spread: float, cumulative: float) -> float | Fault:
    if spread <= 0.0:
        return Fault.NUM
    z = (x - middle) / spread
    return _normal_cdf(z) if cumulative else _phi(z) / spread


def _scaled_inv(p: float, middle: float, spread: float) -> float | Fault:
    z = _normal_inv(p)
    if isinstance(z, Fault) or spread <= 0.0:
        return Fault.NUM
    return middle + spread * z


def _lognormal(x: float, middle: float, spread: float, cumulative: float = 1.0) -> float | Fault:
    if spread <= 0.0 or x <= 0.0:
        return Fault.NUM
    z = (math.log(x) - middle) / spread
    return _normal_cdf(z) if cumulative else _phi(z) / (spread * x)


def _lognormal_inv(p: float, middle: float, spread: float) -> float | Fault:
    found = _scaled_inv(p, middle, spread)
    return found if isinstance(found, Fault) else math.exp(found)


NORM_DIST = made(("NORM.DIST", "NORMDIST"), (N, N, N, L), _normal)
NORM_S_DIST = made("NORM.S.DIST", (N, L), lambda z, cum: _normal_cdf(z) if cum else _phi(z))
NORM_INV = made(("NORM.INV", "NORMINV"), (N, N, N), _scaled_inv)
NORM_S_INV = made(("NORM.S.INV", "NORMSINV"), (N,), _normal_inv)
PHI = made("PHI", (N,), _phi)
LOGNORM_DIST = made("LOGNORM.DIST", (N, N, N, L), _lognormal)
LOGNORMDIST = made("LOGNORMDIST", (N, N, N), _lognormal)
LOGNORM_INV = made(("LOGNORM.INV", "LOGINV"), (N, N, N), _lognormal_inv)


@worksheet(("CONFIDENCE", "CONFIDENCE.NORM"), N, N, N, gives=Gives.NUMBER)
def confidence(alpha: float, spread: float, size: float) -> float | Fault:
    """Half the width of a confidence interval of a mean, spread known."""
    if not 0.0 < alpha < 1.0 or spread <= 0.0 or size < 1.0:
        return Fault.NUM
    return float(-special().ndtri(alpha / 2.0) * spread / math.sqrt(int(size)))


@worksheet("CONFIDENCE.T", N, N, N, gives=Gives.NUMBER)
def confidence_t(alpha: float, spread: float, size: float) -> float | Fault:
    """Half the width of a confidence interval of a mean, spread estimated."""
    if not 0.0 < alpha < 1.0 or spread <= 0.0 or size < 1.0:
        return Fault.NUM
    if int(size) == 1:
        return Fault.DIV0
    t = -special().stdtrit(int(size) - 1, alpha / 2.0)
    return float(t * spread / math.sqrt(int(size)))


# -- Student's t ------------------------------------------------------------------------------


def _degrees(n: float) -> int | None:
    whole = math.floor(n) if math.isfinite(n) else 0
    return whole if 1 <= whole <= 10**10 else None


def _t(x: float, n: float, cumulative: float) -> float | Fault:
    d = _degrees(n)
    if d is None:
        return Fault.NUM
    if cumulative:
        return float(special().stdtr(d, x))
    scale = math.lgamma((d + 1) / 2.0) - math.lgamma(d / 2.0) - 0.5 * math.log(d * math.pi)
    return math.exp(scale - (d + 1) / 2.0 * math.log1p(x * x / d))


def _t_upper(x: float, n: float) -> float | Fault:
    d = _degrees(n)
    return Fault.NUM if d is None else float(special().stdtr(d, -x))


def _t_two(x: float, n: float) -> float | Fault:
    d = _degrees(n)
    return Fault.NUM if d is None or x < 0.0 else 2.0 * float(special().stdtr(d, -x))


def _t_legacy(x: float, n: float, tails: float) -> float | Fault:
    if x < 0.0 or int(tails) not in (1, 2):
        return Fault.NUM
    return _t_upper(x, n) if int(tails) == 1 else _t_two(x, n)


def _t_inv(p: float, n: float) -> float | Fault:
    d = _degrees(n)
    return Fault.NUM if d is None or not 0.0 < p < 1.0 else float(special().stdtrit(d, p))


def _t_inv_two(p: float, n: float) -> float | Fault:
    d = _degrees(n)
    if d is None or not 0.0 < p <= 1.0:
        return Fault.NUM
    return float(-special().stdtrit(d, p / 2.0)) + 0.0


T_DIST = made("T.DIST", (N, N, L), _t)
T_DIST_RT = made("T.DIST.RT", (N, N), _t_upper)
T_DIST_2T = made("T.DIST.2T", (N, N), _t_two)
TDIST = made("TDIST", (N, N, N), _t_legacy)
T_INV = made("T.INV", (N, N), _t_inv)
T_INV_2T = made(("T.INV.2T", "TINV"), (N, N), _t_inv_two)


# -- chi-square and F -------------------------------------------------------------------------


def _chisq(x: float, n: float, cumulative: float) -> float | Fault:
    d = _degrees(n)
    if d is None or x < 0.0:
        return Fault.NUM
    if cumulative:
        return float(special().chdtr(d, x))
    return _gamma_density(x, d / 2.0, 2.0)


def _chisq_upper(x: float, n: float) -> float | Fault:
    d = _degrees(n)
    return Fault.NUM if d is None or x < 0.0 else float(special().chdtrc(d, x))


def _chisq_inv(p: float, n: float) -> float | Fault:
    d = _degrees(n)
    if d is None or not 0.0 <= p < 1.0:
        return Fault.NUM
    return 2.0 * float(special().gammaincinv(d / 2.0, p))


def _chisq_inv_upper(p: float, n: float) -> float | Fault:
    d = _degrees(n)
    return Fault.NUM if d is None or not 0.0 < p <= 1.0 else float(special().chdtri(d, p))


CHISQ_DIST = made("CHISQ.DIST", (N, N, L), _chisq)
CHISQ_DIST_RT = made(("CHISQ.DIST.RT", "CHIDIST"), (N, N), _chisq_upper)
CHISQ_INV = made("CHISQ.INV", (N, N), _chisq_inv)
CHISQ_INV_RT = made(("CHISQ.INV.RT", "CHIINV"), (N, N), _chisq_inv_upper)


def _f(x: float, n: float, m: float, cumulative: float) -> float | Fault:
    a, b = _degrees(n), _degrees(m)
    if a is None or b is None or x < 0.0:
        return Fault.NUM
    if cumulative:
        return float(special().fdtr(a, b, x))
    if x == 0.0:
        return 0.0 if a > 2 else 1.0 if a == 2 else Fault.NUM
    log = 0.5 * (a * math.log(a) + b * math.log(b)) + (0.5 * a - 1.0) * math.log(x)
    log -= 0.5 * (a + b) * math.log(b + a * x) + float(special().betaln(a / 2.0, b / 2.0))
    return math.exp(log)


def _f_upper(x: float, n: float, m: float) -> float | Fault:
    a, b = _degrees(n), _degrees(m)
    return Fault.NUM if a is None or b is None or x < 0.0 else float(special().fdtrc(a, b, x))


def _f_inv(p: float, n: float, m: float) -> float | Fault:
    a, b = _degrees(n), _degrees(m)
    if a is None or b is None or not 0.0 <= p < 1.0:
        return Fault.NUM
    return float(special().fdtri(a, b, p)) if p else 0.0


def _f_inv_upper(p: float, n: float, m: float) -> float | Fault:
    a, b = _degrees(n), _degrees(m)
    if a is None or b is None or not 0.0 < p <= 1.0:
        return Fault.NUM
    y = float(special().betaincinv(b / 2.0, a / 2.0, p))
    return b * (1.0 - y) / (a * y)


F_DIST = made("F.DIST", (N, N, N, L), _f)
F_DIST_RT = made(("F.DIST.RT", "FDIST"), (N, N, N), _f_upper)
F_INV = made("F.INV", (N, N, N), _f_inv)
F_INV_RT = made(("F.INV.RT", "FINV"), (N, N, N), _f_inv_upper)


# -- gamma, beta, exponential, Weibull --------------------------------------------------------


def _gamma_density(x: float, shape: float, scale: float) -> float | Fault:
    if x == 0.0:
        return 1.0 / scale if shape == 1.0 else 0.0 if shape > 1.0 else Fault.NUM
    log = (shape - 1.0) * math.log(x / scale) - x / scale - math.lgamma(shape)
    return math.exp(log) / scale


def _gamma(x: float, shape: float, scale: float, cumulative: float) -> float | Fault:
    if x < 0.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    if cumulative:
        return float(special().gammainc(shape, x / scale))
    return _gamma_density(x, shape, scale)


def _gamma_inv(p: float, shape: float, scale: float) -> float | Fault:
    if not 0.0 <= p < 1.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    return scale * float(special().gammaincinv(shape, p))


def _beta(
    x: float, a: float, b: float, cumulative: float, low: float = 0.0, high: float = 1.0
) -> float | Fault:
    if a <= 0.0 or b <= 0.0 or low >= high or not low <= x <= high:
        return Fault.NUM
    y = (x - low) / (high - low)
    if cumulative:
        return float(special().betainc(a, b, y))
    if y in (0.0, 1.0):
        power = a if y == 0.0 else b
        if power < 1.0:
            return Fault.NUM
        return 0.0 if power > 1.0 else (b if y == 0.0 else a) / (high - low)
    log = (a - 1.0) * math.log(y) + (b - 1.0) * math.log1p(-y) - float(special().betaln(a, b))
    return math.exp(log) / (high - low)


def _beta_legacy(
    x: float, a: float, b: float, low: float = 0.0, high: float = 1.0
) -> float | Fault:
    return _beta(x, a, b, 1.0, low, high)


def _beta_inv(p: float, a: float, b: float, low: float = 0.0, high: float = 1.0) -> float | Fault:
    if a <= 0.0 or b <= 0.0 or low >= high or not 0.0 < p <= 1.0:
        return Fault.NUM
    return low + (high - low) * float(special().betaincinv(a, b, p))


def _exponential(x: float, rate: float, cumulative: float) -> float | Fault:
    if x < 0.0 or rate <= 0.0:
        return Fault.NUM
    return -math.expm1(-rate * x) if cumulative else rate * math.exp(-rate * x)


def _weibull(x: float, shape: float, scale: float, cumulative: float) -> float | Fault:
    if x < 0.0 or shape <= 0.0 or scale <= 0.0:
        return Fault.NUM
    power = math.pow(x / scale, shape)
    if cumulative:
        return -math.expm1(-power)
    if x == 0.0:
        return 1.0 / scale if shape == 1.0 else 0.0 if shape > 1.0 else Fault.NUM
    return shape / scale * math.pow(x / scale, shape - 1.0) * math.exp(-power)


GAMMA_DIST = made(("GAMMA.DIST", "GAMMADIST"), (N, N, N, L), _gamma)
GAMMA_INV = made(("GAMMA.INV", "GAMMAINV"), (N, N, N), _gamma_inv)
BETA_DIST = made("BETA.DIST", (N, N, N, L, N, N), _beta, optional=2)
BETADIST = made("BETADIST", (N, N, N, N, N), _beta_legacy, optional=2)
BETA_INV = made(("BETA.INV", "BETAINV"), (N, N, N, N, N), _beta_inv, optional=2)
EXPON_DIST = made(("EXPON.DIST", "EXPONDIST"), (N, N, L), _exponential)
WEIBULL_DIST = made(("WEIBULL.DIST", "WEIBULL"), (N, N, N, L), _weibull)


# -- error and Bessel functions ---------------------------------------------------------------


def _erf(low: float, high: float | None = None) -> float:
    return math.erf(low) if high is None else math.erf(high) - math.erf(low)


def _bessel(name: str, *, positive: bool) -> Callable[[float, float], float | Fault]:
    def rule(x: float, order: float) -> float | Fault:
        n = math.floor(order)
        if n < 0 or (positive and x <= 0.0):
            return Fault.NUM
        return float(getattr(special(), name)(n, x))

    return rule


ERF = made("ERF", (N, N), _erf, optional=1)
ERF_PRECISE = by_form("ERF.PRECISE", "erf({0})")
ERFC = by_form(("ERFC", "ERFC.PRECISE"), "erfc({0})")
BESSELJ = made("BESSELJ", (N, N), _bessel("jn", positive=False))
BESSELY = made("BESSELY", (N, N), _bessel("yn", positive=True))
BESSELI = made("BESSELI", (N, N), _bessel("iv", positive=False))
BESSELK = made("BESSELK", (N, N), _bessel("kn", positive=True))
