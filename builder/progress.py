"""How far a long run has come: a bar with counts on a terminal, after two seconds; nothing elsewhere."""

from __future__ import annotations

import sys
import time

_SILENT_S = 2.0
_WIDTH = 30


class Progress:
    """The bar of one stage, on standard error; it is gone when the stage is done."""

    def __init__(self, doing: str, total: int) -> None:
        self._doing = doing
        self._total = total
        self._start_s = time.monotonic()
        self._shown = False

    def show(self, done: int) -> None:
        """Say that so many are done."""
        if not sys.stderr.isatty() or time.monotonic() - self._start_s < _SILENT_S:
            return
        full = _WIDTH * done // max(self._total, 1)
        sys.stderr.write(f"\r{self._doing} [{'#' * full}{' ' * (_WIDTH - full)}] {done}/{self._total}")
        sys.stderr.flush()
        self._shown = True

    def end(self) -> None:
        """Take the bar away."""
        if self._shown:
            sys.stderr.write("\r\x1b[K")
            sys.stderr.flush()
