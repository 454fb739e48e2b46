"""The one refusal of a bill of materials."""

from __future__ import annotations


class Unreadable(Exception):
    """A file that is no bill that can be read without guessing: the line where there is one, what is wrong, what to do."""

    def __init__(self, message: str, line: int | None = None) -> None:
        super().__init__(message)
        self.message = message
        self.line = line
