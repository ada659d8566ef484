"""The look over a bracket: what it sees, where, and what it says."""

from __future__ import annotations

import math
from collections.abc import Callable

import pytest

from xlroot.scan import FeatureKind, Look, look
from xlroot.values import Fault


def seen(
    f: Callable[[float], float | Fault], low: float, high: float, *, points: int = 201
) -> Look:
    return look(lambda xs: [f(x) for x in xs], low, high, points=points)


def kinds(shape: Look) -> list[FeatureKind]:
    return [each.kind for each in shape.features]


def test_the_samples_are_evenly_spaced_and_end_at_the_ends() -> None:
    shape = seen(lambda x: x, -1.0, 0.3, points=14)
    xs = [x for x, _ in shape.samples]
    assert (xs[0], xs[-1], len(xs)) == (-1.0, 0.3, 14)
    assert xs == pytest.approx([-1.0 + 0.1 * step for step in range(14)])


def test_crossings_are_found_in_order_with_a_bracket_each() -> None:
    """The zeros of sin on [1, 10] are pi, 2 pi and 3 pi."""
    shape = seen(math.sin, 1.0, 10.0)
    assert kinds(shape) == [FeatureKind.CROSSING] * 3
    for (low, high), zero in zip(shape.brackets, (1, 2, 3), strict=True):
        assert low < zero * math.pi < high
        assert math.sin(low) * math.sin(high) < 0.0
    assert shape.features[0].low == pytest.approx(math.pi, abs=1e-6)


@pytest.mark.parametrize("points", [51, 201, 202])
def test_poles_are_told_from_crossings(points: int) -> None:
    """tan on [-2, 2]: poles at -pi/2 and pi/2, a root at 0 between them."""
    shape = seen(math.tan, -2.0, 2.0, points=points)
    assert kinds(shape) == [FeatureKind.POLE, FeatureKind.CROSSING, FeatureKind.POLE]
    assert shape.features[0].low == pytest.approx(-math.pi / 2.0, abs=1e-6)
    assert len(shape.brackets) == 1


def test_a_pole_on_a_fault_is_a_pole() -> None:
    shape = seen(lambda x: Fault.DIV0 if x == 1.0 else 1.0 / (x - 1.0), 0.0, 2.01)
    assert FeatureKind.CROSSING not in kinds(shape)
    assert FeatureKind.POLE in kinds(shape)


def test_a_jump_is_told_from_a_crossing() -> None:
    shape = seen(lambda x: -1.0 if x < 0.4321 else 2.0, 0.0, 1.0)
    assert kinds(shape) == [FeatureKind.JUMP]
    assert shape.features[0].low == pytest.approx(0.4321, abs=1e-6)
    assert shape.brackets == ()


def test_a_touch_is_no_crossing() -> None:
    shape = seen(lambda x: (x - 0.777) ** 2, 0.0, 2.0)
    assert kinds(shape) == [FeatureKind.TOUCH]
    assert shape.features[0].low == pytest.approx(0.777, abs=1e-6)


def test_a_minimum_above_zero_is_no_touch() -> None:
    assert kinds(seen(lambda x: (x - 0.777) ** 2 + 1e-3, 0.0, 2.0)) == []


def test_a_fault_region_is_shown_from_end_to_end() -> None:
    shape = seen(lambda x: math.sqrt(x) + 1.0 if x >= 0.0 else Fault.NUM, -1.0, 1.0)
    assert kinds(shape) == [FeatureKind.FAULT]
    assert (shape.features[0].low, shape.features[0].fault) == (-1.0, Fault.NUM)
    assert shape.features[0].high == pytest.approx(-0.01)
    assert "#NUM!" in shape.describe()


def test_a_flat_stretch_is_one_feature() -> None:
    shape = seen(lambda x: 0.0 if 0.3 < x < 0.7 else 1.0, 0.0, 1.0)
    assert kinds(shape) == [FeatureKind.FLAT]
    assert shape.features[0].low == pytest.approx(0.305)
    assert shape.features[0].high == pytest.approx(0.695)


def test_a_zero_on_a_trial_value_is_a_crossing() -> None:
    shape = seen(lambda x: x - 0.5, 0.0, 1.0)
    assert kinds(shape) == [FeatureKind.CROSSING]
    assert shape.features[0].low == 0.5
    low, high = shape.brackets[0]
    assert low < 0.5 < high


def test_a_zero_without_a_change_of_sign_on_a_trial_value_is_a_touch() -> None:
    shape = seen(lambda x: (x - 0.5) ** 2, 0.0, 1.0)
    assert kinds(shape) == [FeatureKind.TOUCH]


def test_a_step_down_to_zero_and_up_again_is_no_crossing() -> None:
    """Two exact zeros side by side with the same sign on both sides."""
    shape = seen(lambda x: 0.0 if 0.4 < x < 0.6 else 3.0, 0.0, 1.0, points=8)
    assert FeatureKind.CROSSING not in kinds(shape)


def test_everything_at_fault_is_one_region() -> None:
    shape = seen(lambda x: Fault.NA, 0.0, 1.0)
    assert kinds(shape) == [FeatureKind.FAULT]
    assert shape.brackets == ()


def test_the_description_is_short_however_much_is_found() -> None:
    shape = seen(lambda x: math.sin(40.0 * x), 0.05, 1.0)
    assert "crosses zero near" in shape.describe()
    assert shape.describe().endswith("more")
    assert shape.describe().count(";") == 4


def test_nothing_found_is_said_plainly() -> None:
    assert seen(lambda x: 1.0, 0.0, 1.0, points=21).describe() == (
        "a look at 21 values over the bracket shows no sign change"
    )
