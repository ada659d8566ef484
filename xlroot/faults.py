"""Faults: the error values that a formula can give."""

from __future__ import annotations

from enum import Enum


class Fault(Enum):
    """An error value that a formula can give; `str` is the text a cell shows."""

    NULL = "#NULL!"
    DIV0 = "#DIV/0!"
    VALUE = "#VALUE!"
    REF = "#REF!"
    NAME = "#NAME?"
    NUM = "#NUM!"
    NA = "#N/A"
    SPILL = "#SPILL!"
    CALC = "#CALC!"
    FIELD = "#FIELD!"
    BLOCKED = "#BLOCKED!"
    CONNECT = "#CONNECT!"
    BUSY = "#BUSY!"
    WAITING = "#GETTING_DATA"
    EXTERNAL = "#EXTERNAL!"
    UNKNOWN = "#UNKNOWN!"

    def __str__(self) -> str:
        return str(self.value)


FAULTS: dict[str, Fault] = {fault.value: fault for fault in Fault}
"""Faults by the text that a cell shows."""
