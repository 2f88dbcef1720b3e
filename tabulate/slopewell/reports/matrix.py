"""An index of many interactions: species by species, each cell with its verdict and a link."""

from __future__ import annotations

from collections.abc import Sequence

from .drawing import Drawing
from .markup import Markup, tag
from .verdicts import VERDICTS, mark_of


def matrix(drawings: Sequence[Drawing]) -> Markup:
    """Return the index as a table, or as a list where names are no pairs of species."""
    if any(not drawing.between[1] for drawing in drawings):
        items = [tag("li", _link(drawing, place, named=True)) for place, drawing in enumerate(drawings)]
        return tag(
            "nav",
            tag("h2", "Interactions", id_="index"),
            tag("ul", *items, class_="index"),
            aria_labelledby="index",
        )
    species = list(dict.fromkeys(name for drawing in drawings for name in drawing.between))
    cells = {drawing.between: _link(drawing, place, named=False) for place, drawing in enumerate(drawings)}
    head = tag("tr", tag("td"), *(tag("th", name, scope="col") for name in species))
    rows = [
        tag("tr", tag("th", first, scope="row"), *(_cell(cells, first, second, species) for second in species))
        for first in species
    ]
    table = tag("table", tag("thead", head), tag("tbody", *rows), class_="matrix")
    return tag(
        "nav",
        tag("h2", "Interactions", id_="index"),
        tag("p", "The verdict of each pair of species; every cell leads to its curves.", class_="source"),
        tag("div", table, class_="wide", tabindex=0, role="group", aria_label="verdicts by species"),
        _key(drawings),
        aria_labelledby="index",
    )


def _cell(cells: dict[tuple[str, str], Markup], first: str, second: str, species: list[str]) -> Markup:
    upper = species.index(second) >= species.index(first)
    link = cells.get((first, second)) or cells.get((second, first))
    return tag("td", link) if link and upper else tag("td")


def _link(drawing: Drawing, place: int, *, named: bool) -> Markup:
    words = f"{drawing.name}: {VERDICTS[drawing.verdict].words.lower()}"
    content = [mark_of(drawing.verdict)] + ([Markup(" "), tag("span", drawing.name)] if named else [])
    return tag("a", *content, href=f"#pair-{place}", class_=drawing.verdict, aria_label=words, title=words)


def _key(drawings: Sequence[Drawing]) -> Markup:
    counts = {name: sum(drawing.verdict == name for drawing in drawings) for name in VERDICTS}
    items = [
        tag(
            "li",
            tag("span", mark_of(name), class_=f"chip {name}"),
            f" {VERDICTS[name].words.lower()}: {count}",
        )
        for name, count in counts.items()
        if count
    ]
    return tag("ul", *items, class_="key")
