"""Shell completion, written out from the command line's own parser."""

from __future__ import annotations

import argparse
from collections.abc import Callable, Mapping
from dataclasses import dataclass

from ..problems import Problem, UnusableInput, nearest


@dataclass(frozen=True, slots=True)
class Command:
    """What can follow the name of a command: options, words, and whether files can."""

    name: str
    help: str
    options: tuple[tuple[str, str], ...]
    words: tuple[str, ...]
    files: bool


def commands_of(parser: argparse.ArgumentParser, words: Mapping[str, tuple[str, ...]]) -> list[Command]:
    """Return the commands of a parser.

    Parameters
    ----------
    parser : ArgumentParser
        With one level of commands.
    words : mapping
        What the first argument of a command may be, where it is no file.
    """
    (group,) = (action for action in parser._actions if isinstance(action, argparse._SubParsersAction))
    lines = {action.dest: action.help or "" for action in group._choices_actions}
    return [
        Command(
            name=name,
            help=lines.get(name, ""),
            options=tuple(
                (text, action.help or "")
                for action in command._actions
                for text in action.option_strings
                if text.startswith("--")
            ),
            words=words.get(name, ()),
            files=name not in words,
        )
        for name, command in group.choices.items()
    ]


def completion(shell: str, commands: list[Command]) -> str:
    """Return the script that makes a shell complete the commands.

    Raises
    ------
    UnusableInput
        If there is none for the shell.
    """
    if shell not in SHELLS:
        raise UnusableInput([Problem("", f'There is no completion for "{shell}".', nearest(shell, SHELLS))])
    return SHELLS[shell](commands)


def _bash(commands: list[Command]) -> str:
    cases = [
        f"    {command.name}) words={_quoted(' '.join([*(o for o, _ in command.options), *command.words]))}"
        f"; files={int(command.files)} ;;"
        for command in commands
    ]
    names = " ".join(command.name for command in commands)
    return "\n".join(
        [
            "_slopewell() {",
            '  local current="${COMP_WORDS[COMP_CWORD]}" words="" files=0',
            "  if [ $COMP_CWORD -eq 1 ]; then",
            f'    COMPREPLY=($(compgen -W {_quoted(names + " --help --version")} -- "$current"))',
            "    return",
            "  fi",
            '  case "${COMP_WORDS[1]}" in',
            *cases,
            "  esac",
            '  COMPREPLY=($(compgen -W "$words" -- "$current"))',
            "  if [ $files -eq 1 ] && [ ${#COMPREPLY[@]} -eq 0 ]; then",
            "    compopt -o default 2>/dev/null",
            "  fi",
            "}",
            "complete -F _slopewell slopewell",
            "",
        ]
    )


def _zsh(commands: list[Command]) -> str:
    described = [f"    {_quoted(f'{command.name}:{command.help}')}" for command in commands]
    cases = []
    for command in commands:
        options = " ".join(_quoted(f"{option}[{_plain(text)}]") for option, text in command.options)
        rest = "'*:file:_files'" if command.files else _quoted(f"*:name:({' '.join(command.words)})")
        cases.append(f"    {command.name}) _arguments {options} {rest} ;;")
    return "\n".join(
        [
            "#compdef slopewell",
            "_slopewell() {",
            "  local -a commands",
            "  commands=(",
            *described,
            "  )",
            "  if (( CURRENT == 2 )); then",
            "    _describe command commands",
            "    return",
            "  fi",
            "  local chosen=$words[2]",
            "  shift words",
            "  (( CURRENT-- ))",
            "  case $chosen in",
            *cases,
            "  esac",
            "}",
            "compdef _slopewell slopewell",
            "",
        ]
    )


def _fish(commands: list[Command]) -> str:
    lines = ["complete -c slopewell -e"]
    for command in commands:
        lines.append(f"complete -c slopewell -n __fish_use_subcommand -f -a {command.name} -d {_quoted(command.help)}")
        here = f"complete -c slopewell -n '__fish_seen_subcommand_from {command.name}'"
        lines += [f"{here} -l {option[2:]} -d {_quoted(text)}" for option, text in command.options]
        if command.words:
            lines.append(f"{here} -f -a {_quoted(' '.join(command.words))}")
    return "\n".join([*lines, ""])


def _quoted(text: str) -> str:
    return "'" + text.replace("'", "’") + "'"


def _plain(text: str) -> str:
    return text.replace("[", "(").replace("]", ")").replace(":", ",")


SHELLS: dict[str, Callable[[list[Command]], str]] = {"bash": _bash, "fish": _fish, "zsh": _zsh}
