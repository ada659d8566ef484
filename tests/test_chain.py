"""Tracing the residual back to the unknown."""

from __future__ import annotations

import pytest

from xlroot.book import Book, Table
from xlroot.cells import Block
from xlroot.chain import Chain, trace
from xlroot.depend import Bindings
from xlroot.errors import CircularReference, IndependentError, Unsupported
from xlroot.hosts.memory import book_of
from xlroot.ledger import Ledger
from xlroot.program import Program


def chain_of(book: Book, residual: str, unknown: str) -> tuple[Chain, Ledger]:
    bindings = Bindings(book)
    ledger = Ledger(bindings)
    return trace(bindings, ledger, book.cell(residual), book.cell(unknown)), ledger


def residual_at(book: Book, residual: str, unknown: str, x: float) -> object:
    chain, ledger = chain_of(book, residual, unknown)
    return Program(chain, ledger).real(x)


def test_chain_cells_come_in_calculation_order_and_held_cells_apart() -> None:
    book = book_of({"A1": 2, "A2": 3, "A3": "=A1*A2", "A4": "=A3-A9", "A5": "=A4+A3*A2", "A9": 1})
    chain, _ = chain_of(book, "A5", "A1")
    assert [step.cell.address for step in chain.steps] == ["A3", "A4", "A5"]
    assert {cell.address for cell in chain.held} == {"A2", "A9"}


def test_a_chain_runs_across_sheets_names_and_whole_columns() -> None:
    book = book_of(
        {
            "Input!B2": 4,
            "Calc!A1": "=level*2",
            "Calc!A2": 5,
            "'My sums'!A1": "=SUM(Calc!A:A)-14",
        },
        names={"level": "Input!$B$2"},
    )
    assert residual_at(book, "'My sums'!A1", "Input!B2", 4.0) == -1.0
    assert residual_at(book, "'My sums'!A1", "Input!B2", 4.5) == 0.0


def test_a_table_is_read_by_its_columns() -> None:
    table = Table("Rows", Block("Sheet1", 1, 1, 3, 2), ("Size", "Twice"))
    book = book_of(
        {
            "A1": "Size",
            "B1": "Twice",
            "A2": 1,
            "B2": "=Rows[[#This Row],[Size]]*2",
            "A3": 2,
            "B3": "=Rows[@Size]*2",
            "D1": "=SUM(Rows[Twice])-10",
        },
        tables=(table,),
    )
    assert residual_at(book, "D1", "A3", 4.0) == 0.0


def test_what_does_not_depend_is_said() -> None:
    book = book_of({"A1": 1, "A2": "=A3", "A3": 1})
    with pytest.raises(IndependentError, match="does not depend"):
        chain_of(book, "A2", "A1")


def test_a_circle_on_the_chain_is_refused_and_named() -> None:
    book = book_of({"A1": 1, "A2": "=A1+A3", "A3": "=A2/2", "A4": "=A3-1"})
    with pytest.raises(CircularReference, match="A2"):
        chain_of(book, "A4", "A1")


def test_a_circle_of_held_cells_keeps_its_saved_values() -> None:
    book = book_of(
        {"A1": 1, "B1": "=B2+1", "B2": "=B1/2", "A2": "=A1-B1"}, saved={"B1": 2.0, "B2": 1.0}
    )
    chain, ledger = chain_of(book, "A2", "A1")
    assert {cell.address for cell in chain.circular} == {"B1", "B2"}
    assert Program(chain, ledger).real(5.0) == 3.0


def test_volatile_functions_on_the_chain_are_refused_by_name_and_cell() -> None:
    book = book_of({"A1": 1, "A2": "=A1+NOW()"})
    with pytest.raises(Unsupported, match=r"Sheet1!A2: uses NOW"):
        chain_of(book, "A2", "A1")


def test_a_constant_offset_is_resolved_and_a_moving_one_refused() -> None:
    contents = {"A1": 1, "A2": 2, "A3": 3, "B1": 2, "C1": "=OFFSET(A1,B1,0)*D1", "D1": 5}
    assert residual_at(book_of(contents), "C1", "D1", 7.0) == 21.0
    with pytest.raises(Unsupported, match="moves with the unknown"):
        chain_of(book_of(contents), "C1", "B1")


def test_a_range_made_with_index_is_resolved() -> None:
    book = book_of({"A1": 1, "A2": "=A1*2", "A3": 3, "B1": 2, "C1": "=SUM(A1:INDEX(A1:A3,B1))-9"})
    assert residual_at(book, "C1", "A1", 3.0) == 0.0


def test_indirect_with_a_held_text_is_resolved() -> None:
    book = book_of({"A1": 1, "B1": "A1", "C1": '=INDIRECT(B1)*2+INDIRECT("A"&1)'})
    assert residual_at(book, "C1", "A1", 3.0) == 9.0


@pytest.mark.parametrize(
    ("formula", "words"),
    [
        ("=[1]Other!A1+A1", "another workbook"),
        ("=A1+nowhere", "does not define"),
        ("=A1+NOSUCHFUNCTION(1)", "NOSUCHFUNCTION"),
        ("=A1+SUM(Sheet1:Sheet3!A1)", "several sheets"),
    ],
)
def test_what_cannot_be_evaluated_is_refused_with_its_cell(formula: str, words: str) -> None:
    book = book_of({"A1": 1, "A2": formula})
    with pytest.raises(Unsupported, match=words) as refusal:
        residual_at(book, "A2", "A1", 1.0)
    assert refusal.value.cell == "Sheet1!A2"


def test_a_chain_of_five_thousand_cells_needs_no_deep_recursion() -> None:
    contents: dict[str, object] = {"A1": 1.0}
    contents |= {f"A{row}": f"=A{row - 1}+1" for row in range(2, 5002)}
    assert residual_at(book_of(contents), "A5001", "A1", 0.0) == 5000.0  # type: ignore[arg-type]
