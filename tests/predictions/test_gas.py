"""The dilute gas against closed forms, printed tables and reference equations of state."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from math import gamma, pi
from typing import Any

import numpy as np
import pytest
from slopewell.predictions.curve import EnergyCurve
from slopewell.predictions.figures import CUBIC_CENTIMETRE_PER_MOLE, Setting, System
from slopewell.predictions.gas import Gas, look
from slopewell.units.constants import BOLTZMANN

from .conftest import HFD, JAEGER, CurveOf

SPHERE = 2 * pi / 3 * CUBIC_CENTIMETRE_PER_MOLE
K_B = float(BOLTZMANN)


def reduced_virial(gas: Gas, temperature: float) -> float:
    return gas.second_virial(temperature / K_B) / SPHERE


LENNARD_JONES = [
    ("T02-018", 1.0),
    ("T02-019", 1.5),
    ("T02-022", 5.0),
    ("T02-024", 50.0),
    ("T02-025", 0.3),
    ("T02-027", 0.8),
    ("T02-034", 200.0),
]


@pytest.mark.parametrize(("entry", "temperature"), LENNARD_JONES)
def test_second_virial_of_lennard_jones(
    published: Callable[[str], Any], reduced: EnergyCurve, entry: str, temperature: float
) -> None:
    # Computed in closed form; agrees with Hirschfelder, Curtiss and Bird (1954), table I-B, from memory.
    assert reduced_virial(Gas(reduced), temperature) == pytest.approx(published(entry).number, abs=1e-9)


def test_boyle_temperature_of_lennard_jones(published: Callable[[str], Any], reduced: EnergyCurve) -> None:
    # Root of the closed form; quoted in print as 3.41793.
    found = Gas(reduced).boyle_temperature()
    assert found is not None
    assert found * K_B == pytest.approx(published("T02-036").number, rel=1e-8)


def test_second_virial_of_soft_spheres(published: Callable[[str], Any], curve_of: CurveOf) -> None:
    # Closed form Γ(3/4); cf. Wheatley, J. Phys. Chem. B 109, 7463 (2005).
    spheres = Gas(curve_of("1/r^12", "0.3", "8"))
    assert reduced_virial(spheres, 1.0) == pytest.approx(published("T02-043").number, rel=1e-9)
    assert spheres.boyle_temperature() is None


def test_quantum_correction_of_soft_spheres(curve_of: CurveOf) -> None:
    # ∫ e^(−βr⁻¹²)·144·r⁻²⁴ dr in closed form by Γ(23/12), derived here.
    gas, mass, thermal = Gas(curve_of("1/r^12", "0.3", "8")), 2.0, 1.0
    integral = 144 * gamma(23 / 12) / 12
    hbar_squared = 0.0041801593  # eV·Å²·dalton, CODATA 2022
    expected = pi * hbar_squared / (12 * mass * thermal**3) * integral * CUBIC_CENTIMETRE_PER_MOLE
    assert gas.quantum_correction(thermal / K_B, mass) == pytest.approx(expected, rel=1e-7)


KELVIN = Fraction(BOLTZMANN)
HFD_NAMES = ("e", "rm", "A", "alpha", "beta", "c6", "c8", "c10", "D")
ARGON_HFD = ("143.224", "3.7565", "2.26210716e5", "10.77874743", "-1.8122004", "1.10785136", "0.56072459",
             "0.34602794", "1.36")  # fmt: skip
KRYPTON_HFD = ("201.2", "4.008", "1.10146811e5", "9.39490495", "-2.32607647", "1.08822526", "0.53911567",
               "0.42174119", "1.28")  # fmt: skip
"""In kelvin and ångström."""
JAEGER_POWERS = {
    "A": 0,
    "a1": -1,
    "a2": -2,
    "am1": 1,
    "am2": 2,
    "b": -1,
    **{f"C{n}": n for n in range(6, 17, 2)},
}
ARGON_JAEGER = ("4.61330146e7", "-29.8337630", "-9.71208881", "0.0275206827", "-0.0101489050", "40.2517211",
                "0.442812017", "0.0326707684", "2.45656537e-3", "1.88246247e-4", "1.47012192e-5",
                "1.17006343e-6")  # fmt: skip
"""In kelvin and nanometre."""


def hfd(values: tuple[str, ...]) -> dict[str, Fraction]:
    parameters = {name: Fraction(value) for name, value in zip(HFD_NAMES, values, strict=True)}
    return parameters | {"e": parameters["e"] * KELVIN}


def jaeger() -> dict[str, Fraction]:
    return {
        name: Fraction(value) * Fraction(10) ** power * (KELVIN if name[0] in "AC" else 1)
        for (name, power), value in zip(JAEGER_POWERS.items(), ARGON_JAEGER, strict=True)
    }


# Parameters from memory; classical values and reference equations of state (CoolProp 8.0.0) from the entry.
REAL = [
    ("T08-018", HFD, hfd(ARGON_HFD), "2", 39.95, 150.0, 0.3),
    ("T08-019", HFD, hfd(ARGON_HFD), "2", 39.95, 300.0, 0.3),
    ("T08-021", HFD, hfd(ARGON_HFD), "2", 39.95, 1000.0, 0.3),
    ("T08-036", HFD, hfd(KRYPTON_HFD), "2.2", 83.798, 200.0, 2.0),
    ("T08-037", HFD, hfd(KRYPTON_HFD), "2.2", 83.798, 300.0, 2.0),
    ("T08-012", JAEGER, jaeger(), "2.2", 39.95, 200.0, 0.2),
    ("T08-013", JAEGER, jaeger(), "2.2", 39.95, 300.0, 0.2),
    ("T08-016", JAEGER, jaeger(), "2.2", 39.95, 700.0, 0.2),
]


@pytest.mark.parametrize(("entry", "formula", "parameters", "start", "mass", "temperature", "scatter"), REAL)
def test_second_virial_of_rare_gases(
    published: Callable[[str], Any],
    curve_of: CurveOf,
    entry: str,
    formula: str,
    parameters: dict[str, Any],
    start: str,
    mass: float,
    temperature: float,
    scatter: float,
) -> None:
    words = published(entry).value.replace(";", "").split()
    classical, corrected, reference = (
        float(words[words.index(name) + 1]) for name in ("classical", "terms", "CoolProp")
    )
    gas = Gas(curve_of(formula, start, "20", **parameters))
    assert gas.second_virial(temperature) == pytest.approx(classical, abs=6e-4)
    found = gas.second_virial(temperature) + gas.quantum_correction(temperature, mass / 2)
    # The printed value has the term of order ħ⁴ as well, below 0.003 cm³/mol here.
    assert found == pytest.approx(corrected, abs=4e-3)
    assert found == pytest.approx(reference, abs=scatter)


def test_second_virial_in_cubic_centimetre_per_mole(published: Callable[[str], Any], curve_of: CurveOf) -> None:
    # Closed form with ε/k = 119.8 K, σ = 3.405 Å (Rowley, Nicholson and Parsonage 1975).
    argon = curve_of("4*e*((s/r)^12 - (s/r)^6)", "1.5", "20", e=Fraction("119.8") * KELVIN, s="3.405")
    for entry, temperature in (("T08-055", 150.0), ("T08-057", 500.0), ("T08-058", 1000.0)):
        assert Gas(argon).second_virial(temperature) == pytest.approx(published(entry).number, abs=1e-4)


def test_charges_have_no_second_virial(curve_of: CurveOf) -> None:
    with pytest.raises(ValueError, match="no second virial"):
        Gas(curve_of("1/r^12 - 1/r", "0.5", "8"))


def test_figures_carry_their_temperature(reduced: EnergyCurve) -> None:
    system = System(("X",), {("X", "X"): reduced}, {"X": 40.0})
    found = list(look(system, Setting(temperatures=(2e4,))))
    assert [(f.quantity, dict(f.keys)) for f in found[:2]] == [
        ("second-virial", {"temperature": 2e4}),
        ("second-virial-quantum", {"temperature": 2e4}),
    ]
    assert found[1].value > found[0].value
    assert np.isclose(found[-1].value, 1.0)
