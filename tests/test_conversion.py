"""Converting tables: units there and back, new rows, missing columns, accepted errors, refusals."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from numpy.typing import NDArray
from slopewell.cli import main
from slopewell.conversion import Changes, changed, convert, in_units
from slopewell.problems import UnusableInput
from slopewell.table import Rows, Table
from slopewell.tables import Reading, read_table
from slopewell.units import unit_system

Array = NDArray[np.float64]
READING = Reading(("separation", "energy", "force"), "eV,angstrom")
UNITS = ("eV,angstrom", "kJ/mol,nm", "kcal/mol,angstrom", "hartree,bohr", "K,pm")


def table(r: Array, energy: Array | None, force: Array | None) -> Table:
    return Table((Rows("A-B", r, energy, force),), unit_system("eV", "angstrom"))


@pytest.fixture
def old(tmp_path: Path) -> Path:
    r = np.linspace(1.0, 3.0, 201)
    force = np.where(r == r[-1], 0.0, 3 * (3.0 - r) ** 2)
    path = tmp_path / "old.dat"
    np.savetxt(path, np.column_stack([r, (3.0 - r) ** 3, force]), fmt="%.14e")
    return path


@given(
    st.lists(st.floats(1e-30, 1e30), min_size=2, max_size=30, unique=True).map(sorted),
    st.sampled_from(UNITS),
    st.randoms(use_true_random=False),
)
def test_units_there_and_back_return_the_numbers(r: list[float], units: str, chance: object) -> None:
    separation = np.array(r)
    energy = np.sin(separation) * separation
    there = in_units(table(separation, energy, -energy), unit_system(*units.split(",")))
    (back,) = in_units(there, unit_system("eV", "angstrom")).interactions

    for column, again in ((separation, back.separation), (energy, back.energy), (-energy, back.force)):
        assert again is not None
        assert np.all(np.abs(again - column) <= 2 * np.spacing(np.abs(column)))


def test_factor_is_the_exact_one() -> None:
    # 1 hartree = 27.211386245981 eV, CODATA 2022
    (rows,) = in_units(
        table(np.array([1.0, 2.0]), np.array([27.211386245981, 0.0]), None), unit_system("hartree", "bohr")
    ).interactions

    assert rows.energy is not None
    assert rows.energy[0] == 1.0


def test_new_rows_of_a_cubic_add_no_error() -> None:
    r = np.linspace(1.0, 3.0, 50)
    new, added = changed(table(r, (3 - r) ** 3, 3 * (3 - r) ** 2), Changes(rows=77, spacing="inverse"))
    (rows,) = new.interactions

    assert (rows.separation.size, rows.separation[0], rows.separation[-1], rows.spacing) == (
        77,
        1.0,
        3.0,
        "inverse",
    )
    assert rows.derived == ("energy", "force")
    assert max(added["A-B"]) < 1e-12


def test_tolerance_chooses_rows_that_keep_it() -> None:
    r = np.linspace(1.0, 3.0, 2000)
    new, added = changed(table(r, 1 / r**6, 6 / r**7), Changes(tolerance="1e-3 meV"))

    assert added["A-B"][0] <= 1e-6
    assert new.interactions[0].separation.size < 1000


@pytest.mark.parametrize("missing", ["energy", "force"])
def test_a_missing_column_is_derived_and_marked(missing: str) -> None:
    r = np.linspace(1.0, 3.0, 400)
    whole = {"energy": (3 - r) ** 3, "force": 3 * (3 - r) ** 2}
    new, _ = changed(table(r, *(None if name == missing else whole[name] for name in whole)), Changes(complete=True))
    (rows,) = new.interactions
    derived = rows.column(missing)

    assert rows.derived == (missing,)
    assert derived is not None
    assert np.allclose(derived, whole[missing], atol=1e-9)


def test_provenance_says_what_was_done_to_which_file(old: Path, tmp_path: Path) -> None:
    done = convert(old, tmp_path / "new.json", Changes(units="kJ/mol,nm"), reading=READING)
    again = read_table(tmp_path / "new.json")

    assert again.history == done.table.history
    assert again.history[0].startswith("read from old.dat (sha256 ")
    assert again.units == unit_system("kJ/mol", "nm")


@pytest.mark.parametrize(
    ("extra", "status"),
    [([], 1), (["--accept", "force-matches-slope"], 0), (["--mend", "force-sign-flipped"], 0)],
)
def test_an_error_must_be_mended_or_accepted(old: Path, tmp_path: Path, extra: list[str], status: int) -> None:
    new = tmp_path / "new.h5"
    call = [
        "convert",
        str(old),
        str(new),
        "--columns",
        "separation,energy,slope",
        "--units",
        "eV,angstrom",
        *extra,
    ]

    assert main(call) == status
    assert new.exists() == (status == 0)


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        (Changes(mend="virial-instead-of-force"), "No interaction shows"),
        (Changes(mend="bad-luck"), "can't be mended"),
        (Changes(accept=("nothing",)), "no check"),
        (Changes(spacing="uneven"), "no spacing"),
        (Changes(rows=1), "no usable number"),
        (Changes(tolerance="1 nm"), "no energy"),
    ],
)
def test_what_cannot_be_done_is_refused(old: Path, tmp_path: Path, changes: Changes, says: str) -> None:
    with pytest.raises(UnusableInput, match=says):
        convert(old, tmp_path / "new.csv", changes, reading=READING)
    assert not (tmp_path / "new.csv").exists()
