"""Sums, segments, joins and charges of a document."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from documents import LENNARD_JONES, UNITS, problems, read, text

CHARGED = UNITS.replace("[species.B]", "charge = 0.5\n[species.B]\ncharge = -2")
NEUTRAL = UNITS
TERMS = """[[interaction.term]]
form = "born-mayer"
parameters = { A = 1000, rho = 0.3 }
[[interaction.term]]
energy = "-C/r^6"
parameters = { C = "30 eV angstrom^6" }
"""
SWITCH = '[interaction.cutoff]\nat = 9\ntreatment = "switch"\nfrom = 7\n'
GRID = "[grid]\nfrom = 0.3\nto = 9\nrows = 101\n"


def segments(join: str, outer: str = 'form = "morse"\nparameters = { D = 2, a = 1.5, r0 = 2.4 }\n') -> str:
    return f"""[[interaction.segment]]
form = "zbl"
parameters = {{ Z1 = 14, Z2 = 14 }}
[[interaction.segment]]
join = {join}
{outer}"""


def document(interaction: str, **parts: str) -> str:
    return text(interaction, cutoff=SWITCH, **({"grid": GRID} | parts))


def energy(document_: str, folder: Path, *r: float, order: int = 0) -> list[float]:
    bare = read(document_, folder).interactions[0].potential.bare
    return bare.derivatives(np.array(r), order)[order].tolist()


def test_a_sum_of_terms_is_the_formula_in_one(tmp_path: Path) -> None:
    whole = 'form = "buckingham"\nparameters = { A = 1000, rho = 0.3, C = 30 }\n'
    summed, one = (energy(document(part), tmp_path, 0.5, 2.0, 8.0) for part in (TERMS, whole))
    assert summed == pytest.approx(one, rel=1e-14)


def test_a_screened_repulsion_keeps_its_published_values_inside_the_bridge(
    tmp_path: Path, published: Callable[[str], Any]
) -> None:
    # Ziegler, Biersack and Littmark (1985); the tolerance covers the published choices of constants.
    joined = document(segments('{ method = "exp-polynomial", from = 0.8, to = 1.8 }'))
    stated = published("T07-010").value.replace("=", " ").split()
    assert energy(joined, tmp_path, 0.5) == pytest.approx([float(stated[1])], rel=5e-4)
    slope = energy(joined, tmp_path, 0.5, order=1)
    assert slope == pytest.approx([-float(stated[stated.index("F") + 1])], rel=5e-4)


def test_outside_the_bridge_stands_the_outer_segment(tmp_path: Path) -> None:
    joined = document(segments('{ method = "polynomial", degree = 7, from = 0.8, to = 1.8 }'))
    alone = document('form = "morse"\nparameters = { D = 2, a = 1.5, r0 = 2.4 }\n')
    assert energy(joined, tmp_path, 1.9, 5.0) == energy(alone, tmp_path, 1.9, 5.0)


def test_a_segment_may_be_a_sum(tmp_path: Path) -> None:
    outer = TERMS.replace("[[interaction.term]]", "[[interaction.segment.term]]")
    joined = document(segments('{ method = "meet", at = 1.4 }', outer))
    assert energy(joined, tmp_path, 1.5, 3.0) == energy(document(TERMS), tmp_path, 1.5, 3.0)


def test_segments_that_meet_jump_as_they_are(tmp_path: Path) -> None:
    (interaction,) = read(document(segments('{ method = "meet", at = 1.4 }')), tmp_path).interactions
    assert [float(edge) for edge in interaction.potential.bare.edges()] == [1.4]
    assert (interaction.potential.bridges, interaction.potential.segments) == ((), True)


def test_charges_add_their_coulomb_energy(tmp_path: Path) -> None:
    pair = {"between": '["A", "B"]', "units": CHARGED}
    bare, charged = (document(f"{key}{LENNARD_JONES}", **pair) for key in ("", "charges = true\n"))
    more = np.subtract(energy(charged, tmp_path, 3.0, 6.0), energy(bare, tmp_path, 3.0, 6.0))
    # e^2/(4 pi eps0) = 14.39964547 eV angstrom: CODATA 2022.
    assert more == pytest.approx([-14.39964547 / 3, -14.39964547 / 6], rel=1e-9)


def test_a_common_cutoff_holds_where_there_is_no_other(tmp_path: Path) -> None:
    common = '[cutoff]\nat = 8\ntreatment = "shifted-stiffness"\n'
    own = LENNARD_JONES + 'cutoff = { at = 6, treatment = "truncate" }\n'
    pairs = f'{LENNARD_JONES}[[interaction]]\nbetween = ["A", "B"]\n{own}'
    found = read(text(pairs, cutoff="", outputs=common), tmp_path).interactions
    cutoffs = [(float(one.potential.cutoff.at), one.potential.cutoff.treatment) for one in found]
    assert cutoffs == [(8, "shifted-stiffness"), (6, "truncate")]


PLACE = "interaction[0].segment"
MISTAKES = {
    "no-join": (segments("X").replace("join = X\n", ""), f"{PLACE}[1]", "does not say how it joins"),
    "join-of-the-first": (
        segments('{ method = "meet", at = 1 }').replace(
            'form = "zbl"', 'join = { method = "meet", at = 1 }\nform = "zbl"'
        ),
        f"{PLACE}[0].join",
        "none before it",
    ),
    "bridge-without-end": (
        segments('{ method = "blend", from = 1 }'),
        f"{PLACE}[1].join.to",
        'the key "to" is missing',
    ),
    "meet-with-range": (
        segments('{ method = "meet", at = 1, to = 2 }'),
        f"{PLACE}[1].join.to",
        "without meaning",
    ),
    "bridge-backwards": (
        segments('{ method = "blend", from = 2, to = 1 }'),
        f"{PLACE}[1].join.to",
        "ends before it starts",
    ),
    "bridge-off-the-grid": (segments('{ method = "blend", from = 0.1, to = 1 }'), PLACE, "must ascend"),
    "exponential-to-attraction": (
        segments('{ method = "exp-polynomial", from = 1, to = 3 }'),
        PLACE,
        "an exponential can't bridge to an energy that is not positive",
    ),
    "join-in-energy": (
        segments('{ method = "meet", at = "1 eV" }'),
        f"{PLACE}[1].join.at",
        "length is expected",
    ),
    "force-of-a-sum": ('force = "1/r"\n' + TERMS, "interaction[0].force", 'has no meaning beside "term"'),
    "term-with-a-mistake": (
        TERMS.replace("born", "bron"),
        "interaction[0].term[0].form",
        'no form "bron-mayer"',
    ),
    "charge-unknown": (
        "charges = true\n" + LENNARD_JONES,
        "interaction[0].charges",
        'The species "A" has no charge.',
    ),
}


@pytest.mark.parametrize(("interaction", "at", "said"), MISTAKES.values(), ids=MISTAKES)
def test_a_mistake_is_said_at_its_place(interaction: str, at: str, said: str, tmp_path: Path) -> None:
    ((place, says),) = problems(document(interaction), tmp_path)
    assert place == at
    assert said in says
