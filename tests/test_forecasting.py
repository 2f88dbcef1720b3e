"""The verb predict: curve and table side by side, in the file's units, with what the source states."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
from slopewell.cli import main
from slopewell.forecasting import predict, read_density, read_masses, read_temperatures
from slopewell.problems import UnusableInput
from slopewell.reports.forecast import forecast_lines

DOCUMENT = """
schema = "slopewell/potential/1"
title = "Beads, invented"
temperature = "300 K"
[units]
energy = "kJ/mol"
length = "nm"
[species.A]
mass = "40 dalton"
{more_species}
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = {{ epsilon = 5.0, sigma = 0.47 }}
{cutoff}
expect = {{ well-depth = {{ value = 5.0, within = 0.001 }} }}
{more}
[grid]
from = 0.3
to = 2.4
rows = 2001
[[output]]
file = "beads.h5"
"""
MIXED = """
[[interaction]]
between = ["A", "B"]
form = "lennard-jones"
parameters = { epsilon = 4.0, sigma = 0.4 }
"""


def document(folder: Path, *, cutoff: str = "", more: str = "", species: str = "") -> Path:
    path = folder / "beads.toml"
    path.write_text(DOCUMENT.format(cutoff=cutoff, more=more, more_species=species), encoding="utf-8")
    return path


def rows_of(record: dict[str, Any], quantity: str, **keys: Any) -> list[dict[str, Any]]:
    return [
        row
        for row in record["predictions"]
        if row["quantity"] == quantity and all(row[key] == value for key, value in keys.items())
    ]


@pytest.fixture(scope="module")
def record(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Any]:
    path = document(tmp_path_factory.mktemp("predict"))
    return predict(path, temperatures=(300.0, 600.0), structures=("fcc",)).record()


def test_every_quantity_has_its_keys_and_unit(record: dict[str, Any]) -> None:
    expected = {
        "vibrational-level": ({"level"}, "cm^-1"),
        "harmonic-wavenumber": (set(), "cm^-1"),
        "anharmonic-wavenumber": (set(), "cm^-1"),
        "dissociation-energy": (set(), "kJ/mol"),
        "lattice-constant": ({"structure"}, "nm"),
        "nearest-distance": ({"structure"}, "nm"),
        "cohesive-energy": ({"structure"}, "kJ/mol"),
        "bulk-modulus": ({"structure"}, "GPa"),
        "elastic-constant": ({"structure", "component"}, "GPa"),
        "second-virial": ({"temperature"}, "cm^3/mol"),
        "second-virial-quantum": ({"temperature"}, "cm^3/mol"),
        "boyle-temperature": (set(), "K"),
        "collision-integral": ({"order", "temperature"}, "1"),
        "tail-energy": ({"number_density", "number_density_unit"}, "kJ/mol"),
        "tail-pressure": ({"number_density", "number_density_unit"}, "MPa"),
    }
    common = {"subject", "quantity", "curve", "table", "expected", "unit"}
    for quantity, (keys, unit) in expected.items():
        row = rows_of(record, quantity)[0]
        assert (set(row) - common, row["unit"], row["subject"]) == (keys, unit, "A-A"), quantity


def test_curve_and_table_agree_and_the_source_is_beside_them(record: dict[str, Any]) -> None:
    (depth,) = rows_of(record, "well-depth")
    assert depth["expected"] == 5.0
    assert depth["curve"] == pytest.approx(5.0, rel=1e-9)
    assert depth["table"] == pytest.approx(5.0, rel=1e-8)
    (constant,) = rows_of(record, "lattice-constant")
    # The table ends at 5 σ, so that its crystal lacks what is beyond.
    assert constant["table"] > constant["curve"]
    # Lennard-Jones fcc: 1.5418 σ at rest (closed lattice sums, T03-006).
    assert constant["curve"] == pytest.approx(1.5417 * 0.47, rel=1e-3)
    assert constant["table"] == pytest.approx(constant["curve"], rel=1e-3)


def test_a_table_with_its_document_inside_gives_the_same(record: dict[str, Any], tmp_path: Path) -> None:
    path = document(tmp_path)
    assert main(["tabulate", str(path), "--accept", "cutoff-steps"]) == 0
    again = predict(tmp_path / "beads.h5", temperatures=(300.0, 600.0), structures=("fcc",)).record()
    assert again["predictions"] == record["predictions"]


def test_json_on_standard_output(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    status = main(["predict", str(document(tmp_path)), "--json", "--structure", "sc", "--temperatures", "300"])
    found = json.loads(capsys.readouterr().out)
    assert status == 0
    assert rows_of(found, "second-virial", temperature=300.0)
    assert any("C12 = C44" in note for note in found["notes"])


def test_one_screen_for_people(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["predict", str(document(tmp_path)), "--temperatures", "300,600"]) == 0
    shown = capsys.readouterr().out
    assert "difference" in shown
    assert "expected" in shown
    assert len(shown.splitlines()) < 60


def test_a_well_that_only_the_table_has_is_none() -> None:
    common: dict[str, Any] = {"curve": None, "table": 2.0, "expected": None, "unit": "eV"}
    rows = [{"subject": name, "quantity": "well-depth", **common} for name in ("A-A", "B-B")]
    rows += [{"subject": "A-B", "quantity": "well-depth", **common, "curve": 3.0}]
    lines = {line.split()[0]: line.split() for line in forecast_lines("Oxide", rows, []) if line.strip()}
    assert lines["A-A"][1:] == lines["B-B"][1:] == ["-"] * 7
    assert lines["A-B"][2] == "3"
    assert "crystal" not in " ".join(lines["One"])


def test_a_missing_pair_is_told_and_refused_where_it_is_asked_for(tmp_path: Path) -> None:
    path = document(tmp_path, more=MIXED, species='[species.B]\nmass = "20 dalton"')
    found = predict(path, temperatures=(300.0,), structures=("fcc",))
    assert any("B-B" in note for note in found.notes)
    with pytest.raises(UnusableInput, match="missing: B-B"):
        predict(path, structures=("rocksalt",))


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("150:250:50", (150.0, 200.0, 250.0)),
        ("100,300", (100.0, 300.0)),
        ("300", (300.0,)),
        ("1:2:0.5", (1.0, 1.5, 2.0)),
    ],
)
def test_temperatures(text: str, expected: tuple[float, ...]) -> None:
    assert read_temperatures(text) == expected


@pytest.mark.parametrize("text", ["cold", "-5", "300:100:0", "", "1:100000:0.1"])
def test_no_temperatures(text: str) -> None:
    with pytest.raises(UnusableInput):
        read_temperatures(text)


def test_masses_and_densities() -> None:
    assert read_masses(["A=40 dalton"]) == {"A": 40.0}
    assert read_density("21 nm^-3") == pytest.approx(0.021)
    for wrong in ("A=40 eV", "A=-1 dalton"):
        with pytest.raises(UnusableInput):
            read_masses([wrong])
    with pytest.raises(UnusableInput):
        read_density("1 nm")


def test_a_mass_of_a_species_that_is_not_there_is_refused() -> None:
    with pytest.raises(UnusableInput, match='no species "Argon"'):
        predict(Path(__file__).parent.parent / "samples" / "argon.toml", masses={"Argon": 39.95})
