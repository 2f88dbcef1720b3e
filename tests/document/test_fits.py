"""Parameters fitted to points: values, errors, weights, refusals."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from documents import problems, read, text
from slopewell.document import Interaction

# HCl: P. M. Morse's form (Phys. Rev. 34, 57 (1929)) with D = 37242 cm^-1 and a = 1.8677 per angstrom, as in
# the entry T04-015 of tests/references/diatomics.json; r0 = 1.2746 angstrom from memory.
DEPTH, RANGE, PLACE = 37242.0, 1.8677, 1.2746
UNITS = '[units]\nenergy = "cm^-1"\nlength = "angstrom"\n[species.A]\n'
GRID = "[grid]\nfrom = 0.8\nto = 6\nrows = 101\n"
R = np.linspace(0.8, 4.5, 60)


def morse(r: np.ndarray) -> np.ndarray:
    return DEPTH * ((1 - np.exp(-RANGE * (r - PLACE))) ** 2 - 1)


def scan(folder: Path, noise: float = 50.0, seed: int = 1, weight: np.ndarray | None = None) -> None:
    energy = morse(R) + noise * np.random.default_rng(seed).standard_normal(R.size)
    third = np.full(R.size, max(noise, 1.0)) if weight is None else weight
    rows = (f"{r:.15g} {u:.15g} {w:.6f}" for r, u, w in zip(R, energy, third, strict=True))
    (folder / "scan.dat").write_text("\n".join(rows), encoding="utf-8")


def fitted(
    folder: Path, fit: str = "", form: str = 'form = "morse"', parameters: str = '"D", "a", "r0"'
) -> Interaction:
    return read(document(fit, form, parameters), folder).interactions[0]


def document(fit: str = "", form: str = 'form = "morse"', parameters: str = '"D", "a", "r0"') -> str:
    columns = 'columns = ["separation", "energy", "error"]'
    entry = f'{form}\nfit = {{ parameters = [{parameters}], to = "scan.dat", {columns}{fit} }}\n'
    return text(entry, units=UNITS, grid=GRID, cutoff="", head=HEAD)


HEAD = 'schema = "slopewell/potential/1"\ntitle = "HCl"\nenergy-scale = "1 eV"\n'
COLUMN = ', weight = "column"'


@pytest.mark.parametrize("seed", range(4))
def test_a_scan_of_a_published_morse_curve_is_fitted_back_within_its_errors(seed: int, tmp_path: Path) -> None:
    scan(tmp_path, seed=seed)
    (fit,) = fitted(tmp_path, COLUMN).fits
    off = [(p.value - true) / p.error for p, true in zip(fit.parameters, (DEPTH, RANGE, PLACE), strict=True)]
    # Within three standard errors each, for these fixed seeds; errors of the size that the noise gives.
    assert np.abs(off).max() < 3
    assert all(0 < p.error < 0.01 * abs(p.value) for p in fit.parameters)
    assert fit.reduced_chi_squared == pytest.approx(1, abs=0.6)
    assert fit.root_mean_square == pytest.approx(50 / 8065.54, rel=0.4)


def test_without_noise_the_parameters_come_back_exactly(tmp_path: Path) -> None:
    scan(tmp_path, noise=0.0)
    found = fitted(tmp_path)
    assert [p.value for p in found.fits[0].parameters] == pytest.approx([DEPTH, RANGE, PLACE], rel=1e-8)
    assert found.potential.bare.derivatives(R, 0)[0] * 8065.543937 == pytest.approx(morse(R), rel=1e-5, abs=0.01)


def test_a_formula_of_ones_own_is_fitted_in_the_units_of_its_starts(tmp_path: Path) -> None:
    scan(tmp_path, noise=0.0)
    starts = 'parameters = { D = "5 eV", a = "20 nm^-1", s = "1.2746 angstrom" }'
    form = f'energy = "D*((1 - exp(-a*(r - s)))^2 - 1)"\n{starts}'
    first, second = fitted(tmp_path, form=form, parameters='"D", "a"').fits[0].parameters
    assert (first.unit, second.unit) == ("eV", "nm^-1")
    assert (first.value, second.value) == pytest.approx((DEPTH / 8065.543937, 10 * RANGE), rel=1e-7)


def test_correlations_are_a_symmetric_matrix_with_ones(tmp_path: Path) -> None:
    scan(tmp_path)
    matrix = np.array(fitted(tmp_path).fits[0].correlations)
    assert matrix.diagonal() == pytest.approx(1)
    assert matrix == pytest.approx(matrix.T)
    assert np.abs(matrix - np.eye(3)).max() < 1


def test_boltzmann_weights_forget_the_wall(tmp_path: Path) -> None:
    scan(tmp_path, noise=0.0)
    lines = (tmp_path / "scan.dat").read_text().splitlines()
    first = lines[0].split()
    lines[0] = f"{first[0]} {float(first[1]) + 5000:.6f} {first[2]}"
    (tmp_path / "scan.dat").write_text("\n".join(lines))
    weighted, even = (
        abs(fitted(tmp_path, weight).fits[0].parameters[1].value - RANGE)
        for weight in (', weight = "boltzmann", temperature = "1000 K"', "")
    )
    assert weighted < 1e-5 * even


def test_uniform_errors_come_from_the_scatter(tmp_path: Path) -> None:
    scan(tmp_path)
    even, known = (fitted(tmp_path, weight).fits[0] for weight in ("", COLUMN))
    ratio = even.parameters[0].error / known.parameters[0].error
    assert ratio == pytest.approx(known.reduced_chi_squared**0.5, rel=1e-3)
    assert even.reduced_chi_squared is None


MORSE = 'form = "morse"\nparameters = { a = 1.9, r0 = 1.3 }'
MISTAKES = {
    "unknown-parameter": (
        document(form=MORSE, parameters='"D", "b"'),
        "fit.parameters[1]",
        'The parameter "b" has no value to start from.',
    ),
    "twice": (document(form=MORSE, parameters='"D", "D"'), "fit.parameters[1]", '"D" is listed twice.'),
    "no-temperature": (
        document(', weight = "boltzmann"'),
        "fit.weight",
        "Boltzmann weights need a temperature.",
    ),
    "no-file": (document().replace("scan.dat", "scam.dat"), "fit.to", "can't be read"),
    "not-determined": (
        document(
            form='energy = "a*b*e*exp(-r/s)"\nparameters = { a = 1, b = 1, e = "1 eV", s = "1 angstrom" }',
            parameters='"a", "b"',
        ),
        "fit",
        "the points do not determine all of the parameters",
    ),
}


@pytest.mark.parametrize(("document_", "at", "words"), MISTAKES.values(), ids=MISTAKES)
def test_what_can_not_be_fitted_is_said(document_: str, at: str, words: str, tmp_path: Path) -> None:
    scan(tmp_path)
    ((place, says),) = problems(document_, tmp_path)
    assert place == f"interaction[0].{at}"
    assert words in says


def test_a_fit_needs_more_points_than_parameters(tmp_path: Path) -> None:
    (tmp_path / "scan.dat").write_text("1 1 1\n2 2 1\n3 1 1\n")
    assert problems(document(), tmp_path) == [
        ("interaction[0].fit.to", "3 points can't determine 3 parameters and their errors.")
    ]
