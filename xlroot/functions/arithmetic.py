"""Powers, logarithms, whole numbers and combinations.

OpenFormula (OASIS ODF 1.3 part 4), section 6.16; where Excel is documented to differ, Excel.
"""

from __future__ import annotations

import math
from collections.abc import Iterator

from xlroot.functions.entry import Gives, Takes, by_form, worksheet
from xlroot.kinds.real import modulo
from xlroot.values import Fault, Grid, Operand, to_number

SQRT = by_form("SQRT", "sqrt({0})")
SQRTPI = by_form("SQRTPI", f"sqrt({{0}}*{math.pi!r})")
POWER = by_form("POWER", "power({0}, {1})")
EXP = by_form("EXP", "exp({0})")
LN = by_form("LN", "ln({0})")
LOG10 = by_form("LOG10", "log10({0})")
ABS = by_form("ABS", "absolute({0})")
SIGN = by_form("SIGN", "sign({0})")
GAMMA = by_form("GAMMA", "gamma({0})")

LARGEST_WHOLE = 2.0**53
"""Whole numbers above are not all representable; functions of whole numbers give #NUM! there."""


@worksheet("LOG", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def log(x: float, base: float = 10.0) -> float | Fault:
    """The logarithm of x to a base."""
    if x <= 0.0 or base <= 0.0:
        return Fault.NUM
    if base == 1.0:
        return Fault.DIV0
    if base == 10.0:
        return math.log10(x)
    return math.log2(x) if base == 2.0 else math.log(x) / math.log(base)


@worksheet(("GAMMALN", "GAMMALN.PRECISE"), Takes.NUMBER, gives=Gives.NUMBER)
def gammaln(x: float) -> float | Fault:
    """The logarithm of the gamma function, for positive arguments."""
    return math.lgamma(x) if x > 0.0 else Fault.NUM


@worksheet("MOD", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def mod(x: float, divisor: float) -> float | Fault:
    """The rest of a division, with the sign of the divisor."""
    return Fault.DIV0 if divisor == 0.0 else modulo(x, divisor)


@worksheet("QUOTIENT", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def quotient(x: float, divisor: float) -> float | Fault:
    """The whole part of a division, cut towards zero."""
    if divisor == 0.0:
        return Fault.DIV0
    return float(math.trunc(x / divisor)) + 0.0


def _wholes(operands: tuple[Operand, ...]) -> Iterator[int | Fault]:
    for operand in operands:
        for value in operand.flat() if isinstance(operand, Grid) else (operand,):
            if isinstance(operand, Grid) and not isinstance(value, (float, Fault)):
                continue
            number = to_number(value)
            if isinstance(number, Fault):
                yield number
            elif number < 0.0 or number >= LARGEST_WHOLE:
                yield Fault.NUM
            else:
                yield math.floor(number)


@worksheet("GCD", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def gcd(*operands: Operand) -> float | Fault:
    """The greatest common divisor of whole numbers."""
    result = 0
    for whole in _wholes(operands):
        if isinstance(whole, Fault):
            return whole
        result = math.gcd(result, whole)
    return float(result)


@worksheet("LCM", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def lcm(*operands: Operand) -> float | Fault:
    """The least common multiple of whole numbers."""
    result = 1
    for whole in _wholes(operands):
        if isinstance(whole, Fault):
            return whole
        result = math.lcm(result, whole)
    return float(result) if result < LARGEST_WHOLE else Fault.NUM


@worksheet("FACT", Takes.NUMBER, gives=Gives.NUMBER)
def fact(n: float) -> float | Fault:
    """n! of the whole part; #NUM! below 0 and above 170."""
    return float(math.factorial(int(n))) if 0.0 <= n < 171.0 else Fault.NUM


@worksheet("FACTDOUBLE", Takes.NUMBER, gives=Gives.NUMBER)
def factdouble(n: float) -> float | Fault:
    """n!! of the whole part: the product of every second whole number."""
    if not 0.0 <= n < 301.0:
        return Fault.NUM
    product = math.prod(range(int(n), 0, -2))
    return float(product) if product < 1 << 1024 else Fault.NUM


def _chosen(n: float, k: float, count: str) -> float | Fault:
    if not (0.0 <= k < LARGEST_WHOLE and 0.0 <= n < LARGEST_WHOLE):
        return Fault.NUM
    whole, part = int(n), int(k)
    if part > whole or min(part, whole - part) > 100_000:
        return Fault.NUM
    found = math.comb(whole, part) if count == "sets" else math.perm(whole, part)
    return float(found) if found < 1 << 1024 else Fault.NUM


@worksheet("COMBIN", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def combin(n: float, k: float) -> float | Fault:
    """The number of ways to choose k of n."""
    return _chosen(n, k, "sets")


@worksheet("COMBINA", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def combina(n: float, k: float) -> float | Fault:
    """The number of ways to choose k of n with repetition."""
    whole, part = math.trunc(n), math.trunc(k)
    if whole < 0 or part < 0 or (whole == 0 and part > 0):
        return Fault.NUM
    return 1.0 if part == 0 else _chosen(float(whole + part - 1), float(part), "sets")


@worksheet("PERMUT", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def permut(n: float, k: float) -> float | Fault:
    """The number of ordered choices of k of n."""
    return _chosen(n, k, "orders")


@worksheet("PERMUTATIONA", Takes.NUMBER, Takes.NUMBER, gives=Gives.NUMBER)
def permutationa(n: float, k: float) -> float | Fault:
    """The number of ordered choices of k of n with repetition."""
    whole, part = math.trunc(n), math.trunc(k)
    if whole < 0 or part < 0 or part > 2000:
        return Fault.NUM
    found = whole**part
    return float(found) if found < 1 << 1024 else Fault.NUM


@worksheet("MULTINOMIAL", Takes.RAW, repeats=1, gives=Gives.NUMBER)
def multinomial(*operands: Operand) -> float | Fault:
    """(a + b + …)!/(a! b! …) of whole numbers."""
    total, result = 0, 1
    for whole in _wholes(operands):
        if isinstance(whole, Fault):
            return whole
        if whole > 10_000:
            return Fault.NUM
        total += whole
        result *= math.comb(total, whole)
    return float(result) if result < 1 << 1024 else Fault.NUM


@worksheet("DELTA", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def delta(a: float, b: float = 0.0) -> float:
    """1 where both numbers are equal, otherwise 0."""
    return 1.0 if a == b else 0.0


@worksheet("GESTEP", Takes.NUMBER, Takes.NUMBER, optional=1, gives=Gives.NUMBER)
def gestep(x: float, step: float = 0.0) -> float:
    """1 from the step on, otherwise 0."""
    return 1.0 if x >= step else 0.0
