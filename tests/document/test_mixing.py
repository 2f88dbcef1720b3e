"""Pairs that a document does not write, filled in by its mixing rule."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from documents import HEAD, problems, read

UNITS = '[units]\nenergy = "K"\nlength = "nm"\n[species.A]\ncharge = 1\n[species.B]\ncharge = -1\n[species.C]\n'
REST = '[cutoff]\nat = 0.9\ntreatment = "shifted-force"\n[grid]\nfrom = 0.25\nto = 0.9\nrows = 101\n'


def like(name: str, epsilon: float, sigma: float, form: str = "lennard-jones", more: str = "") -> str:
    return f"""[[interaction]]
between = ["{name}", "{name}"]
form = "{form}"
parameters = {{ epsilon = {epsilon}, sigma = {sigma}{more} }}
"""


ALL = like("A", 100, 0.3) + like("B", 400, 0.4) + like("C", 225, 0.35)


def document(mixing: str, interactions: str = ALL) -> str:
    return HEAD + UNITS + interactions + f"[mixing]\n{mixing}\n" + REST


def test_the_pairs_that_are_not_written_are_mixed(tmp_path: Path) -> None:
    found = read(document('rule = "lorentz-berthelot"'), tmp_path).interactions
    assert [one.potential.name for one in found] == ["A-A", "B-B", "C-C", "A-B", "A-C", "B-C"]
    assert [one.origin.kind for one in found] == ["stated"] * 3 + ["mixed"] * 3
    assert found[3].origin.rule == "lorentz-berthelot"
    assert found[3].origin.parameters == pytest.approx({"epsilon": 200, "sigma": 0.35})
    # At sigma = 3.5 angstrom the energy is zero and the slope -24 epsilon/sigma: elementary.
    energy, slope = found[3].potential.bare.derivatives(np.array([3.5]), 1)[:, 0]
    assert energy == pytest.approx(0, abs=1e-15)
    assert slope == pytest.approx(-24 * 200 * 8.617333262e-5 / 3.5, rel=1e-9)


def test_a_written_pair_stays_as_it_is(tmp_path: Path) -> None:
    own = ALL + like("A", 7, 0.3).replace('"A", "A"', '"B", "A"')
    found = {one.potential.name: one for one in read(document('rule = "geometric"', own), tmp_path).interactions}
    assert list(found) == ["A-A", "B-B", "C-C", "B-A", "A-C", "B-C"]
    assert found["B-A"].origin.kind == "stated"


def test_excluded_pairs_are_left_out(tmp_path: Path) -> None:
    mixing = 'rule = "kong"\nexclude = [["B", "A"], ["C", "C"], ["C", "A"], ["B", "C"]]'
    found = read(document(mixing, ALL.replace(like("C", 225, 0.35), "")), tmp_path).interactions
    assert [one.potential.name for one in found] == ["A-A", "B-B"]


def test_one_pair_may_differ(tmp_path: Path) -> None:
    override = """[[mixing.override]]
between = ["C", "A"]
rule = "fender-halsey"
parameters = { sigma = "3.1 angstrom" }
grid = { from = 0.2, to = 0.9, rows = 11 }
"""
    found = read(document('rule = "lorentz-berthelot"\n' + override), tmp_path).interactions
    pair = next(one for one in found if one.potential.name == "A-C")
    assert pair.origin.rule == "fender-halsey"
    assert pair.origin.parameters["epsilon"] == pytest.approx(2 * 100 * 225 / 325)
    assert pair.origin.parameters["sigma"] == "3.1 angstrom"
    assert pair.grid.rows == 11


def test_charges_are_added_to_mixed_pairs_where_asked(tmp_path: Path) -> None:
    pairs = like("A", 100, 0.3) + like("B", 400, 0.4)
    exclude = 'exclude = [["C", "C"], ["C", "A"], ["C", "B"]]\n'
    plain, charged = (
        read(document(f'rule = "lorentz-berthelot"\n{exclude}charges = {on}', pairs), tmp_path).interactions[2]
        for on in ("false", "true")
    )
    more = [one.potential.bare.derivatives(np.array([4.0]), 0)[0, 0] for one in (charged, plain)]
    assert more[0] - more[1] == pytest.approx(-14.39964547 / 4, rel=1e-9)


MISTAKES = {
    "like-pair-missing": (
        'rule = "kong"',
        like("A", 1, 0.3) + like("B", 1, 0.3),
        [
            ("mixing", "There is no interaction A-C, and it can't be mixed without C-C."),
            ("mixing", "There is no interaction B-C, and it can't be mixed without C-C."),
            ("mixing", "There is no interaction C-C."),
        ],
    ),
    "form-of-another-rule": (
        'rule = "kong"\nexclude = [["C", "C"], ["C", "A"], ["C", "B"]]',
        "".join(like(name, 1, 0.3, "mie", ", n = 12, m = 6") for name in "AB"),
        [
            (
                "mixing",
                "A-B can't be mixed: kong was published for lennard-jones, born-mayer, buckingham, not for mie.",
            )
        ],
    ),
    "two-forms": (
        'rule = "kong"\nexclude = [["C", "C"], ["C", "A"], ["C", "B"]]',
        like("A", 1, 0.3) + like("B", 1, 0.3, "mie", ", n = 12, m = 6"),
        [("mixing", "A-B can't be mixed: A-A is lennard-jones and B-B is mie.")],
    ),
    "no-single-form": (
        'rule = "kong"\nexclude = [["C", "C"], ["C", "A"], ["C", "B"]]',
        like("A", 1, 0.3)
        + '[[interaction]]\nbetween = ["B", "B"]\nenergy = "e*a/r"\n'
        + 'parameters = { e = "1 eV", a = "1 nm" }\n',
        [("mixing", "A-B can't be mixed: B-B is not a single form of the catalogue.")],
    ),
    "excluded-and-stated": (
        'rule = "kong"\nexclude = [["A", "A"]]',
        ALL,
        [("mixing.exclude", "A-A is excluded, but stated too.")],
    ),
    "override-of-a-stated-pair": (
        'rule = "kong"\n[[mixing.override]]\nbetween = ["A", "A"]',
        ALL,
        [("mixing.override", "A-A is stated and not mixed.")],
    ),
    "unknown-species": (
        'rule = "kong"\nexclude = [["A", "X"]]',
        ALL,
        [("mixing.exclude[0]", 'The species "X" is not declared.')],
    ),
    "listed-twice": (
        'rule = "kong"\nexclude = [["A", "B"], ["B", "A"]]',
        ALL,
        [("mixing.exclude[1]", "B-A is listed twice.")],
    ),
    "override-out-of-range": (
        'rule = "kong"\n[[mixing.override]]\nbetween = ["A", "B"]\nparameters = { epsilon = -1 }',
        ALL,
        [("mixing.override[0].parameters.epsilon", "epsilon (well depth) must be above 0.")],
    ),
    "unknown-rule": (
        'rule = "berthelot"',
        ALL,
        [
            (
                "mixing.rule",
                '"berthelot" is not one of lorentz-berthelot, geometric, waldman-hagler, sixth-power, kong, '
                "fender-halsey.",
            )
        ],
    ),
}


@pytest.mark.parametrize(("mixing", "interactions", "said"), MISTAKES.values(), ids=MISTAKES)
def test_what_can_not_be_mixed_is_said_with_its_name(
    mixing: str, interactions: str, said: list[tuple[str, str]], tmp_path: Path
) -> None:
    assert problems(document(mixing, interactions), tmp_path) == said


def test_a_faulty_like_pair_is_said_once(tmp_path: Path) -> None:
    faulty = ALL.replace("epsilon = 400", "epsilon = -400")
    assert [at for at, _ in problems(document('rule = "kong"', faulty), tmp_path)] == [
        "interaction[1].parameters.epsilon"
    ]
