"""HTML elements out of texts and numbers, everything escaped."""

from __future__ import annotations

from collections.abc import Sequence
from html import escape

from .view import number_text, unit_text

Attribute = str | int | float | bool | None
VOID = {"input", "br", "path", "rect"}


class Markup(str):
    """A text that is markup already and is not escaped again."""

    __slots__ = ()


def tag(name: str, *children: str, **attributes: Attribute) -> Markup:
    """Return an element; an attribute of None or False is left out, ``_`` in a name stands for ``-``."""
    written = "".join(_attribute(key, value) for key, value in attributes.items())
    if name in VOID:
        return Markup(f"<{name}{written}>" if name in ("input", "br") else f"<{name}{written}/>")
    return Markup(f"<{name}{written}>{join(children)}</{name}>")


def join(children: Sequence[str]) -> Markup:
    """Return children one after the other; what is no markup is escaped."""
    return Markup("".join(child if isinstance(child, Markup) else escape(child, quote=False) for child in children))


def _attribute(key: str, value: Attribute) -> str:
    if value is None or value is False:
        return ""
    name = key.rstrip("_").replace("_", "-")
    if value is True:
        return f" {name}"
    return f' {name}="{escape(str(value))}"'


def quantity(value: float, unit: str, energy: int, length: int, digits: int = 6) -> Markup:
    """Return a number with its unit that the page can show in other units.

    Parameters
    ----------
    value : float
    unit : str
    energy, length : int
        The powers of energy and length in its dimension.
    digits : int
        Significant digits that are shown.
    """
    text = f"{number_text(value, digits)} {unit_text(unit)}"
    return tag(
        "data",
        text,
        value=repr(float(value)),
        class_="quantity",
        data_powers=f"{energy},{length}",
        data_digits=None if digits == 6 else digits,
    )
