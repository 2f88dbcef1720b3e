"""The verb fit: it writes a document with the values and where they come from."""

from __future__ import annotations

import json
import shutil
import tomllib
from pathlib import Path

import numpy as np
import pytest
from documentation import ROOT
from slopewell.cli import main
from slopewell.document import read_document
from slopewell.fitting import fit
from slopewell.problems import UnusableInput

SCAN = ROOT / "samples" / "scan"


def test_the_new_document_means_the_fitted_curve(tmp_path: Path) -> None:
    shutil.copytree(SCAN, tmp_path / "scan")
    document, fits = fit(tmp_path / "scan" / "beads.toml", tmp_path / "fitted.toml")
    written = read_document(tmp_path / "fitted.toml")
    r = np.linspace(3.0, 10.0, 50)
    for old, new in zip(document.interactions, written.interactions, strict=True):
        assert new.potential.bare.derivatives(r, 1) == pytest.approx(old.potential.bare.derivatives(r, 1), rel=1e-12)
        assert new.fits == ()
    assert [name for name, _ in fits] == ["H-H"]


def test_the_new_document_says_where_its_values_come_from(tmp_path: Path) -> None:
    document, ((_, found),) = fit(SCAN / "beads.toml", tmp_path / "fitted.toml")
    entry = tomllib.loads((tmp_path / "fitted.toml").read_text(encoding="utf-8"))["interaction"][0]
    assert "fit" not in entry
    assert entry["parameters"] == {p.name: p.value for p in found.parameters}
    provenance = entry["fitted"]
    assert (provenance["to"], provenance["sha256"]) == ("heads.csv", found.sha256)
    assert (provenance["document"], provenance["document-sha256"]) == ("beads.toml", document.sha256)
    assert provenance["standard-errors"].keys() == {"D", "a", "r0"}


def test_it_may_be_written_as_json(tmp_path: Path) -> None:
    fit(SCAN / "beads.toml", tmp_path / "fitted.json")
    entry = json.loads((tmp_path / "fitted.json").read_text(encoding="utf-8"))["interaction"][0]
    assert entry["parameters"]["D"] == pytest.approx(3.4, abs=0.05)


def test_a_document_without_anything_to_fit_is_refused() -> None:
    with pytest.raises(UnusableInput, match="nothing to fit"):
        fit(ROOT / "samples" / "argon.toml")


def test_the_command_prints_values_with_their_errors(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["fit", str(SCAN / "beads.toml")]) == 0
    shown = capsys.readouterr().out
    assert shown.startswith("H-H\n  fitted to               24 points of heads.csv, weighted by its column\n")
    assert "root mean square" in shown


def test_the_command_prints_json_alone(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["fit", str(SCAN / "beads.toml"), "--json"]) == 0
    (record,) = json.loads(capsys.readouterr().out)["fits"]
    assert record["parameters"]["r0"]["value"] == pytest.approx(0.56, abs=0.01)
    assert record["residual"]["root_mean_square"] > 0
