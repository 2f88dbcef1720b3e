"""Check interatomic potentials and write energy and force tables with proved error bounds."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from .api import check, compare, convert, make_table, read_table, tabulate

__version__ = "0.1.0"
__all__ = ["check", "compare", "convert", "make_table", "read_table", "tabulate"]


def __getattr__(name: str) -> Any:
    # Loaded when first used, so that the command line starts at once.
    if name not in __all__:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    from . import api

    return getattr(api, name)
