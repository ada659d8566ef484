"""Between texts, numbers and letter codes. OpenFormula (OASIS ODF 1.3 part 4), sections 6.3, 6.20.

Codes of single bytes are those of Windows-1252, as in Excel on Windows in western countries.
"""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Decimal, localcontext

from xlroot.errors import Unsupported
from xlroot.functions.entry import Gives, Takes, worksheet
from xlroot.functions.numberformat import DIGITS, formatted, shown_text
from xlroot.texts import decimal, read_number
from xlroot.values import Fault, Grid, Operand, Value


@worksheet("CHAR", Takes.NUMBER, gives=Gives.TEXT)
def char(code: float) -> str | Fault:
    """The letter of a code from 1 to 255."""
    if not 1.0 <= code < 256.0:
        return Fault.VALUE
    try:
        return bytes([int(code)]).decode("cp1252")
    except UnicodeDecodeError:
        raise Unsupported(f"makes a letter of code {int(code)}, which stands for none") from None


@worksheet("CODE", Takes.TEXT, gives=Gives.NUMBER)
def code(text: str) -> float | Fault:
    """The code of the first letter; 63, a question mark's, for letters without one."""
    if not text:
        return Fault.VALUE
    try:
        return float(text[0].encode("cp1252")[0])
    except UnicodeEncodeError:
        return 63.0


@worksheet("UNICHAR", Takes.NUMBER, gives=Gives.TEXT)
def unichar(code: float) -> str | Fault:
    """The letter of a Unicode code point; #N/A for half of a surrogate pair."""
    if not 1.0 <= code < 0x110000:
        return Fault.VALUE
    point = int(code)
    return Fault.NA if 0xD800 <= point <= 0xDFFF else chr(point)


@worksheet("UNICODE", Takes.TEXT, gives=Gives.NUMBER)
def unicode(text: str) -> float | Fault:
    """The Unicode code point of the first letter."""
    return float(ord(text[0])) if text else Fault.VALUE


@worksheet("VALUE", Takes.SCALAR, gives=Gives.NUMBER)
def value(given: Value) -> float | Fault:
    """The number that a text reads as; a number as it is."""
    if isinstance(given, str):
        return read_number(given)
    if given is None:
        return 0.0
    return given if isinstance(given, float) else Fault.VALUE


@worksheet("NUMBERVALUE", Takes.TEXT, Takes.TEXT, Takes.TEXT, optional=2, gives=Gives.NUMBER)
def numbervalue(text: str, point: str = ".", group: str = ",") -> float | Fault:
    """The number that a text reads as with the separators stated; an empty text is 0, every
    percent sign at the end divides by 100."""
    if not point or not group:
        return Fault.VALUE
    if point[0] == group[0]:
        raise Unsupported("reads a number whose decimal and group separators are the same")
    stripped = "".join(text.split())
    whole, mark, rest = stripped.partition(point[0])
    if group[0] in rest:
        return Fault.VALUE
    plain = whole.replace(group[0], "") + ("." if mark else "") + rest
    digits = plain.rstrip("%")
    if not digits:
        return Fault.VALUE if plain else 0.0
    number = decimal(digits)
    if number is None:
        raise Unsupported(f'reads the text "{text}" as a number, which it is not plainly')
    return number / 100.0 ** (len(plain) - len(digits))


@worksheet("TEXT", Takes.SCALAR, Takes.TEXT, gives=Gives.TEXT)
def text(given: Value, code: str) -> str | Fault:
    """A number in a number format; a text that is no number as the format's last section says."""
    if isinstance(given, bool):
        return "TRUE" if given else "FALSE"
    if isinstance(given, str):
        number = read_number(given)
        if isinstance(number, Fault):
            return shown_text(given, code)
        given = number
    if isinstance(given, Fault):
        return given
    return formatted(0.0 if given is None else given, code)


@worksheet("FIXED", Takes.NUMBER, Takes.NUMBER, Takes.LOGICAL, optional=2, gives=Gives.TEXT)
def fixed(
    x: float,
    digits: float = 2.0,
    plain: bool = False,  # noqa: FBT001, FBT002
) -> str | Fault:
    """A number with digits after the point, thousands separated by commas unless told not to;
    rounded half away from zero after 15 significant digits."""
    if not -128.0 < digits < 128.0:
        return Fault.VALUE
    with localcontext(prec=DIGITS):
        step = Decimal(1).scaleb(-int(digits))
        rounded = Decimal(f"{x:.14e}").quantize(step, rounding=ROUND_HALF_UP)
        rounded = rounded.quantize(Decimal(1)) if digits < 0.0 else rounded
    if x < 0.0 and not rounded:
        raise Unsupported("shows a negative number that rounds to 0, with or without its sign")
    return f"{rounded:f}" if plain else f"{rounded:,f}"


@worksheet("T", Takes.RAW)
def t(operand: Operand) -> Operand:
    """A text as it is, a fault as it is, anything else as the empty text."""
    first = operand.rows[0][0] if isinstance(operand, Grid) else operand
    return first if isinstance(first, (str, Fault)) else ""
