"""Text that reads well at 80 columns, in a pipe, and in any encoding."""

from __future__ import annotations

import io
from dataclasses import replace

import pytest

from tests.reports.samples import EVERY, HOSTILE, hostile, refused_outright, solved, without_root
from xlroot.cells import Cell
from xlroot.record import Record
from xlroot.reports.characters import spelled, visible, width
from xlroot.reports.terminal import Colour, Medium, full, overview
from xlroot.verdict import Status

ENCODINGS = ["utf-8", "ascii", "latin-1", "cp1252", "cp437"]


def records() -> list[Record]:
    return [make() for make in EVERY]


@pytest.mark.parametrize("encoding", ENCODINGS)
@pytest.mark.parametrize("columns", [80, 100, 60])
def test_no_line_is_wider_than_the_medium_and_every_character_can_be_written(
    encoding: str, columns: int
) -> None:
    medium = Medium(columns, encoding)
    for text in (overview(records(), medium), *(full(each, medium) for each in records())):
        text.encode(encoding)
        for line in text.splitlines():
            assert width(line) <= columns, line


def test_control_characters_of_a_label_never_reach_the_terminal() -> None:
    for medium in (Medium(), Medium(encoding="ascii"), Medium(colour=Colour.NONE)):
        text = full(hostile(), medium)
        assert all(character.isprintable() or character == "\n" for character in text)


def test_colour_only_paints() -> None:
    plain, painted = overview(records()), overview(records(), Medium(colour=Colour.ANSI))
    assert "\x1b[" in painted
    bare = painted
    for code in ("1", "2", "31", "32", "33", "0"):
        bare = bare.replace(f"\x1b[{code}m", "")
    assert bare == plain


def test_a_pipe_gets_eighty_columns_without_colour(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.delenv("COLUMNS", raising=False)
    stream = io.TextIOWrapper(io.BytesIO(), encoding="latin-1")
    assert Medium.of(stream) == Medium(80, "latin-1", Colour.NONE)
    monkeypatch.setenv("COLUMNS", "100")
    assert Medium.of(stream).columns == 100


def test_the_overview_shows_root_unit_bound_verdict_and_iterations() -> None:
    record = replace(solved(), unit="mm")
    (line,) = (each for each in overview([record]).splitlines() if "mm" in each)
    assert "'Rising main'!B13" in line
    assert "0.0194190314895 mm" in line
    assert "±7.4e-13" in line
    assert "bracketed" in line
    assert line.endswith("37")


def test_long_names_are_wrapped_or_stacked_but_never_cut() -> None:
    cell = Cell("A sheet with quite a long name", 1234, 56)
    label = "the flow in the northern branch while both of the pumps are running"
    text = overview([replace(solved(), cell=cell, label=label, unit="m³/(s·km)")])
    assert str(cell) in text
    assert "0.0194190314895 m³/(s·km)" in text
    assert label in " ".join(text.split())


def test_refusals_and_warnings_stand_in_full_below_the_table() -> None:
    refused = refused_outright()
    warned = replace(solved(), warnings=("One chain cell was saved without a value.",))
    text = " ".join(overview([refused, warned]).split())
    assert refused.verdict.reason in text
    assert "'Rising main'!B9" in text
    assert warned.warnings[0] in text


def test_the_plot_shows_root_and_iterates() -> None:
    text = full(solved())
    assert "◆ root   ○ iterate" in text
    assert text.count("◆") == 2
    plain = full(solved(), Medium(encoding="ascii"))
    assert "R root   o iterate" in plain
    assert "◆" not in plain


def test_a_root_without_enclosure_claims_no_bound() -> None:
    record = without_root()
    assert record.verdict.status is Status.CONVERGED
    assert "estimate" in overview([record])
    assert "±" not in overview([record])


def test_no_solves_is_said() -> None:
    assert overview([]) == "no solves\n"


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("η = 0.8 m²", "eta = 0.8 m2"),
        ("±5 °C", "+/-5 deg C"),
        ("Ω", "Ohm"),
        ("kN·m", "kN*m"),
        ("Übergang", "Ubergang"),
        ("効率", "??"),
    ],
)
def test_plain_terminals_get_stand_ins(text: str, shown: str) -> None:
    assert spelled(text, "ascii") == shown


def test_visible_text_is_one_printable_line() -> None:
    for text in HOSTILE:
        assert visible(text).isprintable()
    assert visible("a\x1bb\x7f\r\nc") == "a␛b␡ c"
