"""Elementary functions, held against mpmath."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import mpmath
import numpy as np
import pytest
from slopewell.formula.functions import HEADS
from slopewell.formula.pairs import Pair

MPMATH: dict[str, Callable[[Any], Any]] = {
    name: getattr(mpmath, name)
    for name in ("exp", "log", "sqrt", "sin", "cos", "tan", "sinh", "cosh", "tanh", "erf", "erfc")
}
POINTS = np.concatenate([np.geomspace(1e-3, 0.9, 60), np.linspace(1.0, 9.0, 60)])


def ulps(found: np.ndarray, wanted: list[Any]) -> float:
    """The largest error, in units in the last place of the right value."""
    errors = [
        float(abs(mpmath.mpf(float(x)) - y)) / np.spacing(abs(float(y))) for x, y in zip(found, wanted, strict=True)
    ]
    return max(errors)


@pytest.mark.parametrize("name", MPMATH)
def test_a_function_of_doubles_is_right_to_3_units_in_the_last_place(name: str) -> None:
    with mpmath.workdps(40):
        wanted = [MPMATH[name](mpmath.mpf(float(x))) for x in POINTS]
        assert ulps(HEADS[name].of_array(POINTS, 0), wanted) < 3


@pytest.mark.parametrize("name", MPMATH)
def test_the_slope_that_carries_a_low_part_is_right(name: str) -> None:
    value = HEADS[name].of_array(POINTS, 0)
    low = np.full_like(POINTS, 1e-25)
    with np.errstate(all="raise", under="ignore"):
        carried = HEADS[name].of_pair(Pair(POINTS, low), 0)
    with mpmath.workdps(60):
        for x, before, high, part in zip(POINTS, value, carried.high, carried.low, strict=True):
            slope = mpmath.diff(MPMATH[name], mpmath.mpf(float(x)))
            rise = mpmath.mpf(float(high)) - mpmath.mpf(float(before)) + mpmath.mpf(float(part))
            assert abs(rise - slope * 1e-25) <= 1e-13 * abs(slope * 1e-25)


@pytest.mark.parametrize("order", [0, 1, 6, 10, 16, 60])
def test_tang_toennies_does_not_cancel(order: int) -> None:
    # At small x the closed form 1 − exp(−x) Σ xᵏ/k! would lose every digit.
    x = np.concatenate([np.geomspace(1e-4, 1, 30), np.linspace(1, 3 * order + 30, 60), [order + 1.0]])
    with mpmath.workdps(60):
        wanted = [mpmath.gammainc(order + 1, 0, mpmath.mpf(float(point)), regularized=True) for point in x]
        assert ulps(HEADS["tang_toennies"].of_array(x, order), wanted) < 2


def test_tang_toennies_rises_from_0_to_1() -> None:
    ends = HEADS["tang_toennies"].of_array(np.array([0.0, 1e9, np.inf]), 6)
    assert ends.tolist() == [0.0, 1.0, 1.0]
