"""The inherited tables: each mistake is named as their page says, and mended where it says so."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from slopewell.conversion import Changes, convert
from slopewell.tables import Reading
from slopewell.workflow import check

FOLDER = Path(__file__).parent.parent / "samples" / "inherited"
READING = Reading(("separation", "energy", "force"), "kJ/mol,nm")
LISTED = re.findall(
    r"^\| `([\w-]+\.dat)` \| (?:`([\w-]+)`|nothing) \| (yes|) ?\|", (FOLDER / "README.md").read_text(), re.M
)


def test_page_lists_every_table() -> None:
    assert sorted(name for name, _, _ in LISTED) == sorted(path.name for path in FOLDER.glob("*.dat"))


@pytest.mark.parametrize(("name", "mistake"), [(name, mistake) for name, mistake, _ in LISTED])
def test_mistake_is_named(name: str, mistake: str) -> None:
    (subject,) = check([FOLDER / name], reading=READING).subjects
    named = {finding.mistake for finding in subject.findings if finding.mistake}

    assert named == ({mistake} if mistake else set())


@pytest.mark.parametrize(("name", "mistake"), [(name, mistake) for name, mistake, mended in LISTED if mended])
def test_mended_copy_passes_and_says_what_was_done(name: str, mistake: str, tmp_path: Path) -> None:
    done = convert(FOLDER / name, tmp_path / "new.csv", Changes(mend=mistake), reading=READING)
    (subject,) = check(done.written).subjects

    assert subject.verdict in ("pass", "warn")
    assert any(line.startswith(f"mended {mistake}") for line in done.table.history)


@pytest.mark.parametrize(
    ("name", "mistake", "says"),
    [
        ("water-water-sign", "force-sign-flipped", "sign of the force turned"),
        ("water-water-units", "force-in-other-units", "force multiplied by 10"),
        ("ion-water-over-r", "force-divided-by-separation", "force multiplied by the separation"),
        ("ion-water-twice", "counted-twice", "force divided by 2"),
        ("polymer-polymer-offset", "constant-force-offset", "0.226608 kJ/mol/nm added to the force"),
    ],
)
def test_history_says_it_in_the_words_of_the_trade(name: str, mistake: str, says: str) -> None:
    done = convert(FOLDER / f"{name}.dat", None, Changes(mend=mistake), reading=READING)
    assert done.table.history[-1] == f"mended {mistake} in {name}: {says}"
