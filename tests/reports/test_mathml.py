from __future__ import annotations

import xml.etree.ElementTree as ET

import pytest
from slopewell.forms import catalogue
from slopewell.formula import parse
from slopewell.reports.mathml import formula_markup, markup, name_markup


@pytest.mark.parametrize(
    ("formula", "expected"),
    [
        ("a/b", "<mfrac><mi>a</mi><mi>b</mi></mfrac>"),
        ("r^6", "<msup><mi>r</mi><mn>6</mn></msup>"),
        ("sqrt(r)", "<msqrt><mi>r</mi></msqrt>"),
        ("a - b", "<mrow><mi>a</mi><mo>−</mo><mi>b</mi></mrow>"),
        (
            "a*(b + c)",
            '<mrow><mi>a</mi><mspace width="0.17em"></mspace><mrow><mo>(</mo><mrow><mi>b</mi><mo>+</mo>'
            "<mi>c</mi></mrow><mo>)</mo></mrow></mrow>",
        ),
        (
            "exp(-r/rho)",
            "<msup><mi>e</mi><mrow><mo>−</mo><mrow><mi>r</mi><mo>/</mo><mi>ρ</mi></mrow></mrow></msup>",
        ),
        (
            "1e-9",
            "<mrow><mn>1</mn><mo>⋅</mo><msup><mn>10</mn><mrow><mo>−</mo><mn>9</mn></mrow></msup></mrow>",
        ),
    ],
)
def test_parts_of_formulas(formula: str, expected: str) -> None:
    assert markup(parse(formula)) == expected


@pytest.mark.parametrize(
    ("name", "expected"),
    [
        ("epsilon", "<mi>ε</mi>"),
        ("r0", "<msub><mi>r</mi><mi>0</mi></msub>"),
        ("C_6", "<msub><mi>C</mi><mi>6</mi></msub>"),
        ("kB", "<msub><mi>k</mi><mi>B</mi></msub>"),
    ],
)
def test_names(name: str, expected: str) -> None:
    assert name_markup(name) == expected


def test_cases_of_a_choice_are_set_under_each_other() -> None:
    rows = ET.fromstring(formula_markup("where(r < a, 1, 2)")).findall(".//mtr")
    assert ["".join(row.itertext()) for row in rows] == ["1if r<a", "2otherwise"]


@pytest.mark.parametrize("form", catalogue().values(), ids=lambda form: form.name)
def test_every_form_is_well_formed_and_names_its_parameters(form: object) -> None:
    said = "".join(ET.fromstring(formula_markup(form.formula)).itertext())
    assert said.startswith("U(r)=")
    for parameter in form.parameters:
        if parameter.name in form.formula:
            shown = "".join(ET.fromstring(f"<x>{name_markup(parameter.name)}</x>").itertext())
            assert shown in said


def test_what_is_no_formula_is_shown_as_text() -> None:
    assert formula_markup("a <") == "<code>a &lt;</code>"
