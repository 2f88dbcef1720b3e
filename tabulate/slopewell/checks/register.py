"""The register of checks, in the order in which they are run and reported."""

from __future__ import annotations

from . import (
    cutoff_steps,
    expected_landmarks,
    finite,
    first_row_energy,
    force_matches_slope,
    repulsive_core,
    single_well,
    smooth_inside,
    table_error,
)
from .findings import Check
from .potential_facts import PotentialFacts

POTENTIAL_CHECKS: tuple[Check[PotentialFacts], ...] = (
    finite.CHECK,
    force_matches_slope.POTENTIAL_CHECK,
    smooth_inside.CHECK,
    cutoff_steps.CHECK,
    repulsive_core.CHECK,
    single_well.CHECK,
    expected_landmarks.CHECK,
    first_row_energy.CHECK,
    table_error.CHECK,
)
"""Checks of a potential document."""
