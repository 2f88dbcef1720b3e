"""Progress shows up on a terminal only, and only when work lasts."""

from __future__ import annotations

import io
import time

import pytest
from slopewell.reports import progress


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def test_items_pass_through_in_order() -> None:
    for stream in (io.StringIO(), Terminal()):
        assert list(progress.track([3, 1, 2], "working", stream)) == [3, 1, 2]
        assert stream.getvalue() == ""


def test_work_that_lasts_is_shown_on_a_terminal(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    monkeypatch.setenv("TERM", "xterm")
    stream = Terminal()
    for _ in progress.track(range(3), "working", stream):
        time.sleep(0.01)
    assert "working" in stream.getvalue()


def test_work_that_lasts_stays_silent_elsewhere(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(progress, "PATIENCE", 0.0)
    stream = io.StringIO()
    assert list(progress.track(range(3), "working", stream)) == [0, 1, 2]
    assert stream.getvalue() == ""
