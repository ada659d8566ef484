"""Speed as ratios, side by side in one run: `python -m tests.bench`.

Each line gives the cost of two things measured in turn, several times, and the median of the
ratios. Nothing here is asserted: machines differ, ratios are for reading.
"""

from __future__ import annotations

import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from importlib.util import find_spec
from pathlib import Path

import numpy as np
from scipy.optimize import brentq

from tests.bench.chains import Bench, chains
from xlroot import methods, search
from xlroot.chain import trace
from xlroot.depend import Bindings
from xlroot.ledger import Ledger
from xlroot.program import Program
from xlroot.stopping import Tolerance, customary

ROUNDS = 9


def seconds(run: Callable[[], object], times: int) -> float:
    start = time.perf_counter()
    for _ in range(times):
        run()
    return (time.perf_counter() - start) / times


def times_for(run: Callable[[], object]) -> int:
    """How often to repeat for about 30 ms."""
    once = seconds(run, 1)
    return max(1, int(0.03 / max(once, 1e-7)))


def compare(
    what: str, ours: Callable[[], object], theirs: Callable[[], object], goal: str
) -> float:
    """Runs both in turn and prints the median ratio of ours to theirs."""
    ours(), theirs()
    n, m = times_for(ours), times_for(theirs)
    pairs = [(seconds(ours, n), seconds(theirs, m)) for _ in range(ROUNDS)]
    ratio = statistics.median(a / b for a, b in pairs)
    a, b = (statistics.median(column) for column in zip(*pairs, strict=True))
    print(f"{what:<58} {a * 1e6:>10.2f} {b * 1e6:>12.2f} {ratio:>8.3f}  {goal}")
    return ratio


def program_of(bench: Bench) -> Program:
    book = bench.book
    bindings = Bindings(book)
    ledger = Ledger(bindings)
    chain = trace(bindings, ledger, book.cell(bench.residual), book.cell(bench.unknown))
    return Program(chain, ledger)


def evaluations(bench: Bench, program: Program) -> None:
    x = bench.low + 0.37 * (bench.high - bench.low)
    assert abs(program.real(x) - bench.by_hand(x)) < 1e-9  # type: ignore[operator]
    compare(
        f"{bench.name}: compiled residual / by hand",
        lambda: program.real(x),
        lambda: bench.by_hand(x),
        "goal 1.1",
    )


def solves(bench: Bench, program: Program) -> None:
    tolerance = Tolerance(customary(bench.low, bench.high))
    for name in ("Chandrupatla", "Brent"):
        method = methods.find(name)
        goal = "goal 0.7" if bench.name == "short" else "goal 1.0"
        compare(
            f"{bench.name}: recorded {name} / brentq by hand",
            lambda method=method: search.run(  # type: ignore[misc]
                method, program.real, bench.low, bench.high, tolerance
            ),
            lambda: brentq(bench.by_hand, bench.low, bench.high),
            goal,
        )


def arrays(bench: Bench, program: Program) -> None:
    xs = np.linspace(bench.low, bench.high, 10_000)

    def by_hand() -> object:
        return np.concatenate(
            [bench.by_numpy(xs[start : start + 2048]) for start in range(0, len(xs), 2048)]
        )

    assert np.allclose(program.array(xs)[0], by_hand(), rtol=1e-9, atol=1e-9)
    compare(
        f"{bench.name}: 10,000 values in blocks / numpy by hand",
        lambda: program.array(xs),
        by_hand,
        "goal 1.2",
    )


def libraries(bench: Bench, program: Program) -> None:
    """The same solve with a general formula library in the loop, which recalculates a book."""
    tolerance = Tolerance(customary(bench.low, bench.high))
    method = methods.find("Chandrupatla")

    def ours() -> object:
        return search.run(method, program.real, bench.low, bench.high, tolerance)

    from tests.bench.loops import LOOPS

    for name, (make, goal) in LOOPS.items():
        if find_spec(name) is None:
            print(f"{bench.name}: {name} is not installed; pip install -e '.[bench]'")
            continue
        residual = make(bench)

        def theirs(residual: Callable[[float], float] = residual) -> object:
            return brentq(residual, bench.low, bench.high)

        ours(), theirs()
        pairs = [(seconds(theirs, 1), seconds(ours, times_for(ours))) for _ in range(3)]
        ratio = statistics.median(a / b for a, b in pairs)
        what = f"{bench.name}: a solve with {name} in the loop takes"
        print(f"{what} {ratio:,.0f} times as long  {goal}")


def shell(cells: int, folder: Path) -> None:
    """From the shell to the first root, against a bare interpreter."""
    path = folder / f"book{cells}.xlsx"
    script = (
        "import sys, openpyxl; from tests.bench.chains import chains;"
        "book = openpyxl.Workbook(write_only=False); book.remove(book.active);"
        "sheet = book.create_sheet('Pipe');"
        "[sheet.__setitem__(a.split('!')[1], v) for a, v in chains()[0].contents.items()];"
        f"big = book.create_sheet('Other') if {cells} > 5 else None;"
        f"[big.cell(r, 1, f'=ROW()*2+{{r}}') for r in range(1, {cells} - 4)];"
        "book.save(sys.argv[1])"
    )
    subprocess.run([sys.executable, "-c", script, str(path)], check=True)
    command = [sys.executable, "-m", "xlroot", "solve", str(path), "--residual", "Pipe!B11"]
    command += ["--unknown", "Pipe!B6", "--between", "0.005", "0.1", "--json"]

    def ours() -> object:
        return subprocess.run(command, check=True, capture_output=True)

    def bare() -> object:
        return subprocess.run([sys.executable, "-c", "pass"], check=True)

    ours(), bare()
    ratios = [(seconds(ours, 1), seconds(bare, 3)) for _ in range(ROUNDS)]
    ratio = statistics.median(a / b for a, b in ratios)
    goal = "goal 20" if cells == 5 else "goal 30"
    peak = _peak(command)
    print(
        f"shell to root, book of {cells:,} formulas: {ratio:.1f} times a bare interpreter "
        f"({goal}); {ratios[0][0] * 1e3:.0f} ms, peak memory {peak}"
    )


def _peak(command: list[str]) -> str:
    code = (
        "import resource, subprocess, sys; subprocess.run(sys.argv[1:], capture_output=True);"
        "print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss)"
    )
    if find_spec("resource") is None:
        return "not told on this system"
    done = subprocess.run([sys.executable, "-c", code, *command], capture_output=True, text=True)
    return f"{int(done.stdout) / 1024:.0f} MB"


def main() -> None:
    heading = f"median of {ROUNDS} rounds"
    print(f"{heading:<58} {'ours, µs':>10} {'theirs, µs':>12} {'ratio':>8}")
    for bench in chains():
        program = program_of(bench)
        print(f"-- {bench.name}: {len(program.chain.steps)} chain cells")
        evaluations(bench, program)
        solves(bench, program)
        arrays(bench, program)
        if bench.name == "middle":
            libraries(bench, program)
    with tempfile.TemporaryDirectory() as folder:
        shell(5, Path(folder))
        shell(100_000, Path(folder))


if __name__ == "__main__":
    main()
