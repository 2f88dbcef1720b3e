"""Values that show themselves in a notebook."""

from __future__ import annotations

from importlib import import_module
from typing import Any


class Shown:
    """A value with a page and a figure.

    The value only knows that it can be shown; how is the business of ``slopewell.notebook``, far above
    it, which is looked up when a notebook asks.
    """

    __slots__ = ()

    def _repr_html_(self) -> str:
        html: str = import_module("slopewell.notebook").html(self)
        return html

    def plot(self) -> Any:
        """Return a matplotlib figure: energy above force for each interaction."""
        return import_module("slopewell.notebook").figure(self)
