"""Text functions. Published values: Excel's documentation of each function, from memory."""

from __future__ import annotations

from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.functions.test_lookup import call
from xlroot.cells import Block
from xlroot.errors import Unsupported
from xlroot.values import Fault, Grid

LETTERS = Grid((("a", None), (1.5, True)), Block("S", 1, 1, 2, 2))


@pytest.mark.parametrize(
    ("name", "arguments", "expected"),
    [
        ("LEFT", ("Sale Price", 4.0), "Sale"),
        ("LEFT", ("Sweden",), "S"),
        ("LEFT", ("abc", -1.0), Fault.VALUE),
        ("RIGHT", ("Sale Price", 5.0), "Price"),
        ("RIGHT", ("Stock Number",), "r"),
        ("RIGHT", ("abc", 0.0), ""),
        ("MID", ("Fluid Flow", 1.0, 5.0), "Fluid"),
        ("MID", ("Fluid Flow", 7.0, 20.0), "Flow"),
        ("MID", ("Fluid Flow", 20.0, 5.0), ""),
        ("MID", ("abc", 0.9, 1.0), Fault.VALUE),
        ("LEN", ("Phoenix, AZ",), 11.0),
        ("LEN", ("",), 0.0),
        ("REPLACE", ("abcdefghijk", 6.0, 5.0, "*"), "abcde*k"),
        ("REPLACE", ("2009", 3.0, 2.0, "10"), "2010"),
        ("REPLACE", ("abc", 10.0, 1.0, "d"), "abcd"),
        ("SUBSTITUTE", ("Sales Data", "Sales", "Cost"), "Cost Data"),
        ("SUBSTITUTE", ("Quarter 1, 2008", "1", "2", 1.0), "Quarter 2, 2008"),
        ("SUBSTITUTE", ("Quarter 1, 2011", "1", "2", 3.0), "Quarter 1, 2012"),
        ("SUBSTITUTE", ("aaa", "aa", "b", 2.0), "aaa"),
        ("SUBSTITUTE", ("aaaa", "aa", "b", 2.0), "aab"),
        ("SUBSTITUTE", ("Aa", "a", "b"), "Ab"),
        ("SUBSTITUTE", ("abc", "a", "b", 0.5), Fault.VALUE),
        ("FIND", ("M", "Miriam McGovern"), 1.0),
        ("FIND", ("m", "Miriam McGovern"), 6.0),
        ("FIND", ("M", "Miriam McGovern", 3.0), 8.0),
        ("FIND", ("?", "abc"), Fault.VALUE),
        ("FIND", ("", "abc"), 1.0),
        ("SEARCH", ("e", "Statements", 6.0), 7.0),
        ("SEARCH", ("margin", "Profit Margin"), 8.0),
        ("SEARCH", ("a?c", "xxABC"), 3.0),
        ("SEARCH", ("~?", "what?"), 5.0),
        ("SEARCH", ("b", "abc", 0.0), Fault.VALUE),
        ("EXACT", ("word", "Word"), False),
        ("UPPER", ("total",), "TOTAL"),
        ("UPPER", ("maß",), "MAß"),
        ("LOWER", ("E. E. Cummings",), "e. e. cummings"),
        ("PROPER", ("this is a TITLE",), "This Is A Title"),
        ("PROPER", ("2-way street",), "2-Way Street"),
        ("PROPER", ("76BudGet",), "76Budget"),
        ("TRIM", (" First Quarter  Earnings ",), "First Quarter Earnings"),
        ("CLEAN", ("\tMonthly report\n",), "Monthly report"),
        ("REPT", ("*-", 3.0), "*-*-*-"),
        ("REPT", ("-", 32_767.9), "-" * 32_767),
        ("REPT", ("-", 32_768.0), Fault.VALUE),
        ("REPT", ("", 1e300), ""),
        ("REPT", ("ab", -0.5), Fault.VALUE),
        ("CONCATENATE", ("Hi ", "there"), "Hi there"),
        ("CONCATENATE", ("x" * 20_000, "x" * 20_000), Fault.VALUE),
        ("HYPERLINK", ("report.pdf",), "report.pdf"),
        ("HYPERLINK", ("report.pdf", 12.0), 12.0),
    ],
)
def test_values(name: str, arguments: tuple[Any, ...], expected: object) -> None:
    assert call(name, *arguments) == expected


def test_joins_over_ranges() -> None:
    assert call("CONCAT", LETTERS, "-", 2.0) == "a1.5TRUE-2"
    assert call("TEXTJOIN", ", ", True, LETTERS, "", "z") == "a, 1.5, TRUE, z"
    assert call("TEXTJOIN", ", ", False, LETTERS, "z") == "a, , 1.5, TRUE, z"
    assert call("CONCAT", "a", Fault.DIV0) is Fault.DIV0
    whole = Grid((("a",), ("b",)), Block("S", 1, 1, 1_048_576, 1))
    assert call("CONCAT", whole) == "ab"
    with pytest.raises(Unsupported, match="beyond the used"):
        call("TEXTJOIN", ",", False, whole)


@pytest.mark.parametrize("name", ["FIND", "SEARCH"])
def test_the_empty_text_at_the_end_is_refused(name: str) -> None:
    with pytest.raises(Unsupported, match="end"):
        call(name, "", "abc", 4.0)
    assert call(name, "", "abc", 5.0) is Fault.VALUE


def test_letters_that_hosts_count_differently_are_refused() -> None:
    for name, more in (("LEN", ()), ("LEFT", (1.0,)), ("MID", (1.0, 1.0)), ("RIGHT", (1.0,))):
        with pytest.raises(Unsupported, match="letters"):
            call(name, "\N{GRINNING FACE}", *more)


TEXTS = st.text(st.characters(max_codepoint=0xFF), max_size=30)


@given(TEXTS, st.integers(0, 40).map(float))
def test_left_and_the_rest_are_the_text(text: str, count: float) -> None:
    head, tail = call("LEFT", text, count), call("MID", text, count + 1.0, 100.0)
    assert isinstance(head, str)
    assert isinstance(tail, str)
    assert head + tail == text
    assert call("RIGHT", text, float(len(text)) - len(head)) == tail


@given(TEXTS, st.text("ab", min_size=1, max_size=2))
def test_find_finds_what_left_cuts(text: str, part: str) -> None:
    place = call("FIND", part, text)
    if isinstance(place, float):
        assert call("MID", text, place, float(len(part))) == part
    else:
        assert part not in text
