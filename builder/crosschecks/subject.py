"""What a cross-check looks at."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass

from builder.part_curve import PartCurve
from builder.problems import Problem
from builder.records import PartRecord


@dataclass(frozen=True, eq=False)
class Subject:
    """A part's record, and its curve (None where its table makes none)."""

    record: PartRecord
    curve: PartCurve | None


Check = Callable[[Subject], Iterator[Problem]]
