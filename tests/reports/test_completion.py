from __future__ import annotations

import argparse
import shutil
import subprocess

import pytest
from slopewell.problems import UnusableInput
from slopewell.reports.completion import Command, commands_of, completion

COMMANDS = [
    Command("check", "look at files", (("--json", "print [JSON]"),), (), files=True),
    Command("forms", "list forms", (), ("mie", "morse"), files=False),
]
FISH = """\
complete -c slopewell -e
complete -c slopewell -n __fish_use_subcommand -f -a check -d 'look at files'
complete -c slopewell -n '__fish_seen_subcommand_from check' -l json -d 'print [JSON]'
complete -c slopewell -n __fish_use_subcommand -f -a forms -d 'list forms'
complete -c slopewell -n '__fish_seen_subcommand_from forms' -f -a 'mie morse'
"""


def test_commands_are_those_of_the_parser() -> None:
    top = argparse.ArgumentParser()
    commands = top.add_subparsers()
    commands.add_parser("check", help="look at files").add_argument("--json", action="store_true", help="print it")
    commands.add_parser("forms")
    found = commands_of(top, {"forms": ("mie",)})
    assert [command.name for command in found] == ["check", "forms"]
    assert found[0].options[-1] == ("--json", "print it")
    assert (found[1].words, found[1].files) == (("mie",), False)


def test_fish() -> None:
    assert completion("fish", COMMANDS) == FISH


@pytest.mark.skipif(shutil.which("bash") is None, reason="there is no bash here")
@pytest.mark.parametrize(
    ("words", "expected"),
    [("slopewell ch", "check"), ("slopewell forms mo", "morse"), ("slopewell check --j", "--json")],
)
def test_bash_completes(words: str, expected: str) -> None:
    parts = words.split()
    ask = f"COMP_WORDS=({words}); COMP_CWORD={len(parts) - 1}; _slopewell; echo ${{COMPREPLY[@]}}"
    run = ["bash", "-c", completion("bash", COMMANDS) + ask]
    assert subprocess.run(run, capture_output=True, text=True, check=True).stdout.strip() == expected


def test_zsh_describes_commands_and_options() -> None:
    script = completion("zsh", COMMANDS)
    assert "    'check:look at files'\n" in script
    assert "    check) _arguments '--json[print (JSON)]' '*:file:_files' ;;\n" in script


def test_another_shell_is_refused() -> None:
    with pytest.raises(UnusableInput, match='no completion for "csh"'):
        completion("csh", COMMANDS)
