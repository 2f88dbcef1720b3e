"""Files: tables in open formats, each read and written by one module."""

from .formats import FORMATS, Format, format_of
from .layout import Layout, read_layout

__all__ = ["FORMATS", "Format", "Layout", "format_of", "read_layout"]
