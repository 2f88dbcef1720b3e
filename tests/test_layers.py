"""Imports point downwards: from floor to floor, and among the files of one floor."""

from __future__ import annotations

import ast
from functools import cache
from graphlib import CycleError, TopologicalSorter
from importlib.util import find_spec
from pathlib import Path

import pytest
from layers import LAYERS

PACKAGE = Path(find_spec("slopewell").origin).parent
ENTRANCES = ("__init__", "__main__")
FILES = sorted(path for path in PACKAGE.rglob("*.py") if path.parent != PACKAGE / "schemas")


def module_of(path: Path) -> tuple[str, ...]:
    """Name of a file's module below the package; a package's own file is the package."""
    parts = path.relative_to(PACKAGE).with_suffix("").parts
    return parts[:-1] if parts[-1] == "__init__" and len(parts) > 1 else parts


def imports_of(text: str, module: tuple[str, ...], is_package: bool) -> set[tuple[str, ...]]:
    """What a module imports from the package, as names below it; also inside functions."""
    found: set[tuple[str, ...]] = set()
    for node in ast.walk(ast.parse(text)):
        if isinstance(node, ast.Import):
            found |= {tuple(n.name.split(".")[1:]) for n in node.names if n.name.split(".")[0] == "slopewell"}
        elif isinstance(node, ast.ImportFrom):
            base = tuple(node.module.split(".")) if node.module else ()
            if node.level:
                base = module[: len(module) - node.level + is_package] + base
            elif base[:1] == ("slopewell",):
                base = base[1:]
            else:
                continue
            found |= {(*base, n.name) for n in node.names}
    return found


def target(name: tuple[str, ...]) -> tuple[str, ...] | None:
    """The module that an imported name is, or is defined in."""
    for length in (len(name), len(name) - 1):
        place = PACKAGE.joinpath(*name[:length])
        if length > 0 and (place.with_suffix(".py").is_file() or (place / "__init__.py").is_file()):
            return name[:length]
    return ("schemas",) if name[:1] == ("schemas",) else None


@cache
def graph() -> dict[tuple[str, ...], set[tuple[str, ...]]]:
    edges = {}
    for path in FILES:
        module = module_of(path)
        names = imports_of(path.read_text(encoding="utf-8"), module, path.stem == "__init__")
        edges[module] = {found for name in names if (found := target(name)) and found != module}
    return edges


def upward(module: tuple[str, ...], imported: set[tuple[str, ...]]) -> list[str]:
    """The floors that a module imports from although they do not lie below its own."""
    here = LAYERS.index(module[0])
    others = {name[0] for name in imported} - set(ENTRANCES) - {module[0]}
    return sorted(name for name in others if LAYERS.index(name) >= here)


def test_every_file_stands_on_a_floor() -> None:
    assert {module_of(path)[0] for path in FILES} - set(ENTRANCES) <= set(LAYERS)


@pytest.mark.parametrize("module", [m for m in graph() if m[0] not in ENTRANCES], ids=".".join)
def test_a_file_imports_only_from_floors_below(module: tuple[str, ...]) -> None:
    assert upward(module, graph()[module]) == []


def test_files_do_not_import_each_other_in_a_circle() -> None:
    # A package's own file gathers the names of its files, which may not import it back.
    try:
        order = list(TopologicalSorter(graph()).static_order())
    except CycleError as error:
        pytest.fail(f"a circle of imports: {error.args[1]}")
    assert ("cli",) in order


def test_an_upward_import_is_seen_even_inside_a_function() -> None:
    names = imports_of("def f():\n    from ..workflow import check\n", ("formula", "parse"), is_package=False)
    assert upward(("formula", "parse"), {target(name) for name in names}) == ["workflow"]
