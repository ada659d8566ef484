"""Numbers as texts and back: TEXT, FIXED, VALUE, NUMBERVALUE, letter codes, reading of texts.

Published values: Excel's documentation of each function, from memory; number formats also as
LibreOffice 7.4 shows them where marked.
"""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.functions.test_lookup import call, column
from xlroot.errors import Unsupported
from xlroot.texts import general_format, read_date, read_number, read_time
from xlroot.values import Fault

JULY = 41_102.0 + 0.5625
"""12 July 2012, 13:30."""


@pytest.mark.parametrize(
    ("number", "code", "shown"),
    [
        (1234.567, "$#,##0.00", "$1,234.57"),
        (0.285, "0.0%", "28.5%"),
        (12_200_000.0, "0.00E+00", "1.22E+07"),
        (1234.0, "0000000", "0001234"),
        (12345.6789, "#,##0.00", "12,345.68"),
        (1_234_567.0, "#,##0", "1,234,567"),
        (5.0, "0,000", "0,005"),
        (2.675, "0.00", "2.68"),
        (1.005, "0.00", "1.01"),
        (-2.5, "0", "-3"),
        (0.5, "#.##", ".5"),
        (5.0, "0.##", "5."),
        (12345.678, "#,##0.0,", "12.3"),
        (12_345_678.0, "0.0,,", "12.3"),
        (0.00012, "0.00E-00", "1.20E-04"),
        (9.999e9, "0.0E+0", "1.0E+10"),
        (0.0, "0.00E+00", "0.00E+00"),
        (-5.0, "0.0;(0.0)", "(5.0)"),
        (0.0, "0.0;-0.0;nil", None),
        (0.0, '0.0;-0.0;"nil"', "nil"),
        (-0.001, "0.00;(0.00)", "(0.00)"),
        (3.0, '0" good things"', "3 good things"),
        (3.0, "\\x0", "x3"),
        (7.25, "General", "7.25"),
        (1e25, "0.0000", "10000000000000000000000000.0000"),
        (0.0, "", ""),
        (JULY, "yyyy-mm-dd", "2012-07-12"),
        (JULY, "d mmm yy", "12 Jul 12"),
        (JULY, "dddd, mmmm d", "Thursday, July 12"),
        (JULY, "mm/dd/yy", "07/12/12"),
        (JULY, "h:mm AM/PM", "1:30 PM"),
        (JULY, "hh:mm:ss", "13:30:00"),
        (JULY, "yyyy-mm-dd hh:mm", "2012-07-12 13:30"),
        (0.25 + 1.5 / 86400.0, "h:mm:ss.00", "6:00:01.50"),
        (1.5 / 86400.0, "ss.0", "01.5"),
        (-1.0, "yyyy", Fault.VALUE),
        (3e6, "yyyy", Fault.VALUE),
    ],
)
def test_text(number: float, code: str, shown: object) -> None:
    if shown is None:
        with pytest.raises(Unsupported):
            call("TEXT", number, code)
    else:
        assert call("TEXT", number, code) == shown


@pytest.mark.parametrize(
    ("number", "code"),
    [
        (1.0, "[Red]0"),
        (1.0, "[h]:mm"),
        (1.5, "# ?/?"),
        (12345.0, "##0.0E+0"),
        (5551234.0, "000-0000"),
        (1.0, "_(0_)"),
        (1.0, "0*-"),
        (-0.001, "0.00"),
        (-5.0, ""),
        (1.0, "Pump"),
        (1.0, "0\x00"),
        (1.0, "yyyy 0"),
        (40.0, "yyyy-mm-dd"),
        (0.0, "mmm"),
        (0.999999, "hh:mm"),
        (1.0, "hh A/P"),
        (1.0, '"open'),
        (1.0, "0;0;0;@;0"),
    ],
)
def test_formats_that_are_refused(number: float, code: str) -> None:
    with pytest.raises(Unsupported):
        call("TEXT", number, code)


def test_text_of_texts_and_logicals() -> None:
    assert call("TEXT", "5", "0.00") == "5.00"
    assert call("TEXT", "valve", "0.00") == "valve"
    assert call("TEXT", "valve", '0;0;0;"tag "@') == "tag valve"
    assert call("TEXT", True, "0") == "TRUE"
    assert call("TEXT", None, "0.0") == "0.0"


@pytest.mark.parametrize(
    ("arguments", "shown"),
    [
        ((1234.567, 1.0), "1,234.6"),
        ((1234.567, -1.0), "1,230"),
        ((-1234.567, -1.0, True), "-1230"),
        ((44.332,), "44.33"),
        ((1.005,), "1.01"),
        ((0.5, 0.0), "1"),
        ((1e20, 3.0, True), "100000000000000000000.000"),
        ((1.0, 127.0), "1." + "0" * 127),
        ((1.0, 128.0), Fault.VALUE),
        ((49.0, -2.0), "0"),
        ((50.0, -2.0), "100"),
    ],
)
def test_fixed(arguments: tuple[Any, ...], shown: object) -> None:
    assert call("FIXED", *arguments) == shown


def test_a_negative_number_that_rounds_to_0_is_refused() -> None:
    with pytest.raises(Unsupported, match="negative"):
        call("FIXED", -0.001)


@pytest.mark.parametrize(
    ("arguments", "number"),
    [
        (("2.500,27", ",", "."), 2500.27),
        (("3.5%",), 0.035),
        (("3.5%%",), 0.00035),
        (("",), 0.0),
        ((" 3 000 ",), 3000.0),
        (("1.2.3", ".", ","), None),
        (("1,2.3,4",), Fault.VALUE),
        (("5", "", ","), Fault.VALUE),
        (("%",), Fault.VALUE),
    ],
)
def test_numbervalue(arguments: tuple[str, ...], number: object) -> None:
    if number is None:
        with pytest.raises(Unsupported):
            call("NUMBERVALUE", *arguments)
    else:
        assert call("NUMBERVALUE", *arguments) == number


def test_value() -> None:
    assert call("VALUE", "16:48:00") == 0.7
    assert call("VALUE", "12:00") == 0.5
    assert call("VALUE", 3.0) == 3.0
    assert call("VALUE", None) == 0.0
    assert call("VALUE", True) is Fault.VALUE


@pytest.mark.parametrize(
    ("name", "argument", "result"),
    [
        ("CHAR", 65.0, "A"),
        ("CHAR", 33.9, "!"),
        ("CHAR", 128.0, "€"),
        ("CHAR", 0.0, Fault.VALUE),
        ("CHAR", 256.0, Fault.VALUE),
        ("CODE", "Alphabet", 65.0),
        ("CODE", "€", 128.0),
        ("CODE", "Ω", 63.0),
        ("CODE", "", Fault.VALUE),
        ("UNICHAR", 937.0, "Ω"),
        ("UNICHAR", 0.5, Fault.VALUE),
        ("UNICHAR", 55_296.0, Fault.NA),
        ("UNICHAR", 1_114_112.0, Fault.VALUE),
        ("UNICODE", "Ω", 937.0),
        ("UNICODE", "", Fault.VALUE),
        ("T", column("x", 1.0), "x"),
        ("T", column(1.0), ""),
        ("T", Fault.NA, Fault.NA),
    ],
)
def test_letters(name: str, argument: Any, result: object) -> None:
    assert call(name, argument) == result


def test_a_code_without_a_letter_is_refused() -> None:
    with pytest.raises(Unsupported):
        call("CHAR", 129.0)


@given(st.integers(1, 255).map(float))
def test_code_undoes_char(code: float) -> None:
    try:
        letter = call("CHAR", code)
    except Unsupported:
        return
    assert call("CODE", letter) == code


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("7", 7.0),
        (" -1.5e3 ", -1500.0),
        (".5", 0.5),
        ("5.", 5.0),
        ("5%", 0.05),
        ("5 %", 0.05),
        ("1,234.5", 1234.5),
        ("-1,234,567", -1_234_567.0),
        ("1 1/2", 1.5),
        ("-2 3/4", -2.75),
        ("1:30", 0.0625),
        ("1:30 pm", 0.5625),
        ("12:00 AM", 0.0),
        ("25:00", 25.0 / 24.0),
        ("13:45:30.5", 49_530.5 / 86_400.0),
        ("2005-01-31", 38_383.0),
        ("2005-1-3 13:00", 38_355.0 + 13.0 / 24.0),
        ("2005-01-03T13:00", 38_355.0 + 13.0 / 24.0),
        ("12 Mar 2005", 38_423.0),
        ("12-March-2005", 38_423.0),
        ("Oct 29, 2006", 39_019.0),
        ("October 29, 2006 6:00", 39_019.25),
        ("1900-01-01", 1.0),
        ("1900-02-28", 59.0),
        ("1900-03-01", 61.0),
    ],
)
def test_texts_that_read_as_numbers(text: str, number: float) -> None:
    """Serials: DATE(2005,1,31) = 38383 and so on, Python's calendar from 1899-12-30."""
    assert read_number(text) == pytest.approx(number, rel=1e-15)


@pytest.mark.parametrize(
    "text",
    [
        "",
        " ",
        "pump",
        "E-101",
        "P-3",
        "5 mm",
        "TRUE",
        "nan",
        "inf",
        "1_000",
        "1e999",
        "2005-02-30",
        "Marble 5, 2005",
        "3/32/2006",
        "2/29/2006",
        "1899-12-31",
        "٣",
        "%",
        "-",
        "1e5e",
        "#REF!",
    ],
)
def test_texts_that_are_no_numbers(text: str) -> None:
    assert read_number(text) is Fault.VALUE


@pytest.mark.parametrize(
    "text",
    [
        "1/2/2005",
        "5/21/06",
        "1/2",
        "31.12.2005",
        "1,5",
        "1.234,5",
        "1,23",
        "$5",
        "5 €",
        "(5)",
        "5-",
        "3-4",
        "1 000",
        "1\xa0000",
        "12-Mar-05",
        "12 March",
        "March 2005",
        "1:75",
        "1:45PM",
        "0:30 AM",
        "5\t",
        "50%%",
        "1/2/2005 10:00",
        "555-1234",
        "Sept 5, 2005",
        "1 2/0",
    ],
)
def test_texts_that_readers_take_differently(text: str) -> None:
    with pytest.raises(Unsupported, match="reads the text"):
        read_number(text)


def test_dates_and_times_apart() -> None:
    assert read_date("2004-12-25 12:00") == 38_346.5
    assert read_date("38346") is Fault.VALUE
    assert read_time("0.5") is Fault.VALUE
    assert read_time("2004-12-25 06:00") == 0.25
    assert read_time("25:00") == pytest.approx(1.0 / 24.0, rel=1e-14)


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (0.1 + 0.2, "0.3"),
        (1.0 / 3.0, "0.333333333333333"),
        (-0.0, "0"),
        (123_456_789_012_345.0, "123456789012345"),
        (1e20, "1E+20"),
        (1.5e300, "1.5E+300"),
        (1e-10, "1E-10"),
    ],
)
def test_general_format(number: float, text: str) -> None:
    assert general_format(number) == text


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_the_general_format_reads_back(number: float) -> None:
    if 0.0 < abs(number) < 1e-307 or abs(number) > 1.7976931348623e308:
        return
    assert read_number(general_format(number)) == pytest.approx(number, rel=1e-14)


@given(st.floats(-1e12, 1e12), st.integers(0, 6))
def test_text_rounds_to_the_places_asked_for(number: float, places: int) -> None:
    code = "#,##0" + ("." + "0" * places if places else "")
    try:
        shown = call("TEXT", number, code)
    except Unsupported:
        assert abs(number) <= 0.5 * 10.0**-places
        return
    assert isinstance(shown, str)
    read = float(shown.replace(",", ""))
    assert abs(read - number) <= 0.5001 * 10.0**-places + 1e-14 * abs(number)
    assert len(shown.partition(".")[2]) == places
