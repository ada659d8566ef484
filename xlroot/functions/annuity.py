"""Level payments: present and future value, payment, number of periods, rate, interest, principal.

All follow from one equation of value (Excel's documentation of PV; OpenFormula section 6.12):

    pv (1 + r)^n + pmt (1 + r due) ((1 + r)^n - 1) / r + fv = 0

with due 1 for payments at the start of each period and 0 at its end, and n pmt in place of the
second term for r = 0. Growth is taken as exp(n ln(1 + r)), which keeps small rates accurate.
Money received is positive, money paid negative. Any `due` that is not 0 means the start, as in
Excel, except where its documentation asks for 0 or 1.
"""

from __future__ import annotations

import math
from collections.abc import Callable

from xlroot.errors import Unsupported
from xlroot.functions._hunting import rate_near
from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.kinds.real import FAULT_OF, power
from xlroot.methods.method import Sample
from xlroot.values import Fault

SMALL = 1e-3
"""Below this product of rate and periods the annuity's slope is taken from its series."""


def compound(rate: float, periods: float) -> float:
    """(1 + rate)^periods; may raise ArithmeticError or ValueError."""
    if rate > -1.0:
        return math.exp(periods * math.log1p(rate))
    return power(1.0 + rate, periods)


def growth(rate: float, periods: float) -> float:
    """(1 + rate)^periods - 1, accurate near 0; may raise ArithmeticError or ValueError."""
    if rate > -1.0:
        return math.expm1(periods * math.log1p(rate))
    return power(1.0 + rate, periods) - 1.0


def amount(rate: float, periods: float) -> float:
    """The future value of 1 paid at the end of each period: ((1 + r)^n - 1) / r."""
    return growth(rate, periods) / rate if rate else periods


def weight(rate: float, due: float) -> float:
    """What payments at the start of periods gain over those at the end: 1 + r, otherwise 1."""
    return 1.0 + rate if due else 1.0


def payment(rate: float, periods: float, pv: float, fv: float, due: float) -> float:
    """The level payment; may raise ArithmeticError or ValueError."""
    return -(pv * compound(rate, periods) + fv) / (weight(rate, due) * amount(rate, periods))


def value_after(rate: float, periods: float, pmt: float, pv: float, due: float) -> float:
    """The future value; may raise ArithmeticError or ValueError."""
    grown = pv * compound(rate, periods)
    return -(grown + pmt * weight(rate, due) * amount(rate, periods))


def guarded(compute: Callable[[], float]) -> float | Fault:
    """The number computed, or the fault that stands for what went wrong."""
    try:
        result = compute()
    except (ArithmeticError, ValueError) as error:
        return FAULT_OF[type(error)]
    return result if math.isfinite(result) else Fault.NUM


_N = Takes.NUMBER


@worksheet("PV", _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def pv(rate: float, periods: float, pmt: float, fv: float = 0.0, due: float = 0.0) -> float | Fault:
    """What the payments and the future value are worth now."""
    return guarded(
        lambda: -(fv + pmt * weight(rate, due) * amount(rate, periods)) / compound(rate, periods)
    )


@worksheet("FV", _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def fv(rate: float, periods: float, pmt: float, pv: float = 0.0, due: float = 0.0) -> float | Fault:
    """What the payments and the present value are worth after all periods."""
    return guarded(lambda: value_after(rate, periods, pmt, pv, due))


@worksheet("PMT", _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def pmt(rate: float, periods: float, pv: float, fv: float = 0.0, due: float = 0.0) -> float | Fault:
    """The level payment; #NUM! for no periods."""
    if periods == 0.0:
        return Fault.NUM
    return guarded(lambda: payment(rate, periods, pv, fv, due))


@worksheet("NPER", _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def nper(rate: float, pmt: float, pv: float, fv: float = 0.0, due: float = 0.0) -> float | Fault:
    """The number of periods, a fraction included; #NUM! where no number of them suffices."""
    if rate <= -1.0:
        return Fault.NUM
    if rate == 0.0:
        return guarded(lambda: -(pv + fv) / pmt)

    def periods() -> float:
        level = pmt * weight(rate, due) / rate
        ratio = (level - fv) / (level + pv)
        if 0.5 < ratio < 2.0:
            return math.log1p(-(fv + pv) / (level + pv)) / math.log1p(rate)
        return math.log(ratio) / math.log1p(rate)

    found = guarded(periods)
    return Fault.NUM if isinstance(found, Fault) else found


@worksheet("RATE", _N, _N, _N, _N, _N, _N, optional=3, gives=Gives.NUMBER)
def rate(
    periods: float,
    pmt: float,
    pv: float,
    fv: float = 0.0,
    due: float = 0.0,
    guess: float = 0.1,
) -> float | Fault:
    """The rate per period near the guess; #NUM! where there is none."""
    if periods <= 0.0:
        return Fault.NUM
    start = 1.0 if due else 0.0

    def present_value(r: float) -> Sample:
        discount = math.exp(-periods * math.log1p(r))
        if abs(r * periods) < SMALL:
            slope = periods * (periods + 1.0) * ((periods + 2.0) * r / 3.0 - 0.5)
        else:
            slope = (periods * discount / (1.0 + r) - _worth(r, periods)) / r
        level = _worth(r, periods)
        value = pv + pmt * (1.0 + r * start) * level + fv * discount
        change = pmt * (start * level + (1.0 + r * start) * slope)
        return Sample(value, change - fv * periods * discount / (1.0 + r))

    return rate_near(present_value, guess)


def _worth(rate: float, periods: float) -> float:
    """The present value of 1 paid at the end of each period: (1 - (1 + r)^-n) / r."""
    return -math.expm1(-periods * math.log1p(rate)) / rate if rate else periods


def _interest(
    rate: float, period: float, periods: float, pv: float, fv: float, due: float
) -> float:
    """The interest within one payment; may raise ArithmeticError or ValueError."""
    level = payment(rate, periods, pv, fv, due)
    if not due:
        return value_after(rate, period - 1.0, level, pv, 0.0) * rate
    if period == 1.0:
        return 0.0
    if not period.is_integer():
        raise Unsupported("a period is no whole number, which hosts read in different ways")
    # Paid at the start, so the interest accrued over the period before, less the payment then.
    return (value_after(rate, period - 2.0, level, pv, 1.0) - level) * rate


@worksheet("IPMT", _N, _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def ipmt(
    rate: float, period: float, periods: float, pv: float, fv: float = 0.0, due: float = 0.0
) -> float | Fault:
    """The interest within the payment of one period, from 1 to the number of periods."""
    if not 1.0 <= period <= periods:
        return Fault.NUM
    return guarded(lambda: _interest(rate, period, periods, pv, fv, due))


@worksheet("PPMT", _N, _N, _N, _N, _N, _N, optional=2, gives=Gives.NUMBER)
def ppmt(
    rate: float, period: float, periods: float, pv: float, fv: float = 0.0, due: float = 0.0
) -> float | Fault:
    """The principal within the payment of one period: payment less interest."""
    if not 1.0 <= period <= periods:
        return Fault.NUM
    return guarded(
        lambda: payment(rate, periods, pv, fv, due) - _interest(rate, period, periods, pv, fv, due)
    )


ISPMT = by_form("ISPMT", "{3}*{0}*({1}/{2}-1)")
"""Interest of a loan repaid by equal principals; arguments rate, period (from 0), periods, pv."""


def _cumulated(
    rate: float, periods: float, pv: float, first: float, last: float, due: float
) -> tuple[float, float] | Fault:
    """Interest and principal over the payments first to last."""
    if rate <= 0.0 or periods <= 0.0 or pv <= 0.0 or due not in (0.0, 1.0):
        return Fault.NUM
    if first < 1.0 or last < first or last > periods:
        return Fault.NUM
    if any(not each.is_integer() for each in (periods, first, last)):
        raise Unsupported("a period is no whole number, which hosts read in different ways")
    try:
        level = payment(rate, periods, pv, 0.0, due)
        # At the start the first payment is all principal; from the next on principal grows by
        # the rate from one payment to the next, and so it does from the first on at the end.
        begin = max(first, 2.0) if due else first
        lead = level - _interest(rate, begin, periods, pv, 0.0, due) if begin <= last else 0.0
        principal = lead * amount(rate, last - begin + 1.0) + (level if begin > first else 0.0)
        interest = (last - first + 1.0) * level - principal
    except (ArithmeticError, ValueError) as error:
        return FAULT_OF[type(error)]
    return interest, principal


@worksheet("CUMIPMT", _N, _N, _N, _N, _N, _N, gives=Gives.NUMBER)
def cumipmt(
    rate: float, periods: float, pv: float, first: float, last: float, due: float
) -> float | Fault:
    """The interest within the payments from first to last."""
    found = _cumulated(rate, periods, pv, first, last, due)
    return found if isinstance(found, Fault) else found[0]


@worksheet("CUMPRINC", _N, _N, _N, _N, _N, _N, gives=Gives.NUMBER)
def cumprinc(
    rate: float, periods: float, pv: float, first: float, last: float, due: float
) -> float | Fault:
    """The principal within the payments from first to last."""
    found = _cumulated(rate, periods, pv, first, last, due)
    return found if isinstance(found, Fault) else found[1]
