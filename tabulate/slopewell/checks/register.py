"""The register of checks, in the order in which they are run and reported."""

from __future__ import annotations

from . import (
    cutoff_steps,
    enough_digits,
    expected_landmarks,
    finite,
    first_row_energy,
    force_matches_slope,
    last_row,
    no_wiggles,
    repulsive_core,
    row_shape,
    rows_evenly_spaced,
    rows_ordered,
    rows_readable,
    single_well,
    smooth_inside,
    sound_bridges,
    table_error,
)
from .findings import Check
from .potential_facts import PotentialFacts
from .table_facts import TableFacts

POTENTIAL_CHECKS: tuple[Check[PotentialFacts], ...] = (
    finite.CHECK,
    force_matches_slope.POTENTIAL_CHECK,
    smooth_inside.CHECK,
    cutoff_steps.CHECK,
    repulsive_core.CHECK,
    sound_bridges.CHECK,
    no_wiggles.CHECK,
    single_well.CHECK,
    expected_landmarks.CHECK,
    first_row_energy.CHECK,
    table_error.POTENTIAL_CHECK,
)
"""Checks of a potential document."""

TABLE_CHECKS: tuple[Check[TableFacts], ...] = (
    rows_readable.CHECK,
    rows_ordered.CHECK,
    rows_evenly_spaced.CHECK,
    force_matches_slope.TABLE_CHECK,
    enough_digits.CHECK,
    table_error.TABLE_CHECK,
    last_row.CHECK,
    row_shape.CORE_CHECK,
    row_shape.WELL_CHECK,
)
"""Checks of a table, its rows alone."""
