from __future__ import annotations

import base64
import json
import re
from collections.abc import Iterator
from dataclasses import replace
from html.parser import HTMLParser
from itertools import pairwise

import html5lib
import numpy as np
import pytest
from slopewell.reports import Report
from slopewell.reports.drawing import overlaid, table_drawings
from slopewell.reports.page import CAUTION, Sheet, page, report_page
from slopewell.sheets import table_sheet
from slopewell.table import Table
from slopewell.units import ratio, unit_system
from slopewell.workflow import check


class Elements(HTMLParser):
    """Gathers elements in order, each with its attributes, and the text of the page."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.found: list[tuple[str, dict[str, str | None]]] = []
        self.text: list[str] = []
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.found.append((tag, dict(attrs)))

    def handle_data(self, data: str) -> None:
        self.text.append(data)

    def named(self, tag: str) -> Iterator[dict[str, str | None]]:
        return (attributes for name, attributes in self.found if name == tag)

    @property
    def said(self) -> str:
        return " ".join("".join(self.text).split())


@pytest.fixture(scope="module")
def text(sheet: Sheet) -> str:
    return page(sheet)


@pytest.fixture(scope="module")
def elements(text: str) -> Elements:
    return Elements(text)


def numbers(text: str) -> dict:
    return json.loads(re.search(r'id="numbers">(.*?)</script>', text, re.DOTALL)[1])


def column(packed: str) -> np.ndarray:
    return np.frombuffer(base64.b64decode(packed), dtype="<f8")


def test_the_checker_of_html_finds_nothing(text: str) -> None:
    parser = html5lib.HTMLParser(strict=True)
    parser.parse(text)
    assert parser.errors == []


def test_the_checker_finds_a_planted_fault(text: str) -> None:
    with pytest.raises(html5lib.html5parser.ParseError):
        html5lib.HTMLParser(strict=True).parse(text.replace("</article>", "", 1))


def test_nothing_is_asked_of_any_other_place(elements: Elements, text: str) -> None:
    links = [attributes.get(key) or "" for _, attributes in elements.found for key in ("src", "href", "action")]
    assert {link[:1] for link in links if link} <= {"#", "d"}
    assert "://" not in text.split("<body>")[0]
    (policy,) = (a["content"] for a in elements.named("meta") if a.get("http-equiv") == "Content-Security-Policy")
    assert policy.startswith("default-src 'none'")


def test_what_the_document_says_is_escaped(text: str) -> None:
    assert "<h1>Beads &lt;A&gt; &amp; B, invented</h1>" in text


def test_the_verdict_comes_before_the_curves(text: str) -> None:
    assert text.index("Fails") < text.index("<figure")


def test_identifiers_are_unique_and_links_lead_somewhere(elements: Elements) -> None:
    known = [attributes["id"] for _, attributes in elements.found if "id" in attributes]
    assert len(known) == len(set(known))
    targets = {a["href"][1:] for a in elements.named("a")}
    assert targets
    assert targets <= set(known)
    assert {a["aria-labelledby"] for _, a in elements.found if "aria-labelledby" in a} <= set(known)


def test_controls_have_names(elements: Elements) -> None:
    labelled = {a.get("for") for a in elements.named("label")}
    for name in ("input", "select"):
        for control in elements.named(name):
            assert control.get("aria-label") or control["id"] in labelled


def test_headings_do_not_skip_a_level(elements: Elements) -> None:
    levels = [int(tag[1]) for tag, _ in elements.found if re.fullmatch("h[1-6]", tag)]
    assert levels[0] == 1
    assert all(after <= before + 1 for before, after in pairwise(levels))


def test_words_say_what_the_picture_shows(elements: Elements) -> None:
    for words in (
        "The pair is pushed apart below 0.5276 nm and pulled together beyond, in a well 5 kJ/mol deep.",
        "repulsion: pushes apart",
        "attraction: pulls together",
        "switched off between 0.9 nm and 1.2 nm",
        "separation where the potential is zero",
        CAUTION,
    ):
        assert words in elements.said


def test_findings_stand_at_their_place(elements: Elements) -> None:
    flags = [a for a in elements.named("a") if "error" in (a.get("class") or "") and "flag" in a["class"]]
    assert [flag["style"].partition(";")[0] for flag in flags] == ["--place:100.00%"] * len(flags)
    assert flags[0]["aria-label"] == "A, error: cutoff-steps"


def test_rows_to_read_out_are_those_of_the_table(table: Table) -> None:
    (drawn, *_) = numbers(page(table_sheet(table, "beads.json", {})))["drawings"]
    rows = table.interactions[0]
    separation = column(drawn["separation"])
    at = np.searchsorted(rows.separation, separation)
    assert np.array_equal(separation, rows.separation[at])
    assert np.array_equal(column(drawn["energy"]), rows.energy[at])
    assert np.array_equal(column(drawn["force"]), rows.force[at])


def test_factors_of_units_are_exact(text: str) -> None:
    own, target = unit_system("kJ/mol", "nm"), unit_system("hartree", "bohr")
    factors = numbers(text)["systems"][-1]["factors"]
    assert factors["1,0"] == float(ratio(own.energy, target.energy))
    assert factors["0,1"] == float(ratio(own.length, target.length))
    assert factors["1,-1"] == float(ratio(own.force, target.force))


def test_own_units_come_first_and_no_unit_twice(elements: Elements) -> None:
    assert len(list(elements.named("option"))) == 4
    assert "kJ/mol and nmeV and Å" in elements.said


def test_a_comparison_draws_the_difference(sheet: Sheet) -> None:
    first = sheet.drawings[0]
    both = replace(sheet, drawings=(overlaid(first, first, ("old.toml", "new.toml")),))
    said = Elements(page(both)).said
    for words in ("Difference of energy", "Difference of force", "old.toml", "new.toml"):
        assert words in said


def test_a_table_that_was_never_checked_says_so(table: Table) -> None:
    assert "Not checked" in Elements(page(table_sheet(table, "beads.json", {}))).said


def test_many_rows_make_a_small_page(table: Table) -> None:
    rows = table.interactions[0]
    r = np.linspace(0.25, 1.2, 100_001)
    energy, force = (np.interp(r, rows.separation, each) for each in (rows.energy, rows.force))
    long = replace(table, interactions=(replace(rows, separation=r, energy=energy, force=force),))
    text = page(replace(table_sheet(table, "", {}), drawings=table_drawings(long, {})))
    assert len(text) < 5_000_000 / 55


def test_a_report_alone_is_a_page(folder) -> None:
    report: Report = check([folder / "beads.toml", folder / "none.toml"])
    text = report_page(report)
    html5lib.HTMLParser(strict=True).parse(text)
    said = Elements(text).said
    assert "Fails" in said
    assert "Can't be used" in said
