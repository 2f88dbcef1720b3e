"""Random formulas, as texts."""

from __future__ import annotations

import pytest
from hypothesis import strategies as st

WHOLE = st.integers(1, 12).map(str)
DECIMAL = st.decimals("0.1", "9.99", places=2).map(str)


def _grow(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    """Formulas of formulas, such that none has a pole or leaves a domain for r from 0.5 to 3."""

    def of(template: str) -> st.SearchStrategy[str]:
        return st.builds(template.format, inner, inner)

    return st.one_of(
        *map(of, ("({0}) + ({1})", "({0}) - ({1})", "({0})*({1})", "-({0})", "({0})/(1 + ({1})^2)")),
        *map(of, ("sin({0})", "cos({0})", "tanh({0})", "erf({0})", "erfc({0})", "exp(-({0})^2)")),
        *map(of, ("sqrt(1 + ({0})^2)", "log(1 + ({0})^2)", "tang_toennies(4, 0.1 + ({0})^2)")),
        *map(of, ("(2 + sin({0}))^3", "(2 + cos({0}))^2.5", "(2 + sin({0}))^-1.3", "r^-6*({0})")),
    )


@pytest.fixture(scope="session")
def smooth_formulas() -> st.SearchStrategy[str]:
    """Formulas in ``r`` that are smooth from 0.5 to 3."""
    return st.recursive(st.just("r") | DECIMAL | st.just("r^2"), _grow, max_leaves=6)


def _anything(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    binary = st.sampled_from(["+", "-", "*", "/", "^", " + ", " - ", "**"])
    function = st.sampled_from(["exp", "log", "sqrt", "abs", "sin", "cosh", "erfc"])
    comparison = st.sampled_from(["<", "<=", ">", ">="])
    return st.one_of(
        st.builds("{}{}{}".format, inner, binary, inner),
        st.builds("({})".format, inner),
        st.builds("-{}".format, inner),
        st.builds("{}({})".format, function, inner),
        st.builds("min({}, {})".format, inner, inner),
        st.builds("tang_toennies({}, {})".format, st.integers(0, 60), inner),
        st.builds("where({} {} {}, {}, {})".format, inner, comparison, inner, inner, inner),
    )


@pytest.fixture(scope="session")
def any_formulas() -> st.SearchStrategy[str]:
    """Formulas that use the whole language, whatever they mean."""
    leaves = st.sampled_from(["r", "sigma", "kB", "C_6"]) | WHOLE | DECIMAL | st.sampled_from(["(1e400*r)", "2.5E-7"])
    return st.recursive(leaves, _anything, max_leaves=12)
