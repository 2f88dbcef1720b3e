from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from slopewell.checks import PotentialFacts, potential_facts
from slopewell.document import Document
from slopewell.reports.along import error_along
from slopewell.table import tabulate_rows
from slopewell.table.interpolation import interpolant


@pytest.fixture(scope="module")
def facts(document: Document) -> PotentialFacts:
    return potential_facts(document, document.interactions[0])


def test_no_error_between_rows_exceeds_its_bound(document: Document, facts: PotentialFacts) -> None:
    interaction = document.interactions[0]
    between = interpolant(tabulate_rows(interaction.potential, interaction.grid, 401, document.units))
    r = np.linspace(0.45, 1.19, 4001)
    size = document.units
    energy, slope = interaction.potential.treated.derivatives(r * float(size.length.factor), 1)
    bounds = error_along(facts, 0.45).at(r)
    off = (
        np.abs(between.energy(r) - energy / float(size.energy.factor)),
        np.abs(between.force(r) + slope / float(size.force.factor)),
    )
    for found, bound in zip(off, bounds, strict=True):
        assert np.all(found <= bound)
        assert np.max(bound) < 10 * np.max(found)


def test_the_worst_part_is_the_certified_bound(facts: PotentialFacts) -> None:
    along = error_along(facts, float(facts.grid.start) / float(facts.units.length.factor))
    certified = facts.energy(facts.certificate.bound.energy)
    assert along.energy.max() == pytest.approx(certified, rel=0.05)


def test_a_spline_has_no_parts(facts: PotentialFacts) -> None:
    assert error_along(replace(facts, grid=replace(facts.grid, interpolation="cubic-spline")), 0.4) is None
