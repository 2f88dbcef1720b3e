"""Argon from its document through a table to the second virial coefficient of a reference equation of state."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

import pytest
from slopewell.forecasting import Forecast, predict
from slopewell.forms import form, paste_block
from slopewell.tabulating import tabulate

# The catalogue's example is argon: B. Jaeger, R. Hellmann, E. Bich, E. Vogel, Mol. Phys. 107, 2181 (2009),
# parameters from memory, as in the entry T08-008 of tests/references/real_gases.json.
REST = """
[grid]
from = "2.2 angstrom"
to = "30 angstrom"
rows = 4001
spacing = "inverse"
[[output]]
file = "argon.h5"
"""
HEAD = """schema = "slopewell/potential/1"
title = "Argon"
temperature = "100 K"
[units]
energy = "K"
length = "nm"
[species.Ar]
mass = "39.95 dalton"
"""


@pytest.fixture(scope="module")
def forecast(tmp_path_factory: pytest.TempPathFactory) -> Forecast:
    folder = tmp_path_factory.mktemp("argon")
    block = paste_block(form("jaeger-hellmann")).replace('"A", "B"', '"Ar", "Ar"')
    (folder / "argon.toml").write_text(HEAD + block + REST, encoding="utf-8")
    (table,) = tabulate(folder / "argon.toml", accept=["cutoff-steps"]).written
    return predict(table, temperatures=[200.0, 300.0, 500.0, 700.0], structures=["fcc"])


@pytest.mark.parametrize(
    ("entry", "temperature"), [("T08-012", 200.0), ("T08-013", 300.0), ("T08-015", 500.0), ("T08-016", 700.0)]
)
def test_the_table_gives_the_second_virial_coefficient_of_coolprop(
    forecast: Forecast, entry: str, temperature: float, published: Callable[[str], Any]
) -> None:
    words = published(entry).value.replace(";", "").split()
    reference = float(words[words.index("CoolProp") + 1])
    rows = forecast.record()["predictions"]
    found = next(
        row["table"] for row in rows if row["quantity"] == "second-virial-quantum" and row["temperature"] == temperature
    )
    # The scatter of equation of state and potential that the entry states.
    assert found == pytest.approx(reference, abs=0.2)
