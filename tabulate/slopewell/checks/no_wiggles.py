"""Does a spline bend between its points where the points themselves do not?"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from ..formula.roots import roots
from ..potential import Curve
from ..potential.splines import Points
from .findings import NOTE, WARNING, Check, Finding
from .potential_facts import PotentialFacts

Array = NDArray[np.float64]


def look(facts: PotentialFacts) -> Iterator[Finding]:
    """Find stationary points and inflections of a spline that its points give no reason for."""
    for points, curve in facts.potential.splines:
        for order, level, kind in ((1, WARNING, "stationary point"), (2, NOTE, "inflection")):
            extra = wiggles(points, curve, order)
            if not extra:
                continue
            unit = facts.units.length.text
            listing = ", ".join(f"{facts.length(r):.6g}" for r in extra[:6]) + (", …" if len(extra) > 6 else "")
            yield Finding(
                level=level,
                says=f"The spline has {len(extra)} {kind}{'s' * (len(extra) > 1)} that the points do not "
                f"show, at {listing} {unit}.",
                remedy=_remedy(facts.potential.formula),
                start=facts.length(extra[0]),
                end=facts.length(extra[-1]),
                measured=float(len(extra)),
                limit=0.0,
                unit="1",
            )


def _remedy(formula: str) -> str:
    """Return what helps other than the spline in use."""
    if "monotone spline" in formula:
        return "Add points there."
    if "smoothing spline" in formula:
        return 'Add points there, state larger errors of the points, or use spline = "monotone".'
    return 'Add points there, use spline = "monotone", or "smoothing" if the points scatter.'


def wiggles(points: Points, curve: Curve, order: int) -> list[float]:
    """Return the roots of a derivative, in ångström, where the divided differences around do not change sign.

    Parameters
    ----------
    points : Points
    curve : Curve
        The spline through them, with one piece between two points.
    order : int
        1 for stationary points, 2 for inflections.
    """
    signs = np.sign(_differences(points, order))
    found = []
    for index, piece in enumerate(curve.pieces):
        around = signs[max(index - order, 0) : index + 2]
        if np.all(around == around[0]):
            found += [float(root.mid()) for root in roots(piece.tree, piece.start, piece.end, order).found]
    return found


def _differences(points: Points, order: int) -> Array:
    x, y = points.arrays()
    slopes: Array = np.diff(y) / np.diff(x)
    return slopes if order == 1 else np.diff(slopes) / (x[2:] - x[:-2])


CHECK: Check[PotentialFacts] = Check(
    "no-wiggles", "A spline bends only where its points do", look, requires=("finite",)
)
