from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from slopewell.reports.curve import curve_lines
from slopewell.reports.drawing import Drawing

PLAIN = """\
   kJ/mol
   | *                     :
   | *                     :
   | *                     :
   | **                    :
 0 +--1--------------*******
   |  *      *********     :
   |  *   ****             :
   |  *  **                :
   |  ****                 :
-5 |   2                   :
   |                       :
   +--+--------------+------
     0.5            1.0 nm
    1 zero crossing 0.47 nm
    2 depth 5 kJ/mol at 0.5276 nm
    : cutoff 1.2 nm"""


def test_a_plain_curve(drawing: Drawing) -> None:
    assert "\n".join(curve_lines(drawing, 32, plain=True)) == PLAIN


@pytest.mark.parametrize("width", [40, 61, 80, 100, 300])
@pytest.mark.parametrize("plain", [True, False])
def test_no_line_is_wider_than_there_is_room(width: int, plain: bool, drawing: Drawing) -> None:
    assert max(len(line) for line in curve_lines(drawing, width, plain=plain)) <= width


def test_dots_are_drawn_in_unicode(drawing: Drawing) -> None:
    assert any("\u2800" < sign <= "\u28ff" for line in curve_lines(drawing, 80, plain=False) for sign in line)


def test_plain_is_ascii(drawing: Drawing) -> None:
    assert "\n".join(curve_lines(drawing, 80, plain=True)).isascii()


def test_without_room_or_energy_nothing_is_drawn(drawing: Drawing) -> None:
    assert curve_lines(drawing, 20, plain=True) == []
    assert curve_lines(replace(drawing, energy=None), 80, plain=True) == []


def test_values_that_are_missing_leave_a_curve(drawing: Drawing) -> None:
    holed = np.where(drawing.separation < 0.5, np.nan, drawing.energy)
    assert len(curve_lines(replace(drawing, energy=holed), 80, plain=True)) > 10
