"""The functions for Python users: arrays in and out."""

from __future__ import annotations

import numpy as np
import pytest
import slopewell
from slopewell.problems import UnusableInput

R = np.linspace(3.0, 12.0, 300)
ENERGY = 0.04 * ((3.4 / R) ** 12 - (3.4 / R) ** 6)
FORCE = 0.04 * (12 * (3.4 / R) ** 12 - 6 * (3.4 / R) ** 6) / R


def test_arrays_are_checked_mended_converted_and_compared() -> None:
    wrong = slopewell.make_table(R, ENERGY, -FORCE, units="eV,angstrom")
    (subject,) = slopewell.check(wrong).subjects
    done = slopewell.convert(wrong, mend="force-sign-flipped", new_units="kJ/mol,nm")
    (rows,) = done.table.interactions
    found = slopewell.compare(slopewell.make_table(R, ENERGY, FORCE, units="eV,angstrom"), done.table)

    assert [f.mistake for f in subject.findings if f.level == "error"] == ["force-sign-flipped"]
    assert rows.force is not None
    assert np.allclose(rows.force, FORCE * 964.8533212331, rtol=1e-9)
    assert found.within


def test_arrays_of_other_lengths_are_refused() -> None:
    with pytest.raises(UnusableInput, match="differ in length"):
        slopewell.make_table(R, ENERGY[1:], units="eV,angstrom")


def test_an_unknown_name_is_no_attribute() -> None:
    with pytest.raises(AttributeError, match="no attribute"):
        _ = slopewell.nothing
