"""Securities with coupons: price, yield, duration.

For a face of 100 with N coupons to come, E days in the coupon period, A of them gone and D left
(Excel's documentation of PRICE, YIELD and DURATION; OpenFormula section 6.12):

    price = redemption / (1 + y/f)^(N - 1 + D/E) + sum over k = 1 … N of
            (100 c/f) / (1 + y/f)^(k - 1 + D/E) - 100 (c/f) (A/E)

With one coupon to come, interest is simple: the whole sum due over 1 + (D/E)(y/f).
"""

from __future__ import annotations

from xlroot.functions._hunting import rate_near
from xlroot.functions.annuity import guarded
from xlroot.functions.coupons import CALENDAR, Period, period_of
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.methods.method import Sample
from xlroot.values import Fault

FACE = 100.0
_N = Takes.NUMBER


def _clean_price(period: Period, coupon: float, rate: float, redemption: float) -> Sample:
    """The price and its slope for a coupon and a yield, both per period and not in percent."""
    ahead = period.left / period.length
    gone = FACE * coupon * period.accrued / period.length
    if period.coupons == 1:
        due = redemption + FACE * coupon
        over = 1.0 + ahead * rate
        return Sample(due / over - gone, -ahead * due / (over * over))
    value = slope = 0.0
    growth = 1.0 + rate
    for paid in range(period.coupons):
        flow = FACE * coupon + (redemption if paid == period.coupons - 1 else 0.0)
        worth = flow / growth ** (paid + ahead)
        value += worth
        slope -= (paid + ahead) * worth / growth
    return Sample(value - gone, slope)


@worksheet("PRICE", _N, _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def price(
    settlement: float,
    maturity: float,
    coupon: float,
    yearly: float,
    redemption: float,
    frequency: float,
    basis: float = 0.0,
) -> float | Fault:
    """The price per 100 face that yields `yearly`, without the interest accrued."""
    period = period_of(settlement, maturity, frequency, basis)
    if isinstance(period, Fault):
        return period
    if coupon < 0.0 or yearly < 0.0 or redemption <= 0.0:
        return Fault.NUM
    times = period.frequency
    return guarded(lambda: _clean_price(period, coupon / times, yearly / times, redemption).f)


@worksheet("YIELD", _N, _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def yield_(
    settlement: float,
    maturity: float,
    coupon: float,
    paid: float,
    redemption: float,
    frequency: float,
    basis: float = 0.0,
) -> float | Fault:
    """The yearly yield at which PRICE gives the price paid; unique, as price falls with yield."""
    period = period_of(settlement, maturity, frequency, basis)
    if isinstance(period, Fault):
        return period
    if coupon < 0.0 or paid <= 0.0 or redemption <= 0.0:
        return Fault.NUM
    each = coupon / period.frequency
    if period.coupons == 1:
        full = paid + FACE * each * period.accrued / period.length
        gain = (redemption + FACE * each) / full - 1.0
        return guarded(lambda: gain * period.frequency * period.length / period.left)

    def over(rate: float) -> Sample:
        sample = _clean_price(period, each, rate, redemption)
        return Sample(sample.f - paid, sample.slope)

    found = rate_near(over, each)
    return found if isinstance(found, Fault) else found * period.frequency


def _macaulay(period: Period, coupon: float, rate: float) -> float:
    """The mean time to payment in coupon periods, weighted by worth."""
    ahead = period.left / period.length
    growth = 1.0 + rate
    total = timed = 0.0
    for paid in range(period.coupons):
        flow = coupon + (1.0 if paid == period.coupons - 1 else 0.0)
        worth = flow / growth ** (paid + ahead)
        total += worth
        timed += (paid + ahead) * worth
    return timed / total


@worksheet("DURATION", _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def duration(
    settlement: float,
    maturity: float,
    coupon: float,
    yearly: float,
    frequency: float,
    basis: float = 0.0,
) -> float | Fault:
    """Macaulay's duration in years of a security redeemed at its face."""
    period = period_of(settlement, maturity, frequency, basis)
    if isinstance(period, Fault):
        return period
    if coupon < 0.0 or yearly < 0.0:
        return Fault.NUM
    times = period.frequency
    return guarded(lambda: _macaulay(period, coupon / times, yearly / times) / times)


@worksheet("MDURATION", _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def mduration(
    settlement: float,
    maturity: float,
    coupon: float,
    yearly: float,
    frequency: float,
    basis: float = 0.0,
) -> float | Fault:
    """The duration over 1 + yearly/frequency: how far the price falls as the yield rises."""
    period = period_of(settlement, maturity, frequency, basis)
    if isinstance(period, Fault):
        return period
    if coupon < 0.0 or yearly < 0.0:
        return Fault.NUM
    times = period.frequency
    rate = yearly / times
    return guarded(lambda: _macaulay(period, coupon / times, rate) / times / (1.0 + rate))
