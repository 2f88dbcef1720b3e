from __future__ import annotations

import html
import re

import html5lib
import pytest
from documentation import ROOT
from matplotlib.figure import Figure
from slopewell.document import Document, read_document
from slopewell.table import Table, tabulate_rows
from slopewell.workflow import check


@pytest.fixture(scope="module")
def document() -> Document:
    return read_document(ROOT / "samples" / "faulty" / "truncated-cutoff.toml")


def framed(text: str) -> str:
    """The page in a frame, which has to be sound HTML of its own."""
    page = html.unescape(re.fullmatch(r'<iframe .*? srcdoc="([^"]*)"></iframe>', text, re.DOTALL)[1])
    html5lib.HTMLParser(strict=True).parse(page)
    return page


def test_a_document_shows_its_verdict(document: Document) -> None:
    assert "Fails" in framed(document._repr_html_())


def test_a_potential_shows_its_curve(document: Document) -> None:
    potential = document.interactions[0].potential
    assert "Not checked" in framed(potential._repr_html_())
    energy, force = potential.plot().axes
    assert (energy.get_ylabel(), force.get_ylabel()) == ("energy, eV", "force, eV/Å")


def test_a_table_shows_its_rows(document: Document) -> None:
    interaction = document.interactions[0]
    table = Table((tabulate_rows(interaction.potential, interaction.grid, 50, document.units),), document.units)
    assert "Drawn from 50 rows" in framed(table._repr_html_())
    assert isinstance(table.plot(), Figure)


def test_a_report_shows_its_findings() -> None:
    report = check([ROOT / "samples" / "faulty" / "truncated-cutoff.toml"])
    assert "cutoff-steps" in framed(report._repr_html_())
    with pytest.raises(TypeError, match="no curves"):
        report.plot()
