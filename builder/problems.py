"""What is wrong with a record: data first, worded in one place."""

from __future__ import annotations

import json
from collections.abc import Iterable
from dataclasses import dataclass
from difflib import get_close_matches
from typing import Any, Literal

Severity = Literal["error", "warning"]


@dataclass(frozen=True)
class Problem:
    """One thing that is wrong, where it stands and what cures it.

    `file` is relative to where the command runs, `field` is the dotted path in the record (empty: the whole
    file), `message` a sentence with the value and a sentence with the cure. `row` is the temperature of the
    table's row as typed [°C]; `expected` is the value expected, in the record's own unit.
    """

    file: str
    line: int
    field: str
    rule: str
    message: str
    severity: Severity = "error"
    row: float | None = None
    expected: float | None = None

    def __str__(self) -> str:
        """The problem as every output says it."""
        where = f"{self.file}:{self.line}: "
        return where + (f"{self.place}: {self.message}" if self.field else self.message)

    @property
    def place(self) -> str:
        """The field, with the temperature of the table's row where it stands in one."""
        if self.row is None or self.field == "t_c":
            return self.field
        return f"{self.field} at {self.row:g} °C".replace("-", "−")

    def as_json(self) -> dict[str, Any]:
        """The problem as JSON answers it, without `row` and `expected` where they mean nothing."""
        answer = {name: getattr(self, name) for name in ("file", "line", "field", "severity", "rule", "message")}
        optional = {"row": self.row, "expected": self.expected}
        return answer | {name: value for name, value in optional.items() if value is not None}


def in_order(problems: Iterable[Problem]) -> tuple[Problem, ...]:
    """Problems in file and line order, each once."""
    return tuple(sorted(set(problems), key=lambda p: (p.file, p.line, p.field, p.message)))


def errors(problems: Iterable[Problem]) -> tuple[Problem, ...]:
    """Those that stop a build."""
    return tuple(p for p in problems if p.severity == "error")


def warnings(problems: Iterable[Problem]) -> tuple[Problem, ...]:
    """Those that are shown and stop nothing."""
    return tuple(p for p in problems if p.severity == "warning")


def count_text(count: int, noun: str) -> str:
    """A count with its noun.

    >>> count_text(1, "error"), count_text(2, "error")
    ('1 error', '2 errors')
    """
    return f"{count} {noun}" if count == 1 else f"{count} {noun}s"


def one_line(text: str) -> str:
    """Text as a message or a terminal can take it: what cannot be seen is spelled out.

    >>> one_line("two\\nlines"), one_line("10 kΩ")
    ('two\\\\nlines', '10 kΩ')
    """
    return text if text.isprintable() else "".join(c if c.isprintable() else ascii(c)[1:-1] for c in text)


def clipped(text: str, longest: int = 60) -> str:
    """Text on one line, cut where it is longer than a message can show."""
    return one_line(text if len(text) <= longest else text[: longest - 1] + "…")


def quoted(value: Any) -> str:
    """A value as a message shows it: on one line, at most some 60 characters.

    >>> quoted("no"), quoted(6.5), quoted([1, "a"]), quoted(None)
    ('"no"', '6.5', '[1, "a"]', 'nothing')
    """
    if isinstance(value, str):
        return f'"{clipped(value)}"'
    return "nothing" if value is None else clipped(json.dumps(value, ensure_ascii=False, default=str))


def near_name(name: str, known: Iterable[str]) -> str:
    """The known name that is nearest; empty where none is near."""
    by_fold = {k.casefold(): k for k in known}
    close = get_close_matches(name.casefold(), by_fold, n=1, cutoff=0.6)
    return by_fold[close[0]] if close else ""


def nearest(name: str, known: Iterable[str]) -> str:
    """A sentence that names the nearest known name; empty where none is near.

    >>> nearest("tolerence_pct", ["tolerance_pct", "at_c"])
    ' Did you mean tolerance_pct?'
    """
    near = near_name(name, known)
    return f" Did you mean {clipped(near)}?" if near else ""
