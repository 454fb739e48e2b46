"""The one refusal of `intake`."""

from __future__ import annotations


class Unreadable(Exception):
    """A table that cannot be read without guessing: the line, what is wrong with the value, what to do."""

    def __init__(self, line: int | None, message: str) -> None:
        super().__init__(message)
        self.line = line
        self.message = message


class NotANumber(Unreadable):
    """A cell that is no number under the decimal sign being tried."""


def clipped(text: str, length: int = 60) -> str:
    """Text from the file, fit for a comment or a message: on one line, printable, not long."""
    shown = "".join(c if c.isprintable() else " " for c in " ".join(text.split()))
    return shown if len(shown) <= length else shown[: length - 1] + "…"
