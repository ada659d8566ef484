"""`xlroot` and `python -m xlroot`: the command line."""

from __future__ import annotations


def main() -> None:
    """Runs the command line; the exit code is documented in `xlroot.cli`."""
    from xlroot.cli import run

    run()


if __name__ == "__main__":
    main()
