"""One formula, several readings: Taylor series, balls, dimensions and text."""

from .bind import bind
from .parse import FormulaError, parse
from .text import write
from .tree import Tree, names

__all__ = ["FormulaError", "Tree", "bind", "names", "parse", "write"]
