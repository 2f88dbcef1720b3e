"""What is wrong with an input, where, and how to mend it: values that can be collected and shown."""

from __future__ import annotations

import difflib
from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Problem:
    """One thing that is wrong with an input.

    Attributes
    ----------
    at : str
        The place: a key path such as ``interaction[1].cutoff.from``, or a line.
    says : str
        What was found and what was expected.
    remedy : str
        How to mend it.
    excerpt : str
        The faulty text with a caret line under the place; empty where there is none.
    line : int or None
        The line of the file, where it is known.
    """

    at: str
    says: str
    remedy: str = ""
    excerpt: str = ""
    line: int | None = None


class UnusableInput(ValueError):
    """An input that can't be used, with every problem found in it.

    Attributes
    ----------
    problems : tuple of Problem
    file : str
        The file as the user named it; empty for an input that is no file.
    """

    def __init__(self, problems: Iterable[Problem], file: str = "") -> None:
        self.problems = tuple(problems)
        self.file = file
        super().__init__("; ".join(f"{p.at}: {p.says}" if p.at else p.says for p in self.problems))


def nearest(name: str, known: Iterable[str]) -> str:
    """Say which known name is meant: the nearest one, or all of them sorted.

    Examples
    --------
    >>> nearest("sigm", ["epsilon", "sigma"])
    'Did you mean "sigma"? Known here: epsilon, sigma.'
    """
    names = sorted(known)
    listing = f"Known here: {', '.join(names)}." if names else "None is known here."
    close = difflib.get_close_matches(name, names, n=1)
    return f'Did you mean "{close[0]}"? {listing}' if close else listing
