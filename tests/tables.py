"""Tables for tests: a strategy for any table, and one fixed small one."""

from __future__ import annotations

from typing import Any

import numpy as np
from hypothesis import strategies as st
from slopewell.table import Rows, Table
from slopewell.units import unit_system

TEXTS = st.text(st.characters(codec="utf-8", exclude_characters="\x00"), max_size=20)
NUMBERS = st.floats(allow_nan=False, allow_infinity=False)
SEPARATIONS = st.lists(st.floats(1e-3, 1e3), min_size=2, max_size=7, unique=True).map(sorted)
NAMES = st.from_regex(r"[A-Za-z0-9][A-Za-z0-9_+*']{0,5}-[A-Za-z0-9][A-Za-z0-9_+*']{0,5}", fullmatch=True)
UNITS = st.sampled_from([("eV", "angstrom"), ("kJ/mol", "nm"), ("hartree", "bohr"), ("K", "pm")])
CERTIFICATES = st.dictionaries(
    st.sampled_from(["energy_error_bound", "force_error_bound", "rows_proved", "proved", "rule"]),
    NUMBERS | st.integers(0, 10**9) | st.booleans() | st.sampled_from(["linear", "cubic-hermite"]),
)


@st.composite
def any_rows(draw: Any, name: str) -> Rows:
    """Rows with any numbers that a double holds."""
    separation = draw(SEPARATIONS)
    columns = [np.array(draw(st.lists(NUMBERS, min_size=len(separation), max_size=len(separation)))) for _ in range(3)]
    kept = draw(st.sampled_from([(0,), (1,), (0, 1), (0, 1, 2)]))
    energy, force, curvature = (columns[k] if k in kept else None for k in range(3))
    return Rows(
        name,
        np.array(separation),
        energy,
        force,
        curvature,
        spacing=draw(st.sampled_from(["", "separation", "inverse"])),
        interpolation=draw(st.sampled_from(["", "linear", "cubic-spline"])),
        ends=draw(st.sampled_from(["", "natural"])),
        certificate=draw(CERTIFICATES),
        derived=draw(st.sampled_from([(), ("force",), ("force", "curvature")])),
    )


@st.composite
def any_table(draw: Any, most: int = 3) -> Table:
    """A table of up to so many interactions."""
    names = draw(st.lists(NAMES, min_size=1, max_size=most, unique=True))
    return Table(
        tuple(draw(any_rows(name)) for name in names),
        unit_system(*draw(UNITS)),
        title=draw(TEXTS),
        source=draw(TEXTS),
        purpose=draw(st.sampled_from(["", "dynamics", "sampling"])),
        document=draw(TEXTS),
        document_sha256=draw(st.sampled_from(["", "0" * 64])),
        constants="CODATA 2022",
        writer=draw(st.sampled_from(["", "slopewell 0.1.0"])),
        history=tuple(draw(st.lists(TEXTS, max_size=2))),
        report=draw(st.dictionaries(TEXTS, TEXTS | NUMBERS, max_size=2)),
    )


def small_table(**changes: Any) -> Table:
    """A Lennard-Jones pair on six rows, in eV and ångström."""
    r = np.linspace(1.0, 2.0, 6)
    rows = Rows(
        "A-B",
        r,
        4 * (r**-12 - r**-6),
        24 * (2 * r**-13 - r**-7),
        spacing="separation",
        interpolation="linear",
    )
    return Table(
        **{
            "interactions": (rows,),
            "units": unit_system("eV", "angstrom"),
            "title": "Pair for tests",
            "source": "invented",
            "document": "schema = ...\n",
        }
        | changes
    )


def assert_same(one: Table, other: Table) -> None:
    """Assert that two tables agree in every number and every word; the order of interactions is free."""
    texts = ("title", "source", "purpose", "document", "document_sha256", "constants", "writer", "coordinate")
    assert {key: getattr(one, key) for key in (*texts, "history", "report", "units")} == {
        key: getattr(other, key) for key in (*texts, "history", "report", "units")
    }
    by_name = {rows.name: rows for rows in other.interactions}
    assert set(by_name) == {rows.name for rows in one.interactions}
    for rows in one.interactions:
        assert_same_rows(rows, by_name[rows.name])


def assert_same_rows(one: Rows, other: Rows) -> None:
    """Assert that two interactions agree, each number to the last bit."""
    assert one.columns().keys() == other.columns().keys()
    for name, column in one.columns().items():
        assert column.tobytes() == other.columns()[name].tobytes(), name
    rules = ("spacing", "interpolation", "ends", "certificate", "derived")
    assert {key: getattr(one, key) for key in rules} == {key: getattr(other, key) for key in rules}
