"""The catalogue of forms, for people."""

from __future__ import annotations

from textwrap import wrap

from ..forms import catalogue, form, paste_block

WIDTH = 96


def list_lines() -> list[str]:
    """Return one line a form: name and title."""
    forms = catalogue().values()
    width = max(len(known.name) for known in forms)
    return [f"{known.name:<{width}}  {known.title}" for known in forms]


def form_lines(name: str) -> list[str]:
    """Return what there is to say of one form, ending in a block to paste into a document."""
    chosen = form(name)
    width = max(len(parameter.name) for parameter in chosen.parameters)
    lines = [chosen.title, "", *wrap(f"U(r) = {chosen.formula}", WIDTH, subsequent_indent="       "), ""]
    lines += wrap(chosen.about, WIDTH)
    lines += ["", "Parameters"]
    for parameter in chosen.parameters:
        bounds = " and ".join(f"{kind.replace('-', ' ')} {float(value):g}" for kind, value in parameter.bounds)
        dimension = "pure number" if parameter.dimension == "1" else parameter.dimension
        extras = [dimension, bounds, f"default {parameter.default}" if parameter.default else ""]
        note = "; ".join(extra for extra in extras if extra)
        lines.append(f"  {parameter.name:<{width}}  {parameter.meaning} ({note})")
    lines += ["", *wrap(f"Source: {chosen.source}", WIDTH, subsequent_indent="        "), ""]
    lines += ["To paste into a document (the values are an example):", "", paste_block(chosen)]
    return lines
