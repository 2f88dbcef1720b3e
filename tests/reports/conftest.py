"""What the tests of reports look at: two invented pairs, one of them with a cutoff that steps."""

from __future__ import annotations

from pathlib import Path

import pytest
from slopewell.document import Document, read_document
from slopewell.reports.drawing import Drawing, document_drawings
from slopewell.reports.page import Sheet
from slopewell.sheets import document_sheet
from slopewell.table import Table, tabulate_rows

TEXT = """schema = "slopewell/potential/1"
title = "Beads <A> & B, invented"
source = "Invented numbers"
temperature = "300 K"
[units]
energy = "kJ/mol"
length = "nm"
[species.A]
[species.B]
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = { epsilon = "5.0 kJ/mol", sigma = 0.47 }
cutoff = { at = 1.2, treatment = "switch", from = 0.9 }
[[interaction]]
between = ["A", "B"]
energy = "A*exp(-r/rho) - C/r^6"
parameters = { A = "1.2e5 kJ/mol", rho = "0.04 nm", C = "0.03 kJ/mol nm^6" }
cutoff = { at = 1.2, treatment = "truncate" }
[grid]
from = 0.25
to = 1.2
rows = 401
"""


@pytest.fixture(scope="session")
def document(tmp_path_factory: pytest.TempPathFactory) -> Document:
    path = tmp_path_factory.mktemp("reports") / "beads.toml"
    path.write_text(TEXT, encoding="utf-8")
    return read_document(path)


@pytest.fixture(scope="session")
def sheet(document: Document) -> Sheet:
    return document_sheet(document)


@pytest.fixture(scope="session")
def table(document: Document) -> Table:
    rows = tuple(
        tabulate_rows(interaction.potential, interaction.grid, 401, document.units)
        for interaction in document.interactions
    )
    return Table(rows, document.units, title="Rows of beads", document=document.text)


@pytest.fixture(scope="session")
def drawing(document: Document, sheet: Sheet) -> Drawing:
    return document_drawings(document, sheet.record)[0]


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "beads.toml").write_text(TEXT, encoding="utf-8")
    return tmp_path
