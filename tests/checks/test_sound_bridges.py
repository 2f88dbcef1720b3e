"""sound-bridges: a bridge that turns on its own is a warning; how far it bulges is always said."""

from __future__ import annotations

from pathlib import Path

from documents import facts, text
from slopewell.checks import Finding
from slopewell.checks.sound_bridges import CHECK

SWITCH = '[interaction.cutoff]\nat = 9\ntreatment = "switch"\nfrom = 7\n'
GRID = "[grid]\nfrom = 0.3\nto = 9\nrows = 101\n"


WELL = 'form = "morse"\nparameters = { D = 0.8, a = 1.4, r0 = 2.9 }'
OVERLAP = 'form = "born-mayer"\nparameters = { A = 900, rho = 0.352 }'


def found(join: str, folder: Path, outer: str = WELL) -> list[Finding]:
    pieces = f"""[[interaction.segment]]
form = "zbl"
parameters = {{ Z1 = 8, Z2 = 8 }}
[[interaction.segment]]
{outer}
join = {join}
"""
    return list(CHECK.look(facts(text(pieces, cutoff=SWITCH, grid=GRID), folder)))


def test_a_bridge_that_digs_a_well_of_its_own_is_a_warning(tmp_path: Path) -> None:
    (finding,) = found('{ method = "polynomial", degree = 7, from = 0.6, to = 2.4 }', tmp_path)
    assert finding.level == "warning"
    assert "turns at 1.4541, 2.23354 angstrom" in finding.says
    assert "falls below zero" in finding.says
    assert (finding.start, finding.end) == (0.6, 2.4)


def test_a_monotone_bridge_earns_a_note_of_its_bulge(tmp_path: Path) -> None:
    (finding,) = found('{ method = "exp-polynomial", from = 0.4, to = 1.6 }', tmp_path, OVERLAP)
    assert finding.level == "note"
    assert finding.unit == "eV"


def test_a_blend_that_stays_between_the_curves_is_silent(tmp_path: Path) -> None:
    assert found('{ method = "blend", from = 0.4, to = 1.6 }', tmp_path, OVERLAP) == []


def test_one_turn_between_slopes_of_two_signs_is_asked_for(tmp_path: Path) -> None:
    (finding,) = found('{ method = "polynomial", degree = 3, from = 2.0, to = 3.2 }', tmp_path)
    assert "turns" not in finding.says


def test_segments_that_meet_have_no_bridge(tmp_path: Path) -> None:
    assert found('{ method = "meet", at = 1 }', tmp_path) == []


def test_a_document_without_segments_has_no_bridge(tmp_path: Path) -> None:
    assert list(CHECK.look(facts(text(), tmp_path))) == []
