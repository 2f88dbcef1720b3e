"""Tables: grids, rows, and how simulation codes read between them."""

from .grid import separations
from .model import Rows, Table
from .rows import evaluate, tabulate_rows

__all__ = ["Rows", "Table", "evaluate", "separations", "tabulate_rows"]
