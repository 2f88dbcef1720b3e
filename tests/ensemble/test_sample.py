"""The sample of parameter sets says that it is invented, and passes."""

from __future__ import annotations

from pathlib import Path

import h5py
from documentation import ROOT
from slopewell.ensemble import tabulate_sets

SAMPLE = ROOT / "samples" / "ensemble"


def test_the_sample_is_marked_as_invented_and_every_set_of_it_passes(tmp_path: Path) -> None:
    assert "invented" in (SAMPLE / "beads.toml").read_text(encoding="utf-8").partition("\n")[0]
    made = tabulate_sets(SAMPLE / "beads.toml", SAMPLE / "posterior.csv", into=tmp_path / "beads.h5", workers=1)
    assert made.verdicts == {"pass": 20}
    with h5py.File(made.tables) as file:
        assert file["index/W-W.equilibrium_separation"].attrs["units"] == "nm"
        assert len({float(depth) for depth in file["index/P-P.well_depth"]}) > 15
