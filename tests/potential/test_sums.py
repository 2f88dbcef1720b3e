"""Sums of curves, cut wherever one of them has an edge."""

from __future__ import annotations

import numpy as np
import pytest
from documents import curve
from slopewell.potential.sums import add_curves


def test_a_sum_has_the_edges_of_all_and_the_sum_of_derivatives() -> None:
    parts = [curve("where(r < 2, 1/r, 1/r^2)", 1, 4), curve("abs(r - 3)", 1, 4), curve("exp(-r)", 1, 4)]
    total = add_curves(parts)
    r = np.array([1.0, 1.7, 2.3, 2.9, 3.1, 4.0])
    assert [float(edge) for edge in total.edges()] == [2.0, 3.0]
    assert total.derivatives(r, 2) == pytest.approx(sum(part.derivatives(r, 2) for part in parts), rel=1e-14)


def test_at_an_edge_the_term_that_changes_there_says_which_side_it_belongs_to() -> None:
    total = add_curves([curve("1/r", 1, 4), curve("where(r < 2, 5, 7)", 1, 4), curve("where(r <= 3, 0, 1)", 1, 4)])
    assert total.derivatives(np.array([2.0, 3.0]), 0)[0] == pytest.approx([7.5, 7 + 1 / 3])


def test_a_sum_of_one_is_that_one() -> None:
    alone = curve("where(r < 2, 1, 2)", 1, 4)
    assert add_curves([alone]).pieces == alone.pieces
