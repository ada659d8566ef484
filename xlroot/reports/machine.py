"""Records as JSON, for programs (RFC 8259): numbers in full, cells as text, null where none.

No NaN or Infinity is ever written: a number that is not finite is null, since JSON has no
word for it. A float is written with the fewest digits that read back as the same double.
"""

from __future__ import annotations

import json
import math
from collections.abc import Mapping, Sequence

from xlroot.record import Line, Record
from xlroot.search import Iterate
from xlroot.values import Fault, Value

Plain = str | int | float | bool | None | Sequence["Plain"] | Mapping[str, "Plain"]


def as_json(records: Sequence[Record]) -> str:
    """A list of objects, one a record, indented."""
    listed = [plain(record) for record in records]
    return json.dumps(listed, indent=2, ensure_ascii=False, allow_nan=False)


def plain(record: Record) -> dict[str, Plain]:
    """The record as an object of JSON's own types."""
    asked, verdict = record.question, record.verdict
    return {
        "cell": None if record.cell is None else str(record.cell),
        "label": _text(record.label),
        "unknown_label": _text(record.unknown_label),
        "unit": _text(record.unit),
        "residual": str(asked.residual),
        "residual_label": _text(record.residual_label),
        "residual_unit": _text(record.residual_unit),
        "unknown": str(asked.unknown),
        "statement": _text(record.statement),
        "method": record.method,
        "method_note": record.method_note,
        "root": _number(record.root),
        "low": _number(verdict.low),
        "high": _number(verdict.high),
        "verdict": verdict.status.value,
        "reason": _text(verdict.reason),
        "refused_at": verdict.cell,
        "residual_at_root": _number(record.residual_at_root),
        "slope_at_root": _number(record.slope_at_root),
        "conditioning": _number(record.conditioning),
        "tolerance": _number(record.tolerance),
        "iterations": record.iterations,
        "predicted_iterations": record.predicted_iterations,
        "evaluations": record.evaluations,
        "order": _number(record.order),
        "contraction": _number(record.contraction),
        "second_method": _second(record),
        "question": {
            "low": _number(asked.low),
            "high": _number(asked.high),
            "method": asked.method,
            "tolerance": _number(asked.tolerance),
            "safe_side": asked.safe_side.value,
            "start": _number(asked.start),
            "recalculate": asked.recalculate,
            "present": _value(record.present),
        },
        "iterates": [_iterate(row) for row in record.iterates],
        "steps": [_line(line) for line in record.steps],
        "held": [_line(line) for line in record.held],
        "features": [] if record.look is None else list(map(str, record.look.features)),
        "warnings": list(map(_text, record.warnings)),
        "cautions": list(record.cautions),
        "fingerprint": record.fingerprint,
        "provenance": {
            "book": _text(record.provenance.book),
            "sha256": record.provenance.digest,
            "time": record.provenance.time.isoformat(),
            "versions": dict(record.provenance.versions),
        },
    }


def _second(record: Record) -> Plain:
    second = record.second
    if second is None:
        return None
    return {
        "method": second.method,
        "root": _number(second.root),
        "difference": _number(second.difference),
    }


def _iterate(row: Iterate) -> Plain:
    return {
        "n": row.n,
        "x": _number(row.x),
        "f": _number(row.f),
        "slope": _number(row.slope),
        "low": _number(row.low),
        "high": _number(row.high),
    }


def _line(line: Line) -> Plain:
    return {
        "cell": str(line.cell),
        "label": _text(line.label),
        "unit": _text(line.unit),
        "formula": _text(line.formula),
        "value": _value(line.value),
    }


def _value(value: Value) -> Plain:
    if isinstance(value, Fault):
        return str(value)
    if isinstance(value, str):
        return _text(value)
    if isinstance(value, bool):
        return value
    return _number(value)


def _number(number: float | None) -> float | None:
    return number if number is not None and math.isfinite(number) else None


def _text(text: str) -> str:
    """The text without lone surrogates, which UTF-8 cannot carry."""
    return text.encode("utf-8", "replace").decode("utf-8")
