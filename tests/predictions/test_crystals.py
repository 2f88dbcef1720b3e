"""Crystals against closed lattice sums, metals and salts with published parameters, and finite strains."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from itertools import product
from math import pi, sqrt
from typing import Any

import numpy as np
import pytest
from slopewell.predictions.crystals import Crystal, ionic, look
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.ewald import charged_hessian, madelung_constant, madelung_energy
from slopewell.predictions.figures import GIGAPASCAL, Setting, System
from slopewell.predictions.lattice import Lattice
from slopewell.predictions.structures import STRUCTURES, Structure
from slopewell.units.constants import AVOGADRO, COULOMB, ELEMENTARY_CHARGE

from .conftest import MORSE, CurveOf

BY_NAME = {structure.name: structure for structure in STRUCTURES}
one_species = pytest.mark.parametrize("name", ["sc", "bcc", "fcc", "hcp", "diamond"])


@pytest.mark.parametrize(
    ("entry", "name", "power"),
    [("T03-001", "sc", 6), ("T03-003", "bcc", 6), ("T03-004", "bcc", 12), ("T03-006", "fcc", 12),
     ("T03-007", "hcp", 6),     ("T03-009", "sc", 8), ("T03-010", "fcc", 8)],
)  # fmt: skip
def test_sums_of_inverse_powers(
    published: Callable[[str], Any], curve_of: CurveOf, entry: str, name: str, power: int
) -> None:
    # Computed by Epstein zeta functions; Lennard-Jones and Ingham (1925) and Kittel print 5 to 7 digits.
    structure = BY_NAME[name]
    lattice = Lattice(structure, {(0, 0): curve_of(f"1/r^{power}", "0.5", "4")})
    energy = lattice.sums(1 / lattice.nearest)[0] / structure.units
    assert 2 * energy == pytest.approx(published(entry).number, rel=1e-12)


@pytest.mark.parametrize(("entry", "name"), [("T03-012", "sc"), ("T03-013", "bcc"), ("T03-015", "hcp")])
def test_lennard_jones_crystals(published: Callable[[str], Any], reduced: EnergyCurve, entry: str, name: str) -> None:
    stated, crystal = published(entry), Crystal(BY_NAME[name], {(0, 0): reduced})
    assert crystal.constant is not None
    assert crystal.constant * crystal.lattice.nearest == pytest.approx(stated.part("R0/sigma"), rel=1e-11)
    assert crystal.sums(crystal.constant)[0] / crystal.structure.units == pytest.approx(stated.part("E/eps"), rel=1e-11)


def test_bulk_modulus_of_lennard_jones(published: Callable[[str], Any], reduced: EnergyCurve) -> None:
    # Closed form 4·A12·(A6/A12)^(5/2); Kittel and Ashcroft and Mermin print 75 ε/σ³.
    crystal = Crystal(BY_NAME["fcc"], {(0, 0): reduced})
    assert crystal.constant is not None
    found = crystal.bulk_modulus(crystal.constant) / GIGAPASCAL
    assert found == pytest.approx(published("T03-016").number, rel=1e-10)


METALS = [
    ("T05-001", "fcc", "0.3429", "1.3588", "2.866"),
    ("T05-003", "fcc", "0.2348", "1.1836", "3.733"),
    ("T05-004", "fcc", "0.4205", "1.4199", "2.78"),
    ("T05-006", "bcc", "0.4174", "1.3885", "2.845"),
    ("T05-007", "bcc", "0.9906", "1.4116", "3.032"),
    ("T05-009", "bcc", "0.4414", "1.5721", "2.754"),
    ("T05-010", "bcc", "0.06334", "0.58993", "5.336"),
]


@pytest.mark.parametrize(("entry", "name", "depth", "steepness", "bond"), METALS)
def test_metals_of_girifalco_and_weizer(
    published: Callable[[str], Any],
    curve_of: CurveOf,
    entry: str,
    name: str,
    depth: str,
    steepness: str,
    bond: str,
) -> None:
    # L. A. Girifalco and V. G. Weizer, Phys. Rev. 114, 687 (1959); parameters from memory.
    stated = published(entry)
    values = {part.split("=")[0].strip(): float(part.split("=")[1].split()[0]) for part in stated.value.split(";")}
    curve = curve_of(MORSE, "0.8", "30", D=depth, a=steepness, re=bond)
    crystal = Crystal(BY_NAME[name], {(0, 0): curve})
    a = crystal.constant
    assert a == pytest.approx(values["a0"], abs=2e-6)
    assert crystal.sums(a)[0] == pytest.approx(values["E"], abs=2e-6)
    assert crystal.bulk_modulus(a) == pytest.approx(values["B"], abs=0.0051)


@pytest.mark.parametrize(
    ("name", "expected"),
    # 1.7475645946331822 of rock salt: OEIS A085469; caesium chloride A181152; zinc blende computed (T03-019).
    [
        ("rocksalt", 1.7475645946331822),
        ("caesium-chloride", 1.7626747730709884),
        ("zinc-blende", 1.6380550533887894),
    ],
)
def test_madelung_constants(name: str, expected: float) -> None:
    assert madelung_constant(BY_NAME[name]) == pytest.approx(expected, rel=1e-13)


# M. P. Tosi and F. G. Fumi, J. Phys. Chem. Solids 25, 45 (1964): ρ, σ₊, σ₋, then C and D of ++, +−, −−
# in 10⁻⁷⁹ J·m⁶ and 10⁻⁹⁹ J·m⁸; parameters from memory.
SALTS = [
    ("T06-009", "0.317", ("1.170", "1.585"), ("1.68", "11.2", "116"), ("0.8", "13.9", "233")),
    ("T06-010", "0.337", ("1.463", "1.585"), ("24.3", "48.0", "124.5"), ("24.0", "73.0", "250")),
    ("T06-012", "0.335", ("1.463", "1.716"), ("24.3", "60.0", "206"), ("24.0", "99.0", "470")),
]


def salt(curve_of: CurveOf, rho: str, radii: tuple[str, str], c: tuple[str, ...], d: tuple[str, ...]) -> System:
    joule = 1 / ELEMENTARY_CHARGE
    names, curves = ("A", "B"), {}
    for k, (i, j) in enumerate([(0, 0), (0, 1), (1, 1)]):
        curves[names[i], names[j]] = curve_of(
            "q*ke/r + b*exp((s - r)/rho) - C/r^6 - D/r^8", "1.8", "20", q=(-1) ** (i + j),
            ke=COULOMB, rho=rho,
            b=Fraction("0.338e-19") * joule * Fraction(("1.25", "1", "0.75")[k]),
            s=Fraction(radii[i]) + Fraction(radii[j]),
            C=Fraction(c[k]) * joule / 10**19, D=Fraction(d[k]) * joule / 10**19,
        )  # fmt: skip
    return System(names, curves, {"A": 23.0, "B": 35.0})


@pytest.mark.parametrize(("entry", "rho", "radii", "c", "d"), SALTS)
def test_salts_of_fumi_and_tosi(
    published: Callable[[str], Any], curve_of: CurveOf, entry: str, rho: str, radii: Any, c: Any, d: Any
) -> None:
    words = published(entry).value.replace(";", "").split()
    nearest, energy = (float(word.split("=")[1]) for word in (words[0], words[2]))
    system = salt(curve_of, rho, radii, c, d)
    charges, curves = ionic(system, system.species)
    crystal = Crystal(BY_NAME["rocksalt"], curves, charges)
    assert charges == pytest.approx((1.0, -1.0), rel=1e-9)
    assert crystal.constant is not None
    assert crystal.constant / 2 == pytest.approx(nearest, abs=2e-6)
    assert crystal.sums(crystal.constant)[0] == pytest.approx(energy, rel=1e-7)


def test_energy_of_born_and_lande(published: Callable[[str], Any], curve_of: CurveOf) -> None:
    # −M·k_e/r₀·(1 − 1/n): r₀ = 2.81 Å, n = 8; the repulsion acts on nearest neighbours only.
    nearest = 2.81
    strength = 1.7475645946331822 * float(COULOMB) * nearest**7 / (8 * 6)
    repulsion = curve_of("B/r^8", "1", "3.5", B=Fraction(strength), reach=3.5)
    nothing = curve_of("0*r", "1", "3.5", reach=3.5)
    crystal = Crystal(BY_NAME["rocksalt"], {(0, 1): repulsion, (0, 0): nothing, (1, 1): nothing}, (1.0, -1.0))
    assert crystal.constant == pytest.approx(2 * nearest, rel=1e-9)
    mole = crystal.sums(2 * nearest)[0] * float(ELEMENTARY_CHARGE * AVOGADRO) / 1e3
    assert mole == pytest.approx(published("T06-001").number, rel=1e-8)


@one_species
def test_elastic_constants_add_up_to_the_bulk_modulus(reduced: EnergyCurve, name: str) -> None:
    crystal = Crystal(BY_NAME[name], {(0, 0): reduced})
    a = crystal.constant
    assert a is not None
    elastic = crystal.elastic(a) / GIGAPASCAL * crystal.volume(a)
    held = crystal.lattice.hessian(a).strain
    bulk = crystal.bulk_modulus(a) / GIGAPASCAL * crystal.volume(a)
    assert held[:3, :3].sum() / 9 == pytest.approx(bulk, rel=1e-9)
    if name in ("sc", "bcc", "fcc"):
        assert elastic[0, 1] == pytest.approx(elastic[3, 3], rel=1e-9)  # Cauchy's relation
    else:
        assert elastic[5, 5] < held[5, 5]


def strained_energy(structure: Structure, curve: EnergyCurve, a: float, strain: np.ndarray, shift: np.ndarray) -> float:
    """Return the energy of a cell by a plain sum over a curve that ends, an own loop as a second way."""
    cell = a * np.array(structure.cell)
    places = a * np.array([place for _, place in structure.atoms])
    places[1:] += shift
    steps = np.array(list(product(range(-4, 5), repeat=3))) @ cell
    total = 0.0
    for start, end in product(places, places):
        r = np.linalg.norm((steps + end - start) @ (np.eye(3) + strain), axis=1)
        total += 0.5 * float(curve.energy(r[r > 1e-6]).sum())
    return total


@pytest.mark.parametrize("name", ["fcc", "bcc", "diamond"])
def test_elastic_constants_against_finite_strains(curve_of: CurveOf, name: str) -> None:
    from scipy.optimize import minimize

    # Force and stiffness are continuous at the cutoff, so that no shell jumps across it.
    curve = curve_of("4*(1/r^12 - 1/r^6)*(2.2 - r)^4", "0.6", "2.2", reach=2.2)
    structure = BY_NAME[name]
    crystal = Crystal(structure, {(0, 0): curve})
    a = crystal.constant
    assert a is not None

    def energy(strain: np.ndarray) -> float:
        if len(structure.atoms) == 1:
            return strained_energy(structure, curve, a, strain, np.zeros(3))
        return float(minimize(lambda w: strained_energy(structure, curve, a, strain, w), np.zeros(3), tol=1e-12).fun)

    step = 1e-3
    shear = np.zeros((3, 3))
    shear[1, 2] = shear[2, 1] = step / 2
    still = energy(np.zeros((3, 3)))
    elastic = crystal.elastic(a) / GIGAPASCAL * crystal.volume(a)
    for strain, place in ((np.diag([step, 0, 0]), (0, 0)), (shear, (3, 3))):
        second = (energy(strain) + energy(-strain) - 2 * still) / step**2
        assert second == pytest.approx(elastic[place], rel=2e-3)


def test_charges_under_finite_strains() -> None:
    # A stretched cell of rock salt, summed by Ewald as a cell of its own.
    rocksalt, step = BY_NAME["rocksalt"], 1e-3

    def stretched(amount: float) -> float:
        factors = np.array([np.sqrt(1 + 2 * amount), 1.0, 1.0])
        cell = tuple(tuple(float(x) for x in row) for row in np.array(rocksalt.cell) * factors)
        atoms = tuple((kind, tuple(float(x) for x in np.array(at) * factors)) for kind, at in rocksalt.atoms)
        return madelung_energy(Structure("stretched", cell, atoms, (0, 0, 0)), (1.0, -1.0))  # type: ignore[arg-type]

    second = (stretched(step) + stretched(-step) - 2 * stretched(0.0)) / step**2
    assert charged_hessian(rocksalt, (1.0, -1.0)).strain[0, 0] == pytest.approx(second, rel=1e-4)


def test_frequencies_of_nearest_neighbour_springs(curve_of: CurveOf) -> None:
    # fcc with springs k between neighbours: Einstein ω² = 4k/m, longitudinal at X ω² = 8k/m (textbook).
    spring = curve_of("(r - 3)^2/2 - 1", "2", "4", reach=4.0)
    crystal = Crystal(BY_NAME["fcc"], {(0, 0): spring})
    a, mass = 3 * sqrt(2), 40.0
    einstein, edge = crystal.frequencies(a, (mass,))
    unit = sqrt(1 / (mass * 1.0364269667e-28)) / (2e12 * pi)  # 1 dalton·(Å/s)² in eV, CODATA 2022
    assert einstein[0] == pytest.approx(2 * unit, rel=1e-6)
    assert edge == pytest.approx(sqrt(8) * unit, rel=1e-6)


def test_lennard_jones_prefers_close_packing_that_stands_shear(reduced: EnergyCurve) -> None:
    found = list(look(System(("X",), {("X", "X"): reduced}), Setting()))
    stiffness = {f.keys["structure"]: f.value for f in found if f.quantity == "smallest-stiffness"}
    energy = {f.keys["structure"]: f.value for f in found if f.quantity == "cohesive-energy"}
    assert {name for name, value in stiffness.items() if value > 0} == {"fcc", "hcp"}
    assert max(energy, key=lambda name: energy[name]) == "hcp"


def test_a_missing_pair_gives_no_crystal_of_two(reduced: EnergyCurve) -> None:
    system = System(("A", "B"), {("A", "A"): reduced, ("A", "B"): reduced})
    assert system.missing(("A", "B")) == ["B-B"]
    assert {f.subject for f in look(system, Setting(structures=("rocksalt", "fcc")))} == {"A-A"}
