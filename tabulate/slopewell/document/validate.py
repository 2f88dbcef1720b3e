"""Hold plain data against a published schema and say every fault in plain words, with its place."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from ..problems import Problem, nearest
from ..schemas import schema


def schema_problems(data: Any, name: str, line: Callable[[str], int | None]) -> list[Problem]:
    """Return what the schema of a name finds wrong, in the order of the document.

    Parameters
    ----------
    data : object
        What was read.
    name : str
        Name of the schema.
    line : callable
        From a key path to the line of the file.
    """
    from jsonschema import Draft202012Validator

    errors = Draft202012Validator(schema(name)).iter_errors(data)
    problems = [problem for error in errors for problem in _explain(error, line)]
    return sorted(set(problems), key=lambda problem: (problem.line or 0, problem.at, problem.says))


def key_path(parts: Any) -> str:
    """Write a path of keys and indices as ``interaction[1].cutoff.from``."""
    text = ""
    for part in parts:
        text += f"[{part}]" if isinstance(part, int) else f".{part}" if text else str(part)
    return text


def _problem(line: Callable[[str], int | None], path: str, says: str, remedy: str) -> Problem:
    return Problem(path, says, remedy, line=line(path))


def _explain(error: Any, line: Callable[[str], int | None]) -> list[Problem]:
    path = key_path(error.absolute_path)
    match error.validator:
        case "required":
            missing = [key for key in error.validator_value if key not in error.instance]
            return [_missing(path, key, line) for key in missing]
        case "additionalProperties" | "unevaluatedProperties":
            known = error.schema.get("properties", {})
            unknown = [key for key in error.instance if key not in known]
            return [
                _problem(
                    line,
                    f"{path}.{key}" if path else key,
                    f'There is no key "{key}" here.',
                    nearest(key, known),
                )
                for key in unknown
            ]
        case "anyOf" | "oneOf":
            return [_alternatives(error, path, line)]
        case "if" | "then" | "else":
            return [problem for inner in error.context for problem in _explain(inner, line)]
        case "not":
            says = f'"{error.absolute_path[-1]}" has no meaning here.'
            remedy = 'It belongs to treatment = "switch" or "force-switch"; take it out.'
            return [_problem(line, path, says, remedy)]
        case "dependentRequired":
            return [_dependent(error, path, line)]
        case _:
            return [_problem(line, path, *_in_words(error))]


def _missing(path: str, key: str, line: Callable[[str], int | None]) -> Problem:
    where = path or "the document"
    return _problem(line, f"{path}.{key}" if path else key, f'The key "{key}" is missing in {where}.', f"Add {key} = …")


def _alternatives(error: Any, path: str, line: Callable[[str], int | None]) -> Problem:
    keys = [key for part in error.validator_value for key in part["required"]]
    given = [key for key in keys if key in error.instance]
    quoted = [f'"{key}"' for key in keys]
    listing = " or ".join([", ".join(quoted[:-1]), quoted[-1]])
    if given:
        return _problem(line, f"{path}.{given[-1]}", f"Only one of {listing} may be given.", f"Take out {given[-1]}.")
    return _problem(line, path, f"One of {listing} is missing.", f"Add {keys[0]} = …")


def _dependent(error: Any, path: str, line: Callable[[str], int | None]) -> Problem:
    key, others = next(
        (key, others)
        for key, others in error.validator_value.items()
        if key in error.instance and not all(other in error.instance for other in others)
    )
    return _problem(line, f"{path}.{key}", f'"{key}" has no meaning without "{others[0]}".', "Take it out.")


TYPES = {
    "object": "a table of keys",
    "array": "a list",
    "string": "a text",
    "number": "a number",
    "integer": "a whole number",
}


def _in_words(error: Any) -> tuple[str, str]:
    value = error.instance
    shown = f'"{value}"' if isinstance(value, str) else str(value)
    shown = shown if len(shown) <= 40 else f"{shown[:40]}…"
    rule = error.validator_value
    match error.validator:
        case "type":
            wanted = " or ".join(TYPES.get(kind, kind) for kind in ([rule] if isinstance(rule, str) else rule))
            return f"Expected {wanted}, found {shown}.", f"Give {wanted}."
        case "enum":
            names = [str(item) for item in rule]
            return f"{shown} is not one of {', '.join(names)}.", nearest(str(value), names)
        case "const":
            return f"Expected {rule!r}, found {shown}.", f'Write "{rule}".'
        case "minimum" | "exclusiveMinimum":
            word = "at least" if error.validator == "minimum" else "more than"
            return f"{shown} is too small: it must be {word} {rule}.", "Give a larger number."
        case "maximum":
            return f"{shown} is too large: at most {rule:,} is taken.", "Give a smaller number."
        case "minItems" | "minProperties" | "minLength":
            return f"There are too few entries: at least {rule} expected.", "Add what is missing."
        case "maxItems" | "maxLength":
            return f"There are too many entries: at most {rule} expected.", "Take some out."
        case "pattern":
            return f"{shown} is not a name that is taken here.", "Use letters, digits, _ + * ' and hyphens."
        case _:
            return f"{shown} does not fit the rule {error.validator}.", "See slopewell schema."
