"""What a cross-check looks at."""

from __future__ import annotations

import datetime
from collections.abc import Callable, Iterator
from dataclasses import dataclass

from builder.part_curve import PartCurve
from builder.problems import Problem
from builder.records import PartRecord


@dataclass(frozen=True, eq=False)
class Subject:
    """A part's record, its curve (None where its table makes none), and the day of the check."""

    record: PartRecord
    curve: PartCurve | None
    today: datetime.date


Check = Callable[[Subject], Iterator[Problem]]
