"""Potentials, documents, tables and reports in a notebook: a page in a frame, a matplotlib figure."""

from __future__ import annotations

from functools import singledispatch
from html import escape
from typing import TYPE_CHECKING

from .checks.potential_facts import PotentialFacts, internal_units
from .document import Document, Grid
from .forms import catalogue
from .potential import Potential
from .reports import Report, potential_landmarks
from .reports.drawing import potential_drawing
from .reports.page import Sheet, page, report_page
from .reports.picture import figure_of
from .reports.stated import Stated
from .sheets import document_sheet, table_sheet
from .table import Table

if TYPE_CHECKING:
    from matplotlib.figure import Figure

FRAME_HEIGHT = 720
"""Pixels."""


@singledispatch
def sheet_of_value(value: object) -> Sheet:
    """Return what there is to show of a value."""
    raise TypeError(f"a {type(value).__name__} has no curves to draw")


@sheet_of_value.register
def _document(value: Document) -> Sheet:
    return document_sheet(value)


@sheet_of_value.register
def _table(value: Table) -> Sheet:
    return table_sheet(value, value.title or "Table", next(iter(value.report.get("subjects", ())), {}))


@sheet_of_value.register
def _potential(value: Potential) -> Sheet:
    facts = PotentialFacts(value, Grid(value.start, value.end, None), internal_units(), ())
    record = {"landmarks": [potential_landmarks(facts)]}
    form = catalogue().get(value.form)
    stated = Stated(value.formula, form.title if form else "", form.source if form else "")
    drawing = potential_drawing(value, facts.units, record, stated)
    return Sheet(value.name, "", (drawing,), record)


def html(value: object) -> str:
    """Return a value as a page in a frame of its own, so that it can't disturb the notebook's looks."""
    text = report_page(value) if isinstance(value, Report) else page(sheet_of_value(value))
    style = f"width:100%;height:{FRAME_HEIGHT}px;border:0"
    return f'<iframe title="slopewell" style="{style}" srcdoc="{escape(text)}"></iframe>'


def figure(value: object) -> Figure:
    """Return the curves of a value as a matplotlib figure."""
    sheet = sheet_of_value(value)
    return figure_of(sheet.title, sheet.drawings)
