"""Proved error bounds against dense sampling, against the classical constants, and on random curves."""

from __future__ import annotations

from fractions import Fraction
from math import sqrt

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from sampling import INTERNAL, sampled
from slopewell.document import INTERPOLATIONS, SPACINGS, Grid
from slopewell.forms import Form, catalogue
from slopewell.formula import bind, parse
from slopewell.formula.branches import resolve
from slopewell.formula.tree import add
from slopewell.potential import Curve, Cutoff, treat
from slopewell.table import evaluate, separations
from slopewell.table.bounds import Bound, ErrorBounds
from slopewell.table.rounding import Rounding
from slopewell.units import quantity
from slopewell.units.constants import BOLTZMANN, COULOMB

LENNARD_JONES = "4*((1/r)^12 - (1/r)^6)"
SPLINE_ENDS = ("clamped", "natural", "not-a-knot")
RULES = [(rule, "clamped") for rule in INTERPOLATIONS] + [("cubic-spline", ends) for ends in SPLINE_ENDS[1:]]
every_rule = pytest.mark.parametrize(("rule", "ends"), RULES)
every_spacing = pytest.mark.parametrize("spacing", SPACINGS)


def curve(formula: str, start: str, end: str, **values: Fraction) -> Curve:
    return Curve(resolve(bind(parse(formula), values), Fraction(start), Fraction(end)))


def proved(reading: Curve, grid: Grid, rows: int, spacing: str, rule: str, ends: str = "clamped") -> Bound:
    return ErrorBounds(reading, grid).bound(rows, spacing, rule, ends)


def form_curve(form: Form) -> tuple[Curve, Grid]:
    values = {p.name: quantity(p.example).value for p in form.parameters} | {"kB": BOLTZMANN, "ke": COULOMB}
    start, end = quantity(form.start).value, quantity(form.end).value
    return Curve(resolve(bind(parse(form.formula), values), start, end)), Grid(start, end, None)


def resolved(grid: Grid, spacing: str, share: float) -> bool:
    """Whether no row interval is longer than a share of its separation: else no curve looks smooth."""
    r = separations(grid.start, grid.end, 500, spacing, INTERNAL.length)
    return bool((np.diff(r) <= share * r[:-1]).all())


CASES = [
    (form, spacing)
    for number, form in enumerate(catalogue().values())
    for spacing in ("separation", SPACINGS[1 + number % 3])
]


@pytest.mark.parametrize(("form", "spacing"), CASES, ids=lambda part: getattr(part, "name", part))
def test_every_form_is_within_its_bound_and_a_smooth_one_close_to_it(form: Form, spacing: str) -> None:
    reading, grid = form_curve(form)
    bounds = ErrorBounds(reading, grid)
    size = np.abs(reading.derivatives(np.array([float(grid.start)]), 1)).max()
    for rule, ends in RULES:
        bound = bounds.bound(500, spacing, rule, ends)
        energy, force = sampled(reading, grid, 500, spacing, rule, ends)
        assert bound.energy >= energy, rule
        assert bound.force >= force, rule
        spline = rule == "cubic-spline"
        smooth = len(reading.pieces) == 1 and resolved(grid, spacing, 0.015 if spline else 0.03)
        if smooth and energy > 1e-11 * size:
            assert bound.energy <= (6 if spline else 1.25) * energy, f"{rule} {ends}"


# The classical constants are attained on polynomials of the critical degree: G. Birkhoff and A. Priver,
# J. Math. and Phys. 46, 440 (1967), recomputed in references T10-001 to T10-007.
@pytest.mark.parametrize(
    ("rule", "degree", "energy", "force"),
    [
        ("linear", 2, 1 / 8, None),
        ("cubic-hermite", 4, 1 / 384, sqrt(3) / 216),
        ("quintic-hermite", 6, 1 / 46080, sqrt(5) / 30000),
    ],
)
def test_the_classical_constants_are_attained(rule: str, degree: int, energy: float, force: float | None) -> None:
    reading, grid = curve(f"r^{degree}", "1", "3"), Grid(Fraction(1), Fraction(3), None)
    derivative = float(np.prod(range(1, degree + 1)))
    bound = proved(reading, grid, 9, "separation", rule)
    seen = sampled(reading, grid, 9, "separation", rule, "clamped")
    # The rounding of stored numbers is part of the bound.
    assert bound.energy == pytest.approx(energy * 0.25**degree * derivative, rel=1e-5)
    assert seen[0] == pytest.approx(bound.energy, rel=1e-4)
    if force is not None:
        assert bound.force == pytest.approx(force * 0.25 ** (degree - 1) * derivative, rel=1e-5)
        assert seen[1] == pytest.approx(bound.force, rel=1e-2)


def test_the_complete_spline_stays_within_the_bound_of_hall_and_meyer() -> None:
    # 5/384 h^4 max|U''''| for the energy and 1/24 h^3 max|U''''| for its slope: C. A. Hall and W. W. Meyer,
    # J. Approx. Theory 16, 105 (1976), references T10-015 and T10-016. A smooth curve does not need all of it.
    reading, grid = curve("sin(r)", "1", "7"), Grid(Fraction(1), Fraction(7), None)
    h = 6 / 40
    bound = proved(reading, grid, 41, "separation", "cubic-spline")
    energy, force = sampled(reading, grid, 41, "separation", "cubic-spline", "clamped")
    assert energy <= bound.energy <= 5 / 384 * h**4
    assert force <= bound.force <= 1 / 24 * h**3


@every_spacing
@every_rule
@pytest.mark.parametrize(
    "cutoff",
    [
        Cutoff(Fraction(3), "switch", Fraction(2), 1),
        Cutoff(Fraction(3), "switch", Fraction(2), 3),
        Cutoff(Fraction(5, 2), "shifted-force"),
        Cutoff(Fraction(5, 2), "truncate"),
    ],
    ids=lambda cutoff: f"{cutoff.treatment}-{cutoff.continuity}",
)
def test_less_smooth_curves_stay_within_their_bounds(cutoff: Cutoff, spacing: str, rule: str, ends: str) -> None:
    grid = Grid(Fraction(4, 5), Fraction(3), None)
    reading = treat(curve(LENNARD_JONES, "4/5", "3"), cutoff, grid.end)
    for rows in (23, 222):
        bound = proved(reading, grid, rows, spacing, rule, ends)
        energy, force = sampled(reading, grid, rows, spacing, rule, ends)
        assert bound.proved
        assert energy <= bound.energy
        assert force <= bound.force


def test_the_drift_bound_of_linear_reading_holds() -> None:
    reading, grid = curve(LENNARD_JONES, "4/5", "3"), Grid(Fraction(4, 5), Fraction(3), None)
    bound = proved(reading, grid, 101, "separation", "linear")
    r = separations(grid.start, grid.end, 101, "separation", INTERNAL.length)
    energy, slope = evaluate(reading, r, 1, INTERNAL)
    chords = np.diff(energy) / np.diff(r)
    drift = max(np.abs(chords - slope[:-1]).max(), np.abs(chords - slope[1:]).max())
    assert drift <= bound.drift <= 1.3 * drift


def test_rules_whose_force_is_the_slope_do_not_drift() -> None:
    reading, grid = curve(LENNARD_JONES, "4/5", "3"), Grid(Fraction(4, 5), Fraction(3), None)
    assert [proved(reading, grid, 101, "separation", rule).drift for rule in INTERPOLATIONS[1:]] == [0.0] * 3


def test_a_curve_without_a_bound_is_not_proved() -> None:
    reading, grid = curve("sqrt(r - 1)", "1", "3"), Grid(Fraction(1), Fraction(3), None)
    assert not proved(reading, grid, 101, "separation", "cubic-hermite").proved


def test_printed_digits_are_part_of_the_bound() -> None:
    reading, grid = curve(LENNARD_JONES, "4/5", "3"), Grid(Fraction(4, 5), Fraction(3), None)
    bounds = ErrorBounds(reading, grid)
    exact = bounds.bound(2001, "separation", "cubic-hermite")
    printed = bounds.bound(
        2001, "separation", "cubic-hermite", rounding=Rounding(energy_absolute=1e-6, force_absolute=1e-6)
    )
    assert printed.energy >= exact.energy + 1e-6
    assert printed.force >= exact.force + 1e-6


FORMS = [
    form for form in catalogue().values() if form.name in ("lennard-jones", "morse", "buckingham", "exp-6", "yukawa")
]


@settings(max_examples=25)
@given(
    forms=st.lists(st.sampled_from(FORMS), min_size=1, max_size=3),
    start=st.integers(26, 40),
    length=st.integers(5, 90),
    rows=st.integers(4, 400),
    spacing=st.sampled_from(SPACINGS),
    rule=st.sampled_from(RULES),
)
def test_sums_of_forms_on_any_grid_stay_within_their_bounds(
    forms: list[Form], start: int, length: int, rows: int, spacing: str, rule: tuple[str, str]
) -> None:
    grid = Grid(Fraction(start, 10), Fraction(start + length, 10), None)
    trees = []
    for form in forms:
        values = {p.name: quantity(p.example).value for p in form.parameters} | {
            "kB": BOLTZMANN,
            "ke": COULOMB,
        }
        trees.append(bind(parse(form.formula), values))
    reading = Curve(resolve(add(*trees), grid.start, grid.end))
    bound = proved(reading, grid, rows, spacing, *rule)
    energy, force = sampled(reading, grid, rows, spacing, *rule)
    assert energy <= bound.energy
    assert force <= bound.force
