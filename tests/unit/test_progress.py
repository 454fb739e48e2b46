"""A bar where somebody looks, nothing elsewhere."""

from __future__ import annotations

import io
import sys

import pytest

from builder import progress
from builder.processes import shared_out
from builder.progress import Progress


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def terminal(monkeypatch: pytest.MonkeyPatch) -> Terminal:
    """Standard error from here on; in a fixture pytest would set its own again before the test begins."""
    made = Terminal()
    monkeypatch.setattr(sys, "stderr", made)
    return made


def test_a_terminal_is_shown_a_bar_with_counts_that_goes_away(monkeypatch: pytest.MonkeyPatch) -> None:
    shown = terminal(monkeypatch)
    monkeypatch.setattr(progress, "_SILENT_S", -1.0)
    bar = Progress("Reading records", 10)
    bar.show(5)
    bar.end()
    assert shown.getvalue() == f"\rReading records [{'#' * 15}{' ' * 15}] 5/10\r\x1b[K"


def test_what_is_soon_done_shows_no_bar(monkeypatch: pytest.MonkeyPatch) -> None:
    shown = terminal(monkeypatch)
    bar = Progress("Reading records", 10)
    bar.show(5)
    bar.end()
    assert shown.getvalue() == ""


def test_nothing_is_shown_where_nobody_looks(
    capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(progress, "_SILENT_S", -1.0)
    assert shared_out(lambda items: [2 * item for item in items], range(3), "Doubling") == [0, 2, 4]
    assert capsys.readouterr().err == ""


def test_every_share_moves_the_bar(monkeypatch: pytest.MonkeyPatch) -> None:
    shown = terminal(monkeypatch)
    monkeypatch.setattr(progress, "_SILENT_S", -1.0)
    shared_out(lambda items: list(items), range(4), "Copying")
    assert [text[-3:] for text in shown.getvalue().split("\r")[1:-1]] == ["1/4", "2/4", "3/4", "4/4"]
