"""A progress bar that shows up on a terminal only, and only when work lasts."""

from __future__ import annotations

import time
from collections.abc import Iterable, Iterator, Sized
from typing import Any, TextIO

PATIENCE = 1.0
"""Seconds of work before a bar appears."""


def track(items: Iterable[Any], label: str, stream: TextIO) -> Iterator[Any]:
    """Yield items, showing how many are done and how long the rest will take.

    Items that know how many they are come one by one; others are gathered first.
    """
    listed = items if isinstance(items, Sized) else list(items)
    if not stream.isatty():
        yield from listed
        return
    started = time.monotonic()
    bar: Any = None
    try:
        for done, item in enumerate(listed):
            if bar is None and time.monotonic() - started > PATIENCE:
                bar = _bar(stream)
                bar.start()
                task = bar.add_task(label, total=len(listed))
            if bar is not None:
                bar.update(task, completed=done)
            yield item
    finally:
        if bar is not None:
            bar.stop()


def _bar(stream: TextIO) -> Any:
    from rich.console import Console
    from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

    columns = (TextColumn("{task.description}"), BarColumn(), MofNCompleteColumn(), TimeRemainingColumn())
    return Progress(*columns, console=Console(file=stream), transient=True)
