"""The command line: `xlroot solve BOOK`, `xlroot scan BOOK …`.

Exit codes: 0 every question was answered; 1 at least one solve was refused; 2 nothing could be
asked (the file cannot be read, no such cell, a contradiction in the question or the options).
Results go to the standard output, progress and errors to the standard error.
"""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from enum import IntEnum
from pathlib import Path
from typing import Annotated, NoReturn

import typer

from xlroot import api
from xlroot.errors import QuestionError, XlrootError
from xlroot.record import Record

app = typer.Typer(
    name="xlroot",
    help="Finds a cell's value in a saved calculation sheet so that a reviewer can sign it.",
    no_args_is_help=True,
    add_completion=False,
    pretty_exceptions_enable=False,
    rich_markup_mode=None,
)


class Exit(IntEnum):
    """What the exit code says."""

    ANSWERED = 0
    REFUSED = 1
    NOT_ASKED = 2


Book = Annotated[Path, typer.Argument(metavar="BOOK", help="the saved workbook (.xlsx, .xlsm)")]
Residual = Annotated[
    str | None,
    typer.Option(metavar="CELL", help="the formula cell to be driven to zero, like Pipe!B11"),
]
Unknown = Annotated[
    str | None, typer.Option(metavar="CELL", help="the input cell whose value is sought")
]
Between = Annotated[
    tuple[float, float] | None,
    typer.Option(metavar="LOW HIGH", help="the bracket, in the unknown's unit"),
]
Json = Annotated[bool, typer.Option("--json", help="print records as JSON")]


@app.callback()
def about() -> None:
    """Finds a cell's value in a saved calculation sheet so that a reviewer can sign it.

    Exit codes: 0 every question was answered, 1 a solve was refused, 2 it could not be asked.
    """


@app.command()
def solve(
    book: Book,
    residual: Residual = None,
    unknown: Unknown = None,
    between: Between = None,
    method: Annotated[str, typer.Option(metavar="NAME", help="a method, or auto")] = "auto",
    tolerance: Annotated[
        float | None,
        typer.Option(metavar="WIDTH", help="absolute, in the unknown's unit; 1e-12 of the bracket"),
    ] = None,
    safe_side: Annotated[
        str,
        typer.Option(metavar="SIGN", help="the acceptable sign: positive or negative"),
    ] = "",
    start: Annotated[
        float | None, typer.Option(metavar="X", help="first iterate of an open method")
    ] = None,
    recalculate: Annotated[
        bool, typer.Option("--recalculate", help="use no saved value of any formula")
    ] = False,
    full: Annotated[bool, typer.Option("--full", help="print whole records")] = False,
    out: Annotated[
        Path | None,
        typer.Option(metavar="FILE.xlsx", help="write a workbook of records, a page per solve"),
    ] = None,
    json: Json = False,
) -> None:
    """Solves the workbook's own XLROOT formulas, or the one question that the options state."""
    asked = (residual, unknown, between)
    if any(part is not None for part in asked):
        if residual is None or unknown is None or between is None:
            fail(QuestionError("one question needs --residual, --unknown and --between LOW HIGH"))
        with people_read():
            record = api.solve(
                book,
                residual=residual,
                unknown=unknown,
                low=between[0],
                high=between[1],
                method=method,
                tolerance=tolerance,
                safe_side=safe_side,
                start=start,
                recalculate=recalculate,
            )
        finish((record,), out, json=json, full=full or not json)
        return
    with people_read(), progress() as told:
        records = api.solve_book(book, progress=told)
    if not records:
        fail(
            QuestionError(
                f"{book.name} holds no XLROOT formula; state one question with "
                "--residual, --unknown and --between LOW HIGH"
            )
        )
    finish(records, out, json=json, full=full)


@app.command()
def scan(
    book: Book,
    residual: Annotated[str, typer.Option(metavar="CELL", help="the formula cell")],
    unknown: Annotated[str, typer.Option(metavar="CELL", help="the input cell")],
    between: Annotated[tuple[float, float], typer.Option(metavar="LOW HIGH", help="the bracket")],
    points: Annotated[int, typer.Option(min=3, max=100_000, help="trial values")] = 201,
) -> None:
    """Looks over a bracket: sign changes, poles, jumps, faults, and suggested brackets."""
    with people_read():
        shape = api.scan(
            book,
            residual=residual,
            unknown=unknown,
            low=between[0],
            high=between[1],
            points=points,
        )
    for feature in shape.features:
        print(f"the residual {feature}")
    if not shape.features:
        print(shape.describe())
    for low, high in shape.brackets:
        print(f"suggested bracket: {low:.12g} to {high:.12g}")


def finish(records: tuple[Record, ...], out: Path | None, *, json: bool, full: bool) -> None:
    """Prints and writes the records, and leaves with the exit code that they deserve."""
    if out is not None:
        from xlroot.reports.sheet import write_records

        with people_read():
            write_records(records, out)
    if json:
        from xlroot.reports.machine import as_json

        print(as_json(records))
    else:
        from xlroot.reports import terminal

        medium = terminal.Medium.of(sys.stdout)
        if full:
            for record in records:
                sys.stdout.write(terminal.full(record, medium))
        else:
            sys.stdout.write(terminal.overview(records, medium))
        if out is not None:
            print(f"records written to {out}")
    refused = any(record.refused for record in records)
    raise typer.Exit(Exit.REFUSED if refused else Exit.ANSWERED)


@contextmanager
def people_read() -> Iterator[None]:
    """Turns an error of the tree into one line on the standard error."""
    try:
        yield
    except XlrootError as error:
        fail(error)


def fail(error: XlrootError) -> NoReturn:
    """Says what is wrong and leaves."""
    print(f"xlroot: {error}", file=sys.stderr)
    raise typer.Exit(Exit.NOT_ASKED)


@contextmanager
def progress() -> Iterator[Callable[[int, int], None] | None]:
    """A progress bar for long work on a terminal; nothing elsewhere."""
    if not sys.stderr.isatty():
        yield None
        return
    from rich.console import Console
    from rich.progress import Progress

    with Progress(console=Console(stderr=True), transient=True) as bar:
        task = bar.add_task("solving", total=None)

        def told(done: int, of: int) -> None:
            bar.update(task, completed=done, total=of)

        yield told


def run() -> None:
    """Runs the command line."""
    app()
