"""Mixing rules: parameters of a pair of unlike species from those of the like pairs.

Each rule holds for the forms it was published for, and for no other.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction

from ..formula.balls import Ball, ball, fraction, precision

Values = Mapping[str, Ball]
Mix = Callable[[Values, Values], dict[str, Ball]]


@dataclass(frozen=True, slots=True)
class Rule:
    """A mixing rule.

    Attributes
    ----------
    name : str
    mixes : mapping
        From the name of a form to what mixes its parameters.
    source : str
    """

    name: str
    mixes: Mapping[str, Mix]
    source: str


def mixed(rule: str, form: str, one: Mapping[str, Fraction], other: Mapping[str, Fraction]) -> dict[str, Fraction]:
    """Return the parameters of an unlike pair.

    Parameters
    ----------
    rule, form : str
        A rule of ``RULES``, and a form it was published for.
    one, other : mapping
        Parameters of the like pairs in eV and ångström.

    Raises
    ------
    ValueError
        If the rule gives no positive values.
    """
    with precision():
        first, second = ({name: ball(value) for name, value in values.items()} for values in (one, other))
        found = RULES[rule].mixes[form](first, second)
    if not all(value.is_finite() for value in found.values()):
        raise ValueError(f"{rule} gives no values for these parameters")
    return {name: fraction(value) for name, value in found.items()}


def _mean(a: Ball, b: Ball) -> Ball:
    return (a + b) / 2


def _geometric(a: Ball, b: Ball) -> Ball:
    return (a * b).sqrt()


def _harmonic(a: Ball, b: Ball) -> Ball:
    return 2 * a * b / (a + b)


def _root(a: Ball, n: int) -> Ball:
    return (a.log() / n).exp()


def _each(energy: Callable[[Ball, Ball], Ball], size: Callable[[Ball, Ball], Ball], length: str = "sigma") -> Mix:
    def mix(a: Values, b: Values) -> dict[str, Ball]:
        return {"epsilon": energy(a["epsilon"], b["epsilon"]), length: size(a[length], b[length])}

    return mix


def _sixth_power(length: str) -> Mix:
    """Return the rule σ⁶ = (σᵢ⁶ + σⱼ⁶)/2, ε = √(εᵢεⱼ)·σᵢ³σⱼ³/σ⁶."""

    def mix(a: Values, b: Values) -> dict[str, Ball]:
        sixth = _mean(a[length] ** 6, b[length] ** 6)
        cubes = (a[length] * b[length]) ** 3
        return {"epsilon": _geometric(a["epsilon"], b["epsilon"]) * cubes / sixth, length: _root(sixth, 6)}

    return mix


def _kong(a: Values, b: Values) -> dict[str, Ball]:
    """Return the rule εσ⁶ = √(…), (εσ¹²)^(1/13) the mean of both."""
    attraction = _geometric(*(v["epsilon"] * v["sigma"] ** 6 for v in (a, b)))
    repulsion = _mean(*(_root(v["epsilon"] * v["sigma"] ** 12, 13) for v in (a, b))) ** 13
    return {"epsilon": attraction**2 / repulsion, "sigma": _root(repulsion / attraction, 6)}


def _kong_exponential(a: Values, b: Values) -> dict[str, Ball]:
    """Return the rule ρ the mean, (A/ρ)^2ρ = (Aᵢ/ρᵢ)^ρᵢ·(Aⱼ/ρⱼ)^ρⱼ, C geometric."""
    rho = _mean(a["rho"], b["rho"])
    total = sum(v["rho"] * (v["A"] / v["rho"]).log() for v in (a, b))
    found = {"A": rho * (total / (2 * rho)).exp(), "rho": rho}
    return found | ({"C": _geometric(a["C"], b["C"])} if "C" in a else {})


_LORENTZ = _each(_geometric, _mean)
RULES = {
    rule.name: rule
    for rule in (
        Rule(
            "lorentz-berthelot",
            {"lennard-jones": _LORENTZ},
            "H. A. Lorentz, Ann. Phys. (Leipzig) 248, 127 (1881); D. Berthelot, C. R. Acad. Sci. 126, 1703 (1898)",
        ),
        Rule(
            "geometric",
            {"lennard-jones": _each(_geometric, _geometric)},
            "R. J. Good and C. J. Hope, J. Chem. Phys. 53, 540 (1970)",
        ),
        Rule(
            "waldman-hagler",
            {"lennard-jones": _sixth_power("sigma"), "lennard-jones-9-6": _sixth_power("r_m")},
            "M. Waldman and A. T. Hagler, J. Comput. Chem. 14, 1077 (1993)",
        ),
        Rule(
            "sixth-power",
            {"lennard-jones": _sixth_power("sigma"), "lennard-jones-9-6": _sixth_power("r_m")},
            "M. Waldman and A. T. Hagler (1993), with 9-6 as H. Sun, J. Phys. Chem. B 102, 7338 (1998)",
        ),
        Rule(
            "kong",
            {"lennard-jones": _kong, "born-mayer": _kong_exponential, "buckingham": _kong_exponential},
            "C. L. Kong, J. Chem. Phys. 59, 2464 (1973); with an exponential, C. L. Kong and "
            "M. R. Chakrabarty, J. Phys. Chem. 77, 2668 (1973)",
        ),
        Rule(
            "fender-halsey",
            {"lennard-jones": _each(_harmonic, _mean)},
            "B. E. F. Fender and G. D. Halsey, J. Chem. Phys. 36, 1881 (1962)",
        ),
    )
}
"""Every rule by its name."""
