"""Compiled programs against the interpreter, which is the reference."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from xlroot.chain import trace
from xlroot.depend import Bindings
from xlroot.errors import Unsupported
from xlroot.hosts.memory import Content, book_of
from xlroot.ledger import Ledger
from xlroot.program import Program
from xlroot.values import Fault


def program_of(contents: dict[str, Content], residual: str, unknown: str) -> Program:
    book = book_of(contents)
    bindings = Bindings(book)
    ledger = Ledger(bindings)
    return Program(trace(bindings, ledger, book.cell(residual), book.cell(unknown)), ledger)


def assert_kinds_agree(program: Program, xs: list[float]) -> None:
    """Real and array kinds give what the interpreter gives, faults included."""
    try:
        values, faults = program.array(xs)
    except Unsupported:
        refusals = [_refusal(program.exact, x) for x in xs]
        assert any(refusals)
        assert [_refusal(program.real, x) for x in xs] == refusals
        return
    for position, x in enumerate(xs):
        exact, real = program.exact(x), program.real(x)
        if isinstance(exact, Fault):
            assert real is exact
            assert faults[position] is exact
            assert math.isnan(values[position])
        else:
            assert not isinstance(real, Fault)
            assert real == pytest.approx(exact, rel=1e-12, abs=1e-300)
            assert values[position] == pytest.approx(exact, rel=1e-12, abs=1e-300)
            assert position not in faults


def _refusal(residual: Callable[[float], object], x: float) -> str:
    try:
        residual(x)
    except Unsupported as refusal:
        return str(refusal)
    return ""


CHAINS: list[tuple[str, dict[str, Content]]] = [
    ("arithmetic", {"A2": "=-A1^2+3*A1-2/A1", "A3": "=A2%+A1^-1"}),
    ("a fault that one branch avoids", {"A2": "=1/A1", "A3": "=IF(A1=0,7,A2)"}),
    ("IFERROR", {"A2": "=SQRT(A1)", "A3": "=IFERROR(A2,-1)+IFERROR(1/A1,5)"}),
    ("texts that read as numbers", {"A2": '=A1&""', "A3": "=A2*2"}),
    ("a text that does not", {"A2": '=IF(A1>1,"much",A1)', "A3": "=A2+1"}),
    ("overflow that would vanish", {"A2": "=A1*1E308*1E10", "A3": "=1/A2"}),
    ("overflow inside a formula", {"A3": "=1/(A1*1E308*1E10)+A1"}),
    ("overflow through a root", {"A3": "=1/SQRT(A1*1E308*1E10)+A1"}),
    ("overflow through an extreme", {"A3": "=MIN(A1*1E308*1E10,3)+1/MAX(A1*1E308*1E10,1)"}),
    ("overflow in a comparison", {"A3": "=IF(A1*1E308*1E10>0,1,2)"}),
    ("logicals as numbers", {"A2": "=A1>1", "A3": "=A2*2+(A1<0)"}),
    ("AND, OR, NOT", {"A3": "=IF(AND(A1>0,NOT(A1>2)),1,2)+IF(OR(A1<-1,A1>3),10,20)"}),
    ("sums over chain and held cells", {"B1": 2, "B2": "=A1*2", "B3": "x", "A3": "=SUM(B1:B4,A1)"}),
    ("extremes", {"B1": 2, "B2": "=A1*2", "A3": "=MAX(B1:B2,-1)-MIN(A1,B1:B2)"}),
    (
        "a table lookup",
        {f"C{n}": n for n in range(1, 6)}
        | {f"D{n}": n * n for n in range(1, 6)}
        | {"A2": "=MATCH(A1,C1:C5,1)", "A3": "=INDEX(D1:D5,A2)+VLOOKUP(A1,C1:D5,2,TRUE)"},
    ),
    ("LET", {"A3": "=LET(a,A1*2,b,a+1,a*b)-LET(c,3,c)"}),
    ("LAMBDA", {"A3": "=LAMBDA(x,x^2-A1)(A1)"}),
    ("SUMPRODUCT", {"B1": 1, "B2": 2, "C1": "=A1", "C2": 3, "A3": "=SUMPRODUCT(B1:B2,C1:C2)-A1"}),
    ("rounding", {"A2": "=ROUND(A1,1)", "A3": "=INT(A1)+A2+MOD(A1,2)"}),
    ("functions of many kinds", {"A3": "=EXP(-A1)+SIN(A1)*ATAN(A1)+LN(A1)-LOG10(A1)+ABS(A1)"}),
    ("CHOOSE and IFS", {"A2": "=IFS(A1<0,1,A1<2,2,TRUE,3)", "A3": "=CHOOSE(A2,10,20,30)*A1"}),
    ("arrays in plain formulas", {"A3": "=SUM(A1*{1,2,3})+SUM(A1^{1,2})+{5,6}+SUM(-{1;2})"}),
    (
        "arrays from functions",
        {
            "B1": 1,
            "B2": "=A1",
            "A3": "=SUM(IFERROR(TRANSPOSE(B1:B2),0)*A1)+SUM(LARGE(B1:B2,{1,2}))",
        },
    ),
    ("powers that are not real", {"A3": "=A1^0.5+A1^2+A1^A1"}),
]

XS = [-2.5, -1.0, 0.0, 0.4, 1.0, 1.5, 2.0, 3.7, 5.0]


@pytest.mark.parametrize(("name", "contents"), CHAINS, ids=[name for name, _ in CHAINS])
def test_compiled_code_gives_what_the_interpreter_gives(
    name: str, contents: dict[str, Content]
) -> None:
    assert_kinds_agree(program_of({"A1": 1.0, **contents}, "A3", "A1"), XS)


def test_array_constants_work_element_by_element_in_a_plain_formula() -> None:
    contents: dict[str, Content] = {"C1": 1, "C2": 5, "C3": 3, "A1": 2}
    contents["A3"] = "=SUM(A1*{1,2,3})+SUM(LARGE(C1:C3,{1,2}))+SUM(A1^{1,2})"
    assert program_of(contents, "A3", "A1").real(2.0) == 12.0 + 8.0 + 6.0


def test_a_held_part_that_is_refused_matters_only_where_it_is_met() -> None:
    contents: dict[str, Content] = {"A1": 1, "B1": 3, "B2": 1, "B3": 2}
    contents["A3"] = "=IF(A1>2,MATCH(2.5,B1:B3,1),A1*2)"
    program = program_of(contents, "A3", "A1")
    assert program.real(1.5) == 3.0
    with pytest.raises(Unsupported, match="Sheet1!A3"):
        program.real(3.0)


def test_constant_parts_are_folded() -> None:
    program = program_of(
        {"A1": 1, "B1": 2, "B2": "=B1^10", "A2": "=A1*(B2+SQRT(B1*2))"}, "A2", "A1"
    )
    assert "v0*1026.0" in program.source


def test_a_fault_is_traced_to_its_cell() -> None:
    program = program_of({"A1": 1, "A2": "=LN(A1)", "A3": "=A2+1"}, "A3", "A1")
    cell, fault = program.fault_at(-1.0) or (None, None)
    assert str(cell) == "Sheet1!A2"
    assert fault is Fault.NUM


def numbers() -> st.SearchStrategy[str]:
    return st.sampled_from(["0", "1", "2.5", "0.1", "1E200", "-3"])


def expressions() -> st.SearchStrategy[str]:
    leaves = st.one_of(numbers(), st.sampled_from(["A1", "B1", "B2", "B3"]))

    def grow(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
        pair = st.tuples(inner, inner)
        return st.one_of(
            st.tuples(st.sampled_from("+-*/^"), inner, inner).map(
                lambda t: f"({t[1]}{t[0]}{t[2]})"
            ),
            st.tuples(st.sampled_from(["=", "<>", "<", "<=", ">", ">="]), inner, inner, inner).map(
                lambda t: f"IF({t[1]}{t[0]}{t[2]},{t[3]},{t[1]})"
            ),
            st.tuples(st.sampled_from(["SQRT", "EXP", "LN", "ABS", "ATAN", "-", "INT"]), inner).map(
                lambda t: f"{t[0]}({t[1]})"
            ),
            st.tuples(st.sampled_from(["SUM", "MAX", "MIN"]), pair).map(
                lambda t: f"{t[0]}({t[1][0]},{t[1][1]},B1:B4)"
            ),
            pair.map(lambda t: f"IFERROR({t[0]},{t[1]})"),
            inner.map(lambda t: f"({t})%"),
        )

    return st.recursive(leaves, grow, max_leaves=8)


@settings(max_examples=150, deadline=None)
@given(st.lists(expressions(), min_size=1, max_size=3), st.floats(-1e3, 1e3))
def test_random_chains_agree_over_real_and_array(formulas: list[str], x: float) -> None:
    contents: dict[str, Content] = {"A1": 1.0, "B1": 2.0, "B2": None, "B3": "7", "B4": True}
    previous = "A1"
    for row, formula in enumerate(formulas, start=2):
        contents[f"A{row}"] = f"={formula}+0*{previous}"
        previous = f"A{row}"
    assert_kinds_agree(
        program_of(contents, previous, "A1"), [x, 0.0, 1.0, math.nextafter(1.0, 2.0)]
    )
