"""The part of the page about one interaction."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from ..units import UnitSystem
from .drawing import Drawing
from .markup import Markup, join, quantity, tag
from .mathml import formula_markup, name_markup
from .panels import bound_panels, panels_of
from .plot import LEVEL_SIGNS, flag_track, letter, panel_markup, separation_axis
from .verdicts import VERDICTS, mark_of
from .view import number_text, unit_text


def article(drawing: Drawing, number: int, systems: Sequence[UnitSystem]) -> Markup:
    """Return the section of one interaction: verdict, formula, curves, landmarks, parameters, findings."""
    prefix = f"pair-{number}"
    verdict = VERDICTS[drawing.verdict]
    heading = tag(
        "h2",
        drawing.name,
        " ",
        tag("span", mark_of(drawing.verdict), f" {verdict.words.lower()}", class_=f"chip {drawing.verdict}"),
        id_=f"{prefix}-name",
    )
    return tag(
        "article",
        heading,
        _formula(drawing),
        tag(
            "div",
            _figure(drawing, number, systems),
            tag("div", *_facts(drawing), class_="facts"),
            class_="beside",
        ),
        _findings(drawing, prefix),
        id_=prefix,
        aria_labelledby=f"{prefix}-name",
    )


def _formula(drawing: Drawing) -> Markup:
    stated = drawing.stated
    if stated is None or not stated.formula:
        return Markup("")
    origin = f"{stated.title}. {stated.source}" if stated.title else "As the document states it"
    return tag("div", Markup(formula_markup(stated.formula)), tag("p", origin, class_="origin"), class_="formula")


def _figure(drawing: Drawing, number: int, systems: Sequence[UnitSystem]) -> Markup:
    prefix = f"pair-{number}"
    panels = [panel_markup(panel, drawing, systems) for panel in [*panels_of(drawing), *bound_panels(drawing)]]
    slider = tag(
        "input",
        type="range",
        id_=f"{prefix}-place",
        min=0,
        max=0,
        value=0,
        aria_label=f"read out {drawing.name} at a separation",
        disabled=True,
    )
    return tag(
        "figure",
        _legend(drawing),
        flag_track(drawing, prefix),
        tag("div", *panels, tag("i", class_="cursor", hidden=True), class_="stack"),
        separation_axis(drawing, systems),
        slider,
        tag("output", "Point at the curves, or use the arrow keys.", for_=f"{prefix}-place", class_="readout"),
        tag("figcaption", _described(drawing)),
        class_="curves",
        data_drawing=number,
    )


def _legend(drawing: Drawing) -> Markup:
    if drawing.other is None:
        return Markup("")
    first = tag(
        "span",
        tag("span", class_="sample energy"),
        tag("span", class_="sample force"),
        f" {drawing.other.first_label}",
    )
    second = tag("span", tag("span", class_="sample other"), f" {drawing.other.label}")
    return tag("p", first, second, class_="legend")


def _described(drawing: Drawing) -> str:
    """Return the curves in words, for those who can't see them."""
    units, known = drawing.units, drawing.landmarks
    energy, length = unit_text(units.energy.text), unit_text(units.length.text)
    words = [f"Energy and force of {drawing.name} against separation."]
    bottom, depth, crossing = (known.get(key) for key in ("equilibrium_separation", "well_depth", "zero_crossing"))
    if bottom is not None and depth is not None:
        words.append(
            f"The pair is pushed apart below {number_text(bottom, 4)} {length} and pulled together beyond, "
            f"in a well {number_text(depth, 4)} {energy} deep."
        )
    elif crossing is None:
        words.append("There is no well.")
    if drawing.stated and drawing.stated.treatment:
        words.append(f"The curve is {drawing.stated.treatment}.")
    if drawing.rows is not None:
        words.append(f"Drawn from {drawing.rows:,} rows; every strip two pixels wide keeps its extremes.")
    return " ".join(words)


def _facts(drawing: Drawing) -> Iterator[Markup]:
    rows = [tag("tr", tag("th", label, scope="row"), tag("td", value)) for label, value in _landmark_rows(drawing)]
    if rows:
        yield tag("table", tag("caption", "Landmarks"), tag("tbody", *rows))
    rows = [tag("tr", tag("th", label, scope="row"), tag("td", value)) for label, value in _certified(drawing)]
    if rows:
        yield tag("table", tag("caption", "Reading between rows"), tag("tbody", *rows))
    stated = drawing.stated
    if stated is None:
        return
    if stated.parameters:
        rows = [
            tag(
                "tr",
                tag("th", tag("math", Markup(name_markup(parameter.name))), scope="row"),
                tag("td", parameter.value, *([tag("small", parameter.meaning)] if parameter.meaning else [])),
            )
            for parameter in stated.parameters
        ]
        yield tag("table", tag("caption", "Parameters"), tag("tbody", *rows))
    length = unit_text(drawing.units.length.text)
    bridges = [
        ("Bridge", f"from {number_text(start, 4)} to {number_text(end, 4)} {length}")
        for start, end in drawing.bridges
        if end > start
    ]
    settings = [*bridges, ("Cutoff", stated.treatment), ("Grid", stated.grid)]
    rows = [tag("tr", tag("th", label, scope="row"), tag("td", words)) for label, words in settings if words]
    if rows:
        yield tag("table", tag("caption", "Treatment"), tag("tbody", *rows))


LANDMARKS = (
    ("zero_crossing", "zero crossing", 0, 1),
    ("equilibrium_separation", "equilibrium separation", 0, 1),
    ("well_depth", "well depth", 1, 0),
    ("stiffness", "stiffness", 1, -2),
)
MARK_OF = {
    "zero_crossing": "zero-crossing",
    "equilibrium_separation": "equilibrium",
    "well_depth": "equilibrium",
}


def _landmark_rows(drawing: Drawing) -> Iterator[tuple[Markup, Markup]]:
    known, units = drawing.landmarks, drawing.units
    numbers = {mark.kind: number for number, mark in enumerate(drawing.marks, 1)}

    def label(words: str, kind: str | None) -> Markup:
        number = numbers.get(kind or "")
        return join([tag("b", str(number), class_="number"), f" {words}"] if number else [words])

    for key, words, energy, length in LANDMARKS:
        value = known.get(key)
        if value is not None:
            unit = units.per_length(-length).text if energy else units.length.text
            yield label(words, MARK_OF.get(key)), quantity(value, unit, energy, length)
    pull = known.get("largest_attraction")
    if pull:
        force = quantity(pull["force"], units.force.text, 1, -1)
        at = quantity(pull["separation"], units.length.text, 0, 1)
        yield label("largest attraction", "largest-attraction"), join([force, " at ", at])
    if known.get("classical_amplitude") is not None:
        yield (
            label("classical amplitude", None),
            quantity(known["classical_amplitude"], units.length.text, 0, 1),
        )
    if known.get("harmonic_wavenumber") is not None:
        yield label("harmonic wavenumber", None), Markup(f"{number_text(known['harmonic_wavenumber'])} cm⁻¹")
    if known.get("stationary_points") is not None:
        certainty = "proved" if known.get("proved") else "not proved"
        yield label("stationary points", None), Markup(f"{known['stationary_points']} ({certainty})")


def _certified(drawing: Drawing) -> Iterator[tuple[str, Markup]]:
    """Yield what is proved about reading between the rows, as labels and values."""
    certificate, units = drawing.certificate, drawing.units
    if not certificate:
        return
    for words, power in (("energy", 0), ("force", 1)):
        bound = certificate.get(f"{words}_error_bound")
        if bound is not None:
            size = quantity(bound, units.per_length(power).text, 1, -power, 3)
            at = quantity(certificate[f"{words}_error_at"], units.length.text, 0, 1, 4)
            yield f"error of {words}", join(["at most ", size, " near ", at])
    if not certificate.get("proved", True):
        yield "errors", Markup("no bound could be proved")
    if "last_places_off" in certificate:
        off, proved = certificate["last_places_off"], certificate.get("rows_proved", 0)
        yield "rows", Markup(f"{proved:,} proved right within {number_text(off, 3)} units in the last place")


def _findings(drawing: Drawing, prefix: str) -> Markup:
    if not drawing.flags:
        return Markup("")
    items = []
    for number, flag in enumerate(drawing.flags, 1):
        finding = flag.finding
        level = str(finding["level"])
        head = tag(
            "p",
            tag(
                "span",
                tag("span", LEVEL_SIGNS[level], aria_hidden="true"),
                f" {letter(number)}",
                class_=f"flag {level}",
            ),
            " ",
            tag("b", level),
            f" {finding['check']}",
            *([f": {finding['mistake']}"] if finding.get("mistake") else []),
        )
        remedy = tag("p", "Try: ", str(finding.get("try", "")), class_="remedy")
        items.append(
            tag(
                "li",
                head,
                tag("p", unit_text(str(finding["says"]))),
                remedy,
                id_=f"{prefix}-finding-{number}",
            )
        )
    return tag("section", tag("h3", "Findings"), tag("ol", *items, class_="findings"))
