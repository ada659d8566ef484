"""Cash flows that need not be level: net present value and internal rate of return.

Excel's documentation of each function; OpenFormula section 6.12. Texts, logicals and blanks in a
range do not count and take no period; dated flows must be numbers throughout. Dates are cut to
whole days, and a year is 365 days.
"""

from __future__ import annotations

import math

from xlroot.errors import Unsupported
from xlroot.functions._hunting import rate_near
from xlroot.functions.entry import Gives, Takes, Trait, worksheet
from xlroot.functions.totals import added, finite, numbers
from xlroot.kinds.real import FAULT_OF, power
from xlroot.methods.method import Sample
from xlroot.values import Fault, Grid, Operand

_N = Takes.NUMBER
DAYS_A_YEAR = 365.0


@worksheet("NPV", _N, Takes.RAW, repeats=1, gives=Gives.NUMBER)
def npv(rate: float, *operands: Operand) -> float | Fault:
    """The flows' worth one period before the first; #DIV/0! at a rate of -1."""
    if any(each is None or isinstance(each, (str, bool)) for each in operands):
        raise Unsupported("an amount is written as text, a logical or nothing; hosts differ there")
    flows = numbers(operands)
    if isinstance(flows, Fault):
        return flows
    if rate == -1.0:
        return Fault.DIV0
    total = 0.0
    for flow in reversed(flows):
        total = (total + flow) / (1.0 + rate)
    return finite(total)


def _changes_sign(flows: list[float]) -> bool:
    return min(flows, default=0.0) < 0.0 < max(flows, default=0.0)


@worksheet("IRR", Takes.RAW, _N, optional=1, gives=Gives.NUMBER)
def irr(operand: Operand, guess: float = 0.1) -> float | Fault:
    """The rate per period near the guess at which the flows' present value is zero."""
    flows = numbers((operand,))
    if isinstance(flows, Fault):
        return flows
    if not _changes_sign(flows):
        return Fault.NUM

    def present_value(rate: float) -> Sample:
        factor = 1.0 / (1.0 + rate)
        value = slope = 0.0
        for flow in reversed(flows):
            slope = slope * factor + value
            value = value * factor + flow
        if not (math.isfinite(value) and math.isfinite(slope)):
            raise OverflowError
        return Sample(value, -slope * factor * factor)

    return rate_near(present_value, guess)


@worksheet("MIRR", Takes.RAW, _N, _N, gives=Gives.NUMBER)
def mirr(operand: Operand, finance: float, reinvest: float) -> float | Fault:
    """The growth per period of income reinvested to the end over outlays financed from the
    start; #DIV/0! where one of the two is missing."""
    flows = numbers((operand,))
    if isinstance(flows, Fault):
        return flows
    if not _changes_sign(flows):
        return Fault.DIV0
    if finance <= -1.0 or reinvest <= -1.0:
        return Fault.NUM
    income = outlay = 0.0
    for flow in flows:
        income = income * (1.0 + reinvest) + max(flow, 0.0)
    for flow in reversed(flows):
        outlay = outlay / (1.0 + finance) + max(-flow, 0.0)
    try:
        return finite(power(income / outlay, 1.0 / (len(flows) - 1)) - 1.0)
    except (ArithmeticError, ValueError) as error:
        return FAULT_OF[type(error)]


def _dated(amounts: Operand, dates: Operand) -> list[tuple[float, float]] | Fault:
    """Amounts with the years since the first date; #NUM! for unequal counts or a date before
    the first, #VALUE! for texts."""
    columns: list[list[float]] = []
    for operand in (amounts, dates):
        column: list[float] = []
        for value in operand.flat() if isinstance(operand, Grid) else (operand,):
            if isinstance(value, Fault):
                return value
            if value is None or isinstance(value, bool):
                raise Unsupported("an amount or date is blank or a logical; hosts differ there")
            if isinstance(value, str):
                return Fault.VALUE
            column.append(value)
        columns.append(column)
    flows, days = columns[0], [float(math.trunc(day)) for day in columns[1]]
    if len(flows) != len(days) or min(days) < days[0] or days[0] < 0.0:
        return Fault.NUM
    return [(flow, (day - days[0]) / DAYS_A_YEAR) for flow, day in zip(flows, days, strict=True)]


CALENDAR = frozenset({Trait.CALENDAR})


@worksheet("XNPV", _N, Takes.RAW, Takes.RAW, gives=Gives.NUMBER, traits=CALENDAR)
def xnpv(rate: float, amounts: Operand, dates: Operand) -> float | Fault:
    """The dated flows' worth at the first date."""
    flows = _dated(amounts, dates)
    if isinstance(flows, Fault):
        return flows
    if rate <= -1.0:
        return Fault.NUM
    if rate < 0.0:
        raise Unsupported("the rate is below 0, where one host computes and another gives #NUM!")
    force = math.log1p(rate)
    return finite(added(flow * math.exp(-years * force) for flow, years in flows))


@worksheet("XIRR", Takes.RAW, Takes.RAW, _N, optional=1, gives=Gives.NUMBER, traits=CALENDAR)
def xirr(amounts: Operand, dates: Operand, guess: float = 0.1) -> float | Fault:
    """The yearly rate near the guess at which the dated flows' worth is zero."""
    flows = _dated(amounts, dates)
    if isinstance(flows, Fault):
        return flows
    if not _changes_sign([flow for flow, _ in flows]):
        return Fault.NUM
    if flows[0][0] == 0.0:
        raise Unsupported("the first amount is 0, for which hosts give different rates")

    def present_value(rate: float) -> Sample:
        force = math.log1p(rate)
        value = slope = 0.0
        for flow, years in flows:
            worth = flow * math.exp(-years * force)
            value += worth
            slope -= years * worth
        return Sample(value, slope / (1.0 + rate))

    return rate_near(present_value, guess)
