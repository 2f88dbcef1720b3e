"""Units, constants and conversions, against CODATA 2022 and published factors."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any

import pytest
import scipy.constants
from hypothesis import given
from hypothesis import strategies as st
from slopewell.units import UnitError, dimension, quantity, ratio, temperature, unit, unit_system
from slopewell.units import constants as ours

Published = Callable[[str], Any]
DOUBLE = 1e-15
"""Rounding of a published value that is exact in the 2019 SI."""


@pytest.mark.parametrize(
    ("value", "name", "scale"),
    [
        (ours.ELEMENTARY_CHARGE, "elementary charge", 1),
        (ours.PLANCK, "Planck constant", 1),
        (ours.LIGHT_SPEED, "speed of light in vacuum", 1),
        (ours.AVOGADRO, "Avogadro constant", 1),
        (ours.ATOMIC_MASS, "atomic mass constant", 1),
        (ours.BOLTZMANN, "Boltzmann constant in eV/K", 1),
        (ours.HARTREE, "Hartree energy in eV", 1),
        (ours.BOHR, "Bohr radius", 1e10),
        (ours.EV_PER_WAVENUMBER, "inverse meter-electron volt relationship", 100),
    ],
)
def test_a_constant_is_the_one_of_codata_2022(value: Fraction, name: str, scale: float) -> None:
    # scipy.constants carries CODATA 2022 from scipy 1.15 on (P. J. Mohr et al., Rev. Mod. Phys. 97,
    # 025002 (2025)); relationships in its table are printed to ten digits.
    tolerance = 1e-9 if "relationship" in name or name.endswith("eV/K") else 1e-15
    assert float(value) == pytest.approx(scipy.constants.value(name) * scale, rel=tolerance)


def test_the_coulomb_constant_follows_from_the_vacuum_permittivity() -> None:
    e, vacuum = scipy.constants.e, scipy.constants.epsilon_0
    joule_metres = e**2 / (4 * scipy.constants.pi * vacuum)
    assert float(ours.COULOMB) == pytest.approx(joule_metres / e * 1e10, rel=1e-11)


@pytest.mark.parametrize(
    ("entry", "value"),
    [
        ("T01-001", ours.ELEMENTARY_CHARGE),
        ("T01-003", ours.BOLTZMANN * ours.ELEMENTARY_CHARGE),
        ("T01-004", ours.HARTREE),
        ("T01-006", ours.BOHR),
        ("T01-007", ours.ATOMIC_MASS),
        ("T01-015", ours.BOLTZMANN),
    ],
)
def test_a_constant_has_its_published_digits(published: Published, entry: str, value: Fraction) -> None:
    # CODATA 2022: P. J. Mohr et al., Rev. Mod. Phys. 97, 025002 (2025)
    assert float(value) == pytest.approx(published(entry).number, rel=DOUBLE)


@pytest.mark.parametrize(
    ("entry", "old", "new", "tolerance"),
    [
        ("T01-012", "eV", "kcal/mol", DOUBLE),
        ("T01-013", "eV", "K", DOUBLE),
        ("T01-018", "kcal/mol", "K", DOUBLE),
        ("T01-019", "kJ/mol", "K", DOUBLE),
        ("T01-021", "kJ/mol", "eV", DOUBLE),
        ("T01-022", "kcal/mol", "eV", DOUBLE),
        ("T01-024", "hartree", "kcal/mol", 2e-12),
        ("T01-025", "hartree", "K", 2e-12),
        ("T01-027", "eV/angstrom", "kJ/(mol nm)", DOUBLE),
        ("T01-030", "hartree/bohr", "kJ/(mol nm)", 2e-10),
        ("T01-031", "hartree/bohr", "kcal/(mol angstrom)", 2e-10),
        ("T01-033", "kcal/(mol angstrom)", "kJ/(mol nm)", DOUBLE),
        ("T01-034", "eV/angstrom^2", "N/m", DOUBLE),
        ("T01-036", "eV/angstrom^3", "GPa", DOUBLE),
    ],
)
def test_a_conversion_has_its_published_factor(
    published: Published, entry: str, old: str, new: str, tolerance: float
) -> None:
    # From CODATA 2022 and the thermochemical calorie of 4.184 J
    assert float(ratio(unit(old), unit(new))) == pytest.approx(published(entry).number, rel=tolerance)


@pytest.mark.parametrize(("entry", "energy", "length"), [("T01-009", "kJ/mol", "nm"), ("T01-010", "kcal/mol", "Å")])
def test_the_coulomb_constant_has_its_published_value(
    published: Published, entry: str, energy: str, length: str
) -> None:
    system = unit_system(energy, length)
    value = ours.COULOMB / (system.energy.factor * system.length.factor)
    assert float(value) == pytest.approx(published(entry).number, rel=2e-11)


def test_the_factor_between_ev_and_kilojoule_per_mole_is_exact() -> None:
    joule = 1 / Fraction("1.602176634e-19")
    per_mole = 1000 * joule / Fraction("6.02214076e23")
    assert ratio(unit("eV/angstrom"), unit("kJ/(mol nm)")) == 10 / per_mole
    assert ratio(unit("kcal/(mol angstrom)"), unit("kJ/(mol nm)")) == Fraction("41.84")


def test_a_mass_in_motion_is_an_energy(published: Published) -> None:
    per_femtosecond = ours.EV_PER_DALTON_SPEED * 10**30
    assert float(per_femtosecond) == pytest.approx(published("T01-037").number, rel=4e-10)


@pytest.mark.parametrize(
    ("spellings", "stored"),
    [
        (["eV", " eV ", "electron_volt", "1 eV", "eV^1"], "eV"),
        (["meV", "millielectron_volt"], "meV"),
        (["J", "joule"], "J"),
        (["zJ", "zeptojoule"], "zJ"),
        (["aJ", "attojoule"], "aJ"),
        (
            ["kJ/mol", "kJ mol^-1", "kJ mol⁻¹", "kJ·mol⁻¹", "kJ*mol**-1", "kJ / mol", "kilojoule/mole"],
            "kJ/mol",
        ),
        (["kcal/mol", "kcal mol^-1", "kcal mol⁻¹", "kilocalorie/mol"], "kcal/mol"),
        (["hartree", "Eh"], "hartree"),
        (["rydberg", "Ry"], "rydberg"),
        (["K", "kelvin"], "K"),
        (["cm^-1", "cm⁻¹", "cm**-1", "cm ^ -1", "cm^(-1)", "wavenumber"], "cm^-1"),
        (["angstrom", "Å", "\N{ANGSTROM SIGN}", "A\N{COMBINING RING ABOVE}"], "angstrom"),
        (["nm", "nanometer"], "nm"),
        (["pm", "picometer"], "pm"),
        (["bohr"], "bohr"),
        (["m", "meter"], "m"),
    ],
    ids=lambda value: value if isinstance(value, str) else "",
)
def test_every_spelling_of_a_unit_is_stored_in_one_way(spellings: list[str], stored: str) -> None:
    assert {unit(text) for text in spellings} == {unit(stored)}
    assert unit(stored).text == stored


@pytest.mark.parametrize(
    ("spellings", "words"),
    [
        (["kJ/(mol nm)", "kJ mol^-1 nm^-1", "kJ/mol/nm", "kJ mol⁻¹ nm⁻¹"], "energy length^-1"),
        (["eV/angstrom", "eV Å⁻¹", "eV Å^-1", "eV*angstrom**-1", "eV · Å^-1"], "energy length^-1"),
        (["eV/angstrom^2", "eV/Å²", "eV Å⁻²"], "energy length^-2"),
        (["hartree bohr^6", "hartree*bohr**6", "hartree bohr⁶"], "energy length^6"),
        (["1/nm", "nm^-1", "nm⁻¹"], "length^-1"),
        (["dalton", "Da"], "mass"),
        (["e", "", "1", "e^2"], "1"),
    ],
)
def test_spellings_of_a_compound_unit_mean_the_same(spellings: list[str], words: str) -> None:
    units = [unit(text) for text in spellings]
    assert len({found.factor for found in units}) == 1
    assert all(found.dimension == dimension(words) for found in units)
    assert all(found.text.isascii() for found in units)


@pytest.mark.parametrize(
    "text",
    [
        *(
            "ev",
            "foo",
            "kJ/mol/",
            "eV*",
            "(eV",
            "eV)",
            "eV//nm",
            "eV^",
            "eV^1000",
            "eV^2^2",
            "(eV)^2",
            "eV+eV",
        ),
        *("nm^99^99", "e^9^9^9", "9^9^9^9 nm", "2 eV", "eV 2", "eV/0", "degC", "µm", "eV; nm", "__class__"),
        *("eV\x00", "eV" * 100),
    ],
)
def test_what_is_no_unit_is_refused_with_those_known(text: str) -> None:
    with pytest.raises(UnitError, match="is not a unit") as caught:
        unit(text)
    (problem,) = caught.value.problems
    assert text[:60] in problem.says
    assert "kcal/mol" in problem.remedy


@given(st.text(alphabet="eVnmkJol/()^*-+12 ÅK.·⁻²", max_size=30) | st.text(max_size=10))
def test_any_text_is_a_unit_or_refused(text: str) -> None:
    try:
        good = unit(text).factor > 0
    except UnitError as error:
        good = "is not a unit" in str(error)
    assert good


@given(st.sampled_from(["eV", "kJ/mol", "K", "cm^-1", "hartree", "zJ"]), st.decimals("-1e6", "1e6", places=4))
def test_a_quantity_is_its_number_times_its_unit(name: str, number: object) -> None:
    found = quantity(f"{number} {name}")
    assert found.value == Fraction(str(number)) * unit(name).factor
    assert found.dimension == dimension("energy")


@pytest.mark.parametrize(
    ("text", "value", "words"),
    [
        ("0.47 nm", Fraction("4.7"), "length"),
        ("0.47nm", Fraction("4.7"), "length"),
        ("-1.5e-3 eV", Fraction("-0.0015"), "energy"),
        ("+.5 Å", Fraction("0.5"), "length"),
        ("3eV", Fraction(3), "energy"),
        ("2.031 bohr^-1", Fraction("2.031") / ours.BOHR, "length^-1"),
        ("14", Fraction(14), "1"),
        ("-1 e", Fraction(-1), "1"),
        ("1 K", ours.BOLTZMANN, "energy"),
    ],
)
def test_a_text_states_a_quantity(text: str, value: Fraction, words: str) -> None:
    found = quantity(text)
    assert (found.value, found.dimension) == (value, dimension(words))


@pytest.mark.parametrize("text", ["nm", "", "nm 0.47", "1,5 nm", "1e9999 nm", "nan nm", "inf nm", "1_0 nm", "0x1 nm"])
def test_what_is_no_quantity_is_refused(text: str) -> None:
    with pytest.raises(UnitError):
        quantity(text)


def test_a_temperature_is_in_kelvin() -> None:
    assert temperature("300 K") == 300
    assert temperature(" 77.36K ") == Fraction("77.36")


@pytest.mark.parametrize("text", ["300", "300 eV", "0 K", "-5 K", "27 degC", "K"])
def test_what_is_no_positive_temperature_is_refused(text: str) -> None:
    with pytest.raises(UnitError, match="not a positive temperature in kelvin"):
        temperature(text)


def test_units_of_two_dimensions_have_no_ratio() -> None:
    with pytest.raises(UnitError, match="nm is length, eV is energy"):
        ratio(unit("nm"), unit("eV"))


def test_a_unit_system_gives_the_units_that_follow() -> None:
    system = unit_system("kJ/mol", "nm")
    assert (system.force.text, system.stiffness.text) == ("kJ/mol/nm", "kJ/mol/nm^2")
    assert system.per_length(0) == system.energy
    for power in (1, 2, 4):
        derived = system.per_length(power)
        assert derived.factor == unit(derived.text).factor
        assert derived.dimension == unit(derived.text).dimension


@pytest.mark.parametrize(("energy", "length", "says"), [("nm", "nm", "unit of energy"), ("eV", "eV", "unit of length")])
def test_a_system_of_the_wrong_units_is_refused(energy: str, length: str, says: str) -> None:
    with pytest.raises(UnitError, match=f"is not a {says}"):
        unit_system(energy, length)


def test_equal_units_differ_only_by_name() -> None:
    assert unit("hartree").factor == 2 * unit("rydberg").factor
    assert unit("kcal").factor == Fraction("4.184") * unit("kJ").factor
    assert unit("zJ").factor * 1000 == unit("aJ").factor
    assert unit("kg").factor == 1000 * unit("g").factor == 1 / ours.ATOMIC_MASS
