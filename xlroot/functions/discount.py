"""Securities without coupons: discount, interest at maturity, treasury bills, accrued interest.

Excel's documentation of each function; OpenFormula section 6.12. Parts of a year by the day count
of `xlroot.functions.daycount`.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from datetime import date

from xlroot.errors import Unsupported
from xlroot.functions.annuity import guarded
from xlroot.functions.coupons import CALENDAR, frequency_of, months_before
from xlroot.functions.daycount import Basis, basis_of, date_of, february_end, year_part
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.values import Fault

_N = Takes.NUMBER


def _years(settlement: float, maturity: float, basis: float) -> float | Fault:
    """The part of a year between two dates; #NUM! unless the second is later."""
    start, end, way = date_of(settlement), date_of(maturity), basis_of(basis)
    if isinstance(start, Fault) or isinstance(end, Fault) or isinstance(way, Fault):
        return Fault.NUM
    return year_part(start, end, way) if start < end else Fault.NUM


def _over(
    settlement: float, maturity: float, basis: float, compute: Callable[[float], float]
) -> float | Fault:
    """What the part of a year between the dates gives."""
    years = _years(settlement, maturity, basis)
    return years if isinstance(years, Fault) else guarded(lambda: compute(years))


@worksheet("DISC", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def disc(
    settlement: float, maturity: float, price: float, redemption: float, basis: float = 0.0
) -> float | Fault:
    """The discount a year, as a part of the redemption."""
    if price <= 0.0 or redemption <= 0.0:
        return Fault.NUM
    return _over(settlement, maturity, basis, lambda t: (redemption - price) / redemption / t)


@worksheet("INTRATE", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def intrate(
    settlement: float, maturity: float, invested: float, redemption: float, basis: float = 0.0
) -> float | Fault:
    """The interest a year, as a part of the investment."""
    if invested <= 0.0 or redemption <= 0.0:
        return Fault.NUM
    return _over(settlement, maturity, basis, lambda t: (redemption - invested) / invested / t)


@worksheet("RECEIVED", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def received(
    settlement: float, maturity: float, invested: float, discount: float, basis: float = 0.0
) -> float | Fault:
    """What an investment at a discount brings at maturity."""
    if invested <= 0.0 or discount <= 0.0:
        return Fault.NUM

    def amount(t: float) -> float:
        kept = 1.0 - discount * t
        if kept <= 0.0:
            raise ValueError
        return invested / kept

    return _over(settlement, maturity, basis, amount)


@worksheet("PRICEDISC", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def pricedisc(
    settlement: float, maturity: float, discount: float, redemption: float, basis: float = 0.0
) -> float | Fault:
    """The redemption less its discount."""
    if discount <= 0.0 or redemption <= 0.0:
        return Fault.NUM
    return _over(settlement, maturity, basis, lambda t: redemption - discount * redemption * t)


@worksheet("YIELDDISC", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def yielddisc(
    settlement: float, maturity: float, price: float, redemption: float, basis: float = 0.0
) -> float | Fault:
    """The gain a year, as a part of the price."""
    if price <= 0.0 or redemption <= 0.0:
        return Fault.NUM
    return _over(settlement, maturity, basis, lambda t: (redemption - price) / price / t)


def _three(
    settlement: float, maturity: float, issue: float, basis: float
) -> tuple[float, float, float] | Fault:
    """Years from issue to maturity, from settlement to maturity, from issue to settlement."""
    dates = (issue, maturity), (settlement, maturity)
    found = [_years(start, end, basis) for start, end in dates]
    first, rest = found
    if isinstance(first, Fault) or isinstance(rest, Fault):
        return Fault.NUM
    gone = 0.0 if math.floor(issue) == math.floor(settlement) else _years(issue, settlement, basis)
    return Fault.NUM if isinstance(gone, Fault) else (first, rest, gone)


@worksheet("PRICEMAT", _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def pricemat(
    settlement: float,
    maturity: float,
    issue: float,
    rate: float,
    yearly: float,
    basis: float = 0.0,
) -> float | Fault:
    """The price per 100 face of a security that pays its interest at maturity."""
    if rate < 0.0 or yearly < 0.0:
        return Fault.NUM
    spans = _three(settlement, maturity, issue, basis)
    if isinstance(spans, Fault):
        return spans
    life, rest, gone = spans
    return guarded(
        lambda: 100.0 * (1.0 + life * rate) / (1.0 + rest * yearly) - 100.0 * gone * rate
    )


@worksheet("YIELDMAT", _N, _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def yieldmat(
    settlement: float,
    maturity: float,
    issue: float,
    rate: float,
    price: float,
    basis: float = 0.0,
) -> float | Fault:
    """The yearly yield of a security that pays its interest at maturity."""
    if rate < 0.0 or price <= 0.0:
        return Fault.NUM
    spans = _three(settlement, maturity, issue, basis)
    if isinstance(spans, Fault):
        return spans
    life, rest, gone = spans
    return guarded(lambda: ((1.0 + life * rate) / (price / 100.0 + gone * rate) - 1.0) / rest)


def _bill_days(settlement: float, maturity: float) -> int | Fault:
    """The days to a treasury bill's maturity; #NUM! beyond one year."""
    start, end = date_of(settlement), date_of(maturity)
    if isinstance(start, Fault) or isinstance(end, Fault) or start >= end:
        return Fault.NUM
    late = end.year - start.year, end.month - start.month, end.day - start.day
    return Fault.NUM if late > (1, 0, 0) else (end - start).days


@worksheet("TBILLPRICE", _N, _N, _N, gives=Gives.NUMBER, traits=CALENDAR)
def tbillprice(settlement: float, maturity: float, discount: float) -> float | Fault:
    """The price per 100 face of a treasury bill."""
    days = _bill_days(settlement, maturity)
    if isinstance(days, Fault) or discount <= 0.0:
        return Fault.NUM
    price = 100.0 * (1.0 - discount * days / 360.0)
    return price if price >= 0.0 else Fault.NUM


@worksheet("TBILLYIELD", _N, _N, _N, gives=Gives.NUMBER, traits=CALENDAR)
def tbillyield(settlement: float, maturity: float, price: float) -> float | Fault:
    """The yearly yield of a treasury bill."""
    days = _bill_days(settlement, maturity)
    if isinstance(days, Fault) or price <= 0.0:
        return Fault.NUM
    return guarded(lambda: (100.0 - price) / price * 360.0 / days)


@worksheet("TBILLEQ", _N, _N, _N, gives=Gives.NUMBER, traits=CALENDAR)
def tbilleq(settlement: float, maturity: float, discount: float) -> float | Fault:
    """The yield of a treasury bill as a bond's: 365 d / (360 - d days)."""
    days = _bill_days(settlement, maturity)
    if isinstance(days, Fault) or discount <= 0.0:
        return Fault.NUM
    if days > 182:
        raise Unsupported("the bill runs for more than half a year, where hosts differ")
    over = 360.0 - discount * days
    return 365.0 * discount / over if over > 0.0 else Fault.NUM


@worksheet("ACCRINTM", _N, _N, _N, _N, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def accrintm(
    issue: float, settlement: float, rate: float, face: float = 1000.0, basis: float = 0.0
) -> float | Fault:
    """The interest from issue to settlement of a security that pays it at maturity."""
    if rate <= 0.0 or face <= 0.0:
        return Fault.NUM
    return _over(issue, settlement, basis, lambda t: face * rate * t)


@worksheet(
    "ACCRINT",
    *(_N,) * 8,
    optional=2,
    gives=Gives.NUMBER,
    traits=CALENDAR,
)
def accrint(
    issue: float,
    first: float,
    settlement: float,
    rate: float,
    face: float,
    frequency: float,
    basis: float = 0.0,
    from_issue: float = 1.0,
) -> float | Fault:
    """The interest from issue to settlement of a security with coupons, where the sum over its
    coupon periods and the part of a year agree."""
    start, coupon, end = date_of(issue), date_of(first), date_of(settlement)
    times, way = frequency_of(frequency), basis_of(basis)
    if rate <= 0.0 or face <= 0.0 or isinstance(times, Fault) or isinstance(way, Fault):
        return Fault.NUM
    if isinstance(start, Fault) or isinstance(coupon, Fault) or isinstance(end, Fault):
        return Fault.NUM
    if start >= end:
        return Fault.NUM
    if not from_issue:
        raise Unsupported("interest counted from the first coupon is not served")
    if way is Basis.ACTUAL:
        raise Unsupported("actual/actual (basis 1) is counted differently by hosts")
    within = months_before(coupon, 12 // times) <= start and end <= coupon
    if way is Basis.THIRTY_US and not within and any(map(_late, (start, coupon, end))):
        raise Unsupported("the end of a month is counted differently by hosts in basis 0")
    return guarded(lambda: face * rate * year_part(start, end, way))


def _late(day: date) -> bool:
    return day.day >= 29 or february_end(day)
