"""Mixing rules, each against its published formula evaluated with mpmath."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st
from mpmath import exp, log, mpf, sqrt
from slopewell.potential.mixing import RULES, mixed

NEON = {"epsilon": Fraction("0.00307"), "sigma": Fraction("2.78")}
KRYPTON = {"epsilon": Fraction("0.0141"), "sigma": Fraction("3.65")}


def lennard_jones(rule: str) -> tuple[float, float]:
    found = mixed(rule, "lennard-jones", NEON, KRYPTON)
    return float(found["epsilon"]), float(found["sigma"])


E1, S1, E2, S2 = (mpf(x) for x in ("0.00307", "2.78", "0.0141", "3.65"))
SIXTH = ((S1**6 + S2**6) / 2) ** (mpf(1) / 6)
REPULSION = (((E1 * S1**12) ** (mpf(1) / 13) + (E2 * S2**12) ** (mpf(1) / 13)) / 2) ** 13
ATTRACTION = sqrt(E1 * S1**6 * E2 * S2**6)
PUBLISHED = {
    # H. A. Lorentz, Ann. Phys. 248, 127 (1881); D. Berthelot, C. R. Acad. Sci. 126, 1703 (1898).
    "lorentz-berthelot": (sqrt(E1 * E2), (S1 + S2) / 2),
    # R. J. Good and C. J. Hope, J. Chem. Phys. 53, 540 (1970).
    "geometric": (sqrt(E1 * E2), sqrt(S1 * S2)),
    # M. Waldman and A. T. Hagler, J. Comput. Chem. 14, 1077 (1993).
    "waldman-hagler": (2 * sqrt(E1 * E2) * S1**3 * S2**3 / (S1**6 + S2**6), SIXTH),
    "sixth-power": (2 * sqrt(E1 * E2) * S1**3 * S2**3 / (S1**6 + S2**6), SIXTH),
    # C. L. Kong, J. Chem. Phys. 59, 2464 (1973).
    "kong": (ATTRACTION**2 / REPULSION, (REPULSION / ATTRACTION) ** (mpf(1) / 6)),
    # B. E. F. Fender and G. D. Halsey, J. Chem. Phys. 36, 1881 (1962).
    "fender-halsey": (2 * E1 * E2 / (E1 + E2), (S1 + S2) / 2),
}


def test_every_rule_is_tested() -> None:
    assert PUBLISHED.keys() == RULES.keys()


@pytest.mark.parametrize("rule", PUBLISHED)
def test_a_rule_gives_its_published_formula(rule: str) -> None:
    assert lennard_jones(rule) == pytest.approx([float(value) for value in PUBLISHED[rule]], rel=1e-15)


def test_with_an_exponential_kong_gives_the_published_formula() -> None:
    # C. L. Kong and M. R. Chakrabarty, J. Phys. Chem. 77, 2668 (1973), written for A exp(-r/rho) - C/r^6.
    one = {"A": Fraction(1000), "rho": Fraction("0.3"), "C": Fraction(20)}
    other = {"A": Fraction(5000), "rho": Fraction("0.25"), "C": Fraction(80)}
    found = mixed("kong", "buckingham", one, other)
    rho = mpf("0.275")
    total = mpf("0.3") * log(1000 / mpf("0.3")) + mpf("0.25") * log(5000 / mpf("0.25"))
    assert float(found["rho"]) == 0.275
    assert float(found["A"]) == pytest.approx(float(rho * exp(total / (2 * rho))), rel=1e-14)
    assert float(found["C"]) == pytest.approx(40, rel=1e-15)


@pytest.mark.parametrize(("rule", "form"), [(rule.name, form) for rule in RULES.values() for form in rule.mixes])
@given(
    st.fractions(Fraction(1, 100), 100, max_denominator=100),
    st.fractions(Fraction(1, 5), 5, max_denominator=100),
)
def test_a_species_mixed_with_itself_is_itself(rule: str, form: str, energy: Fraction, length: Fraction) -> None:
    size = "r_m" if form == "lennard-jones-9-6" else "sigma"
    plain = {"epsilon": energy, size: length}
    own = plain if form.startswith("lennard-jones") else {"A": energy, "rho": length, "C": Fraction(3)}
    own = {name: value for name, value in own.items() if form != "born-mayer" or name != "C"}
    found = mixed(rule, form, own, own)
    assert {name: float(value) for name, value in found.items()} == pytest.approx(
        {name: float(value) for name, value in own.items()}, rel=1e-14
    )


@pytest.mark.parametrize("rule", RULES)
def test_the_order_of_the_species_does_not_matter(rule: str) -> None:
    one, other = mixed(rule, "lennard-jones", NEON, KRYPTON), mixed(rule, "lennard-jones", KRYPTON, NEON)
    assert {k: float(v) for k, v in one.items()} == pytest.approx({k: float(v) for k, v in other.items()}, rel=1e-15)


def test_parameters_without_a_mean_are_refused() -> None:
    with pytest.raises(ValueError, match="kong gives no values"):
        mixed(
            "kong",
            "born-mayer",
            {"A": Fraction(-1), "rho": Fraction(1)},
            {"A": Fraction(1), "rho": Fraction(1)},
        )
