"""One solve from question to record: baseline, refusals, labels, fingerprint."""

from __future__ import annotations

import pytest

import xlroot
from xlroot.errors import AddressError, MethodError, QuestionError
from xlroot.hosts.memory import Content, book_of
from xlroot.labels import label_of, unit_of
from xlroot.values import Fault

PIPE: dict[str, Content] = {
    "Pipe!A1": "Reynolds number",
    "Pipe!B1": 4e5,
    "Pipe!A2": "Relative roughness [-]",
    "Pipe!B2": 5e-4,
    "Pipe!A3": "Friction factor:",
    "Pipe!B3": 0.02,
    "Pipe!C3": "-",
    "Pipe!A4": "Left side",
    "Pipe!B4": "=1/SQRT(B3)",
    "Pipe!A5": "Right side",
    "Pipe!B5": "=-2*LOG10(B2/3.7+2.51/(B1*SQRT(B3)))",
    "Pipe!A6": "Residual",
    "Pipe!B6": "=B4-B5",
    "Pipe!D9": "=B6*100",
}
SAVED: dict[str, Content] = {
    "Pipe!B4": 7.0710678118654755,
    "Pipe!B5": 7.475236144465157,
    "Pipe!B6": -0.4041683325996818,
}


def solve(contents: dict[str, Content], **others: object) -> xlroot.Record:
    saved = others.pop("saved", None)
    asked: dict[str, object] = {"residual": "Pipe!B6", "unknown": "Pipe!B3"}
    asked |= {"low": 0.005, "high": 0.1, **others}
    return xlroot.solve(book_of(contents, saved=saved), **asked)  # type: ignore[arg-type]


def saved_values(contents: dict[str, Content]) -> dict[str, Content]:
    book = book_of(contents)
    found = {}
    for address, content in contents.items():
        if isinstance(content, str) and content.startswith("="):
            value = xlroot.evaluate(book, address)
            assert not isinstance(value, Fault)
            found[address] = value
    return found


def test_a_record_says_what_was_sought_and_found() -> None:
    record = solve(PIPE, saved=saved_values(PIPE))
    assert record.verdict.status is xlroot.Status.BRACKETED
    assert record.root == pytest.approx(0.017875232946470816, rel=1e-12)
    assert record.statement == (
        "Find Friction factor (Pipe!B3) between 0.005 and 0.1 so that Residual (Pipe!B6) "
        "becomes zero."
    )
    assert [line.cell.address for line in record.steps] == ["B4", "B5", "B6"]
    assert [line.cell.address for line in record.held] == ["B2", "B1"]
    assert record.present == 0.02
    assert record.warnings == ()
    assert record.slope_at_root == pytest.approx(-215.48, rel=1e-4)
    assert record.second is not None
    assert record.second.method == "bisection"
    assert abs(record.second.difference or 0.0) <= record.tolerance


def test_a_saved_value_that_does_not_follow_is_refused_by_cell() -> None:
    stale = saved_values(PIPE) | {"Pipe!B5": 7.4}
    record = solve(PIPE, saved=stale)
    assert record.root is None
    assert record.verdict.cell == "Pipe!B5"
    assert "the workbook holds 7.4" in record.verdict.reason
    assert "recalculate" in record.verdict.reason
    again = solve(PIPE, saved=stale, recalculate=True)
    assert again.root == pytest.approx(0.017875232946470816, rel=1e-12)
    assert any("computed by xlroot" in warning for warning in again.warnings)


def test_differences_below_a_host_s_rounding_are_no_refusal() -> None:
    # 15 digits saved; and a difference of nearly equal terms snapped to zero.
    rounded = {a: float(f"{v:.14e}") for a, v in saved_values(PIPE).items()}  # type: ignore[str-format]
    assert solve(PIPE, saved=rounded).root is not None
    near = {**PIPE, "Pipe!B3": 0.017875232946470816}
    snapped = saved_values(near) | {"Pipe!B6": 0.0, "Pipe!D9": 0.0}
    assert solve(near, saved=snapped).root is not None


def test_a_held_formula_keeps_the_host_s_value() -> None:
    contents = {**PIPE, "Pipe!B1": "=2*200000", "Pipe!B2": 5e-4}
    held = saved_values(contents)
    assert solve(contents, saved=held).root == pytest.approx(0.017875232946470816, rel=1e-12)


@pytest.mark.parametrize(
    ("others", "error", "words"),
    [
        ({"unknown": "Pipe!B4"}, QuestionError, "holds a formula"),
        ({"residual": "Pipe!B1"}, QuestionError, "holds no formula"),
        ({"low": 0.1, "high": 0.005}, QuestionError, "not below"),
        ({"tolerance": 1e-30}, QuestionError, "finer than"),
        ({"tolerance": -1.0}, QuestionError, "finer than"),
        ({"low": float("nan")}, QuestionError, "finite"),
        ({"unknown": "Pipe!A1"}, QuestionError, "holds no number"),
        ({"method": "bisecton"}, MethodError, "did you mean bisection"),
        ({"residual": "Pope!B6"}, AddressError, "did you mean Pipe"),
        ({"unknown": "Pipe!B0"}, AddressError, "no cell address"),
        ({"safe_side": "up"}, QuestionError, "positive"),
        ({"start": 3.0}, QuestionError, "outside the limits"),
    ],
)
def test_what_cannot_be_asked_raises_in_words(
    others: dict[str, object], error: type[Exception], words: str
) -> None:
    with pytest.raises(error, match=words):
        solve(PIPE, **others)


@pytest.mark.parametrize(
    ("change", "others", "words"),
    [
        ({}, {"low": 0.05, "high": 0.1}, "same sign at both ends of the bracket: -3.1"),
        ({"Pipe!B6": "=1/(B3-0.02)"}, {}, "pole"),
        ({"Pipe!B6": "=IF(B3<0.03,-1,1)"}, {}, "jumps over zero"),
        ({"Pipe!B6": "=LN(B3-0.005)"}, {}, "at the low end of the bracket"),
        ({"Pipe!B6": "=IF(B3>0.05,LN(-1),B3-0.07)"}, {}, "#NUM!"),
        ({"Pipe!B6": "=B3+NOW()"}, {}, "NOW"),
        ({"Pipe!B6": '=IF(B3>1,1,"text")'}, {}, "#VALUE!"),
        ({}, {"method": "fixed point"}, "left the limits"),
        ({"Pipe!B6": "=(B3-0.05)*30-B3"}, {"method": "fixed point"}, "left the limits"),
    ],
)
def test_what_cannot_be_answered_is_a_refused_record(
    change: dict[str, Content], others: dict[str, object], words: str
) -> None:
    record = solve({**PIPE, **change}, **others)
    assert record.root is None
    assert record.refused
    assert words in record.verdict.reason


def test_a_touching_root_is_only_converged() -> None:
    record = solve({**PIPE, "Pipe!B6": "=(B3-0.04)^2"}, method="newton")
    assert record.verdict.status in (xlroot.Status.CONVERGED, xlroot.Status.REFUSED)
    if record.root is not None:
        assert record.root == pytest.approx(0.04, abs=1e-6)


def test_labels_and_units_are_those_beside_the_cells() -> None:
    book = book_of(
        {
            "A1": "Depth [m]",
            "B1": 2,
            "A2": "Load",
            "B2": 3,
            "C2": "kN/m",
            "A3": "a",
            "B3": "Long label",
            "C3": 5,
            "E5": "Head",
            "E6": 1,
            "E7": 2,
            "G5": "kJ/(kg K)",
            "G6": 4.2,
            "H5": "Flow (m3/s)",
            "H6": 1,
            "A9": "x",
            "B9": 1,
            "C9": "y",
            "D9": 2,
        }
    )
    assert [label_of(book, book.cell(a)) for a in ("B1", "B2", "C3", "E7")] == [
        "Depth",
        "Load",
        "Long label",
        "Head",
    ]
    assert unit_of(book, book.cell("B1")) == "m"
    assert unit_of(book, book.cell("B2")) == "kN/m"
    assert unit_of(book, book.cell("B9")) == ""
    assert (label_of(book, book.cell("G6")), unit_of(book, book.cell("G6"))) == ("kJ/(kg K)", "")
    assert (label_of(book, book.cell("H6")), unit_of(book, book.cell("H6"))) == ("Flow", "m3/s")


def moved(contents: dict[str, Content]) -> dict[str, Content]:
    """The same sheet three rows down, under another name."""
    import re

    def shift(text: str) -> str:
        return re.sub(r"\b([A-D])(\d+)\b", lambda m: f"{m[1]}{int(m[2]) + 3}", text)

    found: dict[str, Content] = {}
    for address, content in contents.items():
        formula = isinstance(content, str) and content.startswith("=")
        where = shift(address).replace("Pipe", "'Main 2'")
        found[where] = shift(content) if formula and isinstance(content, str) else content
    return found


def test_the_fingerprint_survives_moves_and_changes_with_the_answer() -> None:
    first = solve(PIPE)
    elsewhere = xlroot.solve(
        book_of(moved(PIPE)), residual="'Main 2'!B9", unknown="'Main 2'!B6", low=0.005, high=0.1
    )
    assert elsewhere.fingerprint == first.fingerprint
    assert solve({**PIPE, "Pipe!D9": "=B6*7", "Pipe!A1": "Re"}).fingerprint == first.fingerprint
    assert solve({**PIPE, "Pipe!B3": 0.03}).fingerprint == first.fingerprint
    for change in ({"Pipe!B1": 4.1e5}, {"Pipe!B2": 5.1e-4}, {"Pipe!B5": "=-2*LOG10(B2/3.7)"}):
        assert solve({**PIPE, **change}).fingerprint != first.fingerprint
    assert solve(PIPE, high=0.2).fingerprint != first.fingerprint
    assert solve(PIPE, tolerance=1e-9).fingerprint != first.fingerprint
    assert solve(PIPE, method="brent").fingerprint != first.fingerprint
    assert solve(PIPE, safe_side="positive").fingerprint != first.fingerprint


def test_evaluate_uses_no_saved_value() -> None:
    book = book_of(
        {"A1": 2, "A2": "=A1*3", "A3": "=A2+1", "A4": "=1/0", "A5": "=A9", "A6": '=A1&"m"'},
        saved={"A2": 100.0, "A3": 200.0},
    )
    assert xlroot.evaluate(book, "A3") == 7.0
    assert xlroot.evaluate(book, "A3", {"A1": 5}) == 16.0
    assert xlroot.evaluate(book, "A3", {"A2": 1}) == 2.0
    assert str(xlroot.evaluate(book, "A4")) == "#DIV/0!"
    assert xlroot.evaluate(book, "A9") is None
    assert xlroot.evaluate(book, "A6") == "2m"
    with pytest.raises(xlroot.Unsupported, match="NOSUCH"):
        xlroot.evaluate(book_of({"A1": "=NOSUCH(1)"}), "A1")


@pytest.mark.parametrize(
    "method",
    ["bisection", "regula-falsi", "ILLINOIS", "pegasus", "anderson bjorck", "Ridders", "brent",
     "chandrupatla", "itp", "toms748", "Steffensen", "secant", "newton", "halley"],
)  # fmt: skip
def test_every_method_solves_a_sheet(method: str) -> None:
    record = solve(PIPE, method=method, low=0.015, high=0.021, tolerance=1e-11)
    assert record.root == pytest.approx(0.017875232946470816, abs=1e-11), record.verdict.reason
    assert record.iterates
    assert record.evaluations >= record.iterations


def test_a_fixed_point_is_found_and_its_contraction_recorded() -> None:
    contents: dict[str, Content] = {"A1": 1, "A2": "=COS(A1)-A1"}
    record = xlroot.solve(
        book_of(contents), residual="A2", unknown="A1", low=0, high=2, method="fixed point"
    )
    assert record.root == pytest.approx(0.7390851332151607, abs=1e-11)
    assert record.contraction == pytest.approx(0.6736, abs=1e-2)
