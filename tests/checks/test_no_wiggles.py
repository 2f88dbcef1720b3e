"""no-wiggles: bends of a spline that its points do not show."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import numpy as np
from documents import facts, text
from slopewell.checks.no_wiggles import CHECK, wiggles
from slopewell.potential.splines import Points, spline


def points(energy: list[float]) -> Points:
    return Points(tuple(map(Fraction, range(1, len(energy) + 1))), tuple(map(Fraction, energy)))


def test_a_smooth_curve_finely_sampled_does_not_wiggle() -> None:
    r = np.linspace(0.95, 2.5, 60)
    smooth = Points(tuple(map(Fraction, r.tolist())), tuple(map(Fraction, (4 * (r**-12 - r**-6)).tolist())))
    curve = spline(smooth, "cubic")
    assert (wiggles(smooth, curve, 1), wiggles(smooth, curve, 2)) == ([], [])


def test_an_overshoot_behind_a_sharp_turn_is_found() -> None:
    turning = points([10, 8, 6, 4, 2, 0.5, 0.45, 0.4, 0.35, 0.3])
    assert wiggles(turning, spline(turning, "cubic"), 1)
    assert wiggles(turning, spline(turning, "monotone"), 1) == []


def test_turns_that_the_points_show_are_their_own() -> None:
    wave = points([np.sin(k / 2) for k in range(18)])
    curve = spline(wave, "cubic")
    assert (wiggles(wave, curve, 1), wiggles(wave, curve, 2)) == ([], [])


def test_a_wiggle_is_a_warning_at_its_place(tmp_path: Path) -> None:
    r = np.linspace(2.5, 9, 14)
    u = np.where(r < 4, 10 * (4 - r) + 0.2, 0.2 * np.exp(4 - r))
    rows = "\n".join(f"{a:.4f} {b:.6f}" for a, b in zip(r, u, strict=True))
    (tmp_path / "scan.dat").write_text(rows, encoding="utf-8")
    finding = next(CHECK.look(facts(text('points = "scan.dat"\n'), tmp_path)))
    assert finding.level == "warning"
    assert "stationary point" in finding.says
    assert 4 < finding.start < 6


def test_a_formula_is_no_spline(tmp_path: Path) -> None:
    assert list(CHECK.look(facts(text(), tmp_path))) == []
