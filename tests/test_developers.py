"""The steps of DEVELOPERS.md work as they are printed, in a copy of the package."""

from __future__ import annotations

import os
import re
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from documentation import ROOT

TEXT = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
SECTIONS = dict(re.findall(r"^## (.*?)\n(.*?)(?=^## |\Z)", TEXT, re.MULTILINE | re.DOTALL))
PACKAGE = ROOT / "tabulate" / "slopewell"

DOCUMENT = """
schema = "slopewell/potential/1"
title = "Weakly bound beads, invented"
temperature = "300 K"
[units]
energy = "eV"
length = "angstrom"
[species.A]
[[interaction]]
between = ["A", "A"]
form = "lennard-jones"
parameters = { epsilon = 0.001, sigma = 3.4 }
cutoff = { at = 9, treatment = "switch", from = 7 }
[grid]
from = 1.6
to = 9
rows = 30
[[output]]
file = "beads.json"
"""
COPY_TO_SHOW = """
import sys
from pathlib import Path
from slopewell.files import format_of
old, new = map(Path, sys.argv[1:])
format_of(new).write(format_of(old).read(old), new)
print(format_of(new).read(new).interactions[0].separation.size)
"""


def block(section: str, language: str) -> str:
    (found,) = re.findall(rf"```{language}\n(.*?)```", SECTIONS[section], re.DOTALL)
    return found


def append(path: Path, text: str) -> None:
    path.write_text(path.read_text(encoding="utf-8") + text, encoding="utf-8")


@pytest.fixture(scope="module")
def extended(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with the package as the page extends it, and a document."""
    folder = tmp_path_factory.mktemp("extended")
    copy = folder / "slopewell"
    shutil.copytree(PACKAGE, copy, ignore=shutil.ignore_patterns("__pycache__"))
    shutil.copytree(ROOT / "schemas", copy / "schemas", ignore=shutil.ignore_patterns("__pycache__"))
    append(copy / "forms" / "catalogue.toml", "\n" + block("To add a form", "toml"))
    (copy / "checks" / "well_holds.py").write_text(block("To add a check", "python"), encoding="utf-8")
    append(
        copy / "checks" / "register.py",
        "\nfrom . import well_holds\nPOTENTIAL_CHECKS = (*POTENTIAL_CHECKS, well_holds.CHECK)\n",
    )
    (copy / "files" / "shown.py").write_text(block("To add a file format", "python"), encoding="utf-8")
    line = 'FORMATS = (*FORMATS, Format("shown", (".show",), True, shown.write, shown.read))'
    append(copy / "files" / "formats.py", f"\nfrom . import shown\n{line}\n")
    (folder / "beads.toml").write_text(DOCUMENT, encoding="utf-8")
    return folder


def run(folder: Path, *arguments: str) -> str:
    environment = os.environ | {"PYTHONPATH": str(folder)}
    done = subprocess.run(
        [sys.executable, *arguments], cwd=folder, env=environment, capture_output=True, text=True, check=True
    )
    return done.stdout


def test_a_form_is_added_by_one_block(extended: Path) -> None:
    assert 'form = "soft-wall"' in run(extended, "-m", "slopewell", "forms", "soft-wall")


def test_a_check_and_a_format_are_added_by_one_file_and_one_line(extended: Path) -> None:
    assert "note    well-holds" in run(extended, "-m", "slopewell", "tabulate", "beads.toml")
    assert run(extended, "-c", COPY_TO_SHOW, "beads.json", "beads.show") == "30\n"
    assert (extended / "beads.show").read_text(encoding="utf-8").startswith('{\n "schema"')


@pytest.mark.parametrize("name", sorted(set(re.findall(r"`((?:\.?[a-z_]+/)+(?:[A-Za-z_.]+)?|[a-z]+\.py)`", TEXT))))
def test_everything_that_is_named_exists(name: str) -> None:
    assert (ROOT / name).exists() or (PACKAGE / name).exists()
