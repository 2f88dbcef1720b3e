"""The README shows what the program does."""

from __future__ import annotations

import hashlib
import re
import tomllib
from importlib import import_module

import pytest
import slopewell
from documentation import GENERATED, ROOT, generated
from slopewell.cli import main, parser
from slopewell.document import Source, understand
from slopewell.reports.page import CAUTION

README = (ROOT / "README.md").read_text(encoding="utf-8")


@pytest.mark.parametrize("file", GENERATED)
def test_generated_parts_are_up_to_date(file: str) -> None:
    text = (ROOT / file).read_text(encoding="utf-8")
    assert text == generated(text, file), "run python tests/documentation.py"


def test_the_output_of_units_is_real(capsys: pytest.CaptureFixture[str]) -> None:
    (quantity, unit, said), *_ = re.findall(r'`slopewell units "(.*?)" "(.*?)"` prints `(.*?)`', README)
    main(["units", quantity, unit])
    assert capsys.readouterr().out == f"{said}\n"


def test_the_example_document_can_be_used() -> None:
    (text,) = re.findall(r"```toml\n(.*?)```", README, re.DOTALL)
    document = understand(Source("README.md", text, hashlib.sha256(text.encode()).hexdigest(), tomllib.loads(text), {}))
    assert [interaction.potential.name for interaction in document.interactions] == ["W-W", "W-P"]


def test_every_command_that_is_named_exists() -> None:
    (commands,) = (action.choices for action in parser()._actions if action.choices)
    assert set(re.findall(r"slopewell ([a-z]+)\b(?! package)", "\n".join(re.findall(r"`[^`]+`", README)))) <= set(
        commands
    )


@pytest.mark.parametrize("link", re.findall(r"\]\(([^)#]+)\)", README))
def test_every_linked_file_exists(link: str) -> None:
    assert (ROOT / link).exists()


@pytest.mark.parametrize("name", re.findall(r"`slopewell\.([a-z_]+\.[a-z_]+)`", README))
def test_every_function_that_is_named_exists(name: str) -> None:
    module, function = name.split(".")
    assert callable(getattr(import_module(f"slopewell.{module}"), function))


def test_every_function_of_the_package_is_listed() -> None:
    assert set(re.findall(r"`slopewell\.([a-z_]+)`", README)) == set(slopewell.__all__)


def test_the_page_cautions_in_the_same_words() -> None:
    assert CAUTION in " ".join(README.split())
