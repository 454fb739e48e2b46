"""What can be found on a bill of materials: data first, its sentence beside it."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

Kind = Literal[
    "approved",
    "restricted",
    "withdrawn",
    "proposed",
    "no-standing",
    "differs",
    "unknown-number",
    "own-number-differs",
    "maker-differs",
    "quantity",
    "repeated-reference",
    "not-fitted",
    "missing-reference",
]
Severity = Literal["ok", "warning", "blocks"]


@dataclass(frozen=True)
class Finding:
    """One finding: where it stands on the bill (no line: it is missing there), what is meant, and how much it matters."""

    line: int | None
    reference: str
    number: str
    part: str | None
    finding: Kind
    severity: Severity
    message: str
