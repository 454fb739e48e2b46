"""What every page is made from: the checked catalog, where its pages stand, and what belongs together."""

from __future__ import annotations

import datetime
from collections import defaultdict
from collections.abc import Callable, Mapping, Sequence
from dataclasses import astuple, dataclass, field, fields, is_dataclass
from functools import cached_property, partial
from typing import Any, TypeVar

import numpy as np

from builder.circuit import Budget, Thermistor, budget, firmware_part
from builder.comparisons.nearest import NearestParts, Neighbour
from builder.crosschecks import CheckedCatalog
from builder.decisions import Swap, swap
from builder.decisions.swap import Verdict
from builder.kept import Kept, digest
from builder.ledger import Entry, alternate_ledgers, entries, part_ledger, replaced_since
from builder.pages.paths import Paths
from builder.part_curve import PartCurve, Sample, whole_steps_c
from builder.problems import Problem
from builder.processes import shared_out
from builder.records import Catalog, PartRecord, PositionRecord

SAMPLE_STEP_K = 1.0
# Each costs three error budgets.
_FEWEST_SWAPS = 4
T = TypeVar("T")


@dataclass(frozen=True, eq=False)
class Context:
    """One catalog on its way to pages."""

    checked: CheckedCatalog
    about: str = ""
    figures: bool = True
    kept: Kept = field(default_factory=Kept)

    @property
    def catalog(self) -> Catalog:
        """The records."""
        return self.checked.catalog

    @property
    def today(self) -> datetime.date:
        """The day the pages are made for."""
        return self.checked.today

    @cached_property
    def paths(self) -> Paths:
        """Where each page stands."""
        return Paths(self.catalog)

    def curve(self, record: PartRecord) -> PartCurve:
        """A part's curve."""
        return self.checked.curves[record.source.file]

    def sample(self, record: PartRecord) -> Sample:
        """A part's curve every 1 K over the range that its page shows; kept until another part's is asked for."""
        if self._sampled[0] is not record:
            self._sampled[:] = [record, self.curve(record).sample(whole_steps_c(self.shown_c(record), SAMPLE_STEP_K))]
        made: Sample = self._sampled[1]
        return made

    def shown_c(self, record: PartRecord) -> tuple[float, float]:
        """The operating range, or what of it the curve reaches where it is not to be extrapolated."""
        made = self.curve(record)
        low, high = made.operating_c
        return (low, high) if made.curve.extends else (max(low, made.curve.span_c[0]), min(high, made.curve.span_c[1]))

    @cached_property
    def _sampled(self) -> list[Any]:
        return [None, None]

    def budget(self, record: PositionRecord) -> Budget:
        """What is fitted at a position, every 1 K over its range; kept until another position is asked for."""
        if self._budgeted[0] is not record:
            self._budgeted[:] = [record, budget(record.position, *self.fitted(record), SAMPLE_STEP_K)]
        made: Budget = self._budgeted[1]
        return made

    def fitted(self, record: PositionRecord) -> tuple[Thermistor, PartCurve]:
        """The thermistor that is fitted at a position, and the curve of the part that its firmware was made for."""
        position = record.position
        fitted, made_for = (self.catalog.part(name) for name in (position.fitted, firmware_part(position)))
        limits = fitted.part.limits
        own = Thermistor(self.curve(fitted), limits.dissipation_mw_per_k, limits.max_power_mw)
        return own, self.curve(made_for)

    @cached_property
    def _budgeted(self) -> list[Any]:
        return [None, None]

    def problems(self, record: PartRecord | PositionRecord) -> tuple[Problem, ...]:
        """What is doubtful about a record, its table's file included."""
        files = {record.source.file, getattr(record, "table_file", None) or record.source.file}
        return tuple(p for file in sorted(files) for p in self._problems_by_file.get(file, ()))

    def digest(self, record: PartRecord | PositionRecord) -> str:
        """What a page takes of a record, in short, for its `made_from`: its file and its table's, its page's path, its problems."""
        path = self.paths.part(record) if isinstance(record, PartRecord) else self.paths.position(record)
        return digest(repr((record.digest, path, self.problems(record))).encode())

    def nearest(self, record: PartRecord) -> tuple[Neighbour, ...]:
        """The parts that this part's firmware would read best, nearest first."""
        return self._nearest[self._places[record.source.file]]

    @cached_property
    def _nearest(self) -> Sequence[tuple[Neighbour, ...]]:
        """Of every part; as found before, if no curve is another."""
        shelf = self.kept.shelf("nearest")
        key = digest(repr([(record.name, self.curve_digest(record)) for record in self.catalog.parts]).encode())
        found: list[list[tuple[Any, ...]]] | None = shelf.get(key)
        if found is None:
            nearest = NearestParts([self.curve(record) for record in self.catalog.parts])
            found = shared_out(partial(_neighbours, nearest), range(len(self.catalog.parts)), "Comparing parts")
            shelf.put(key, found)
        return [tuple(Neighbour(*each) for each in neighbours) for neighbours in found]

    def curve_digest(self, record: PartRecord) -> str:
        """Of a part's nominal curve and operating range."""

        def made() -> str:
            curve = self.curve(record)
            return digest(_written((curve.curve, curve.operating_c)).encode())

        return self.of_record("curve-digest", record, made)

    def of_record(self, name: str, record: PartRecord | PositionRecord, make: Callable[[], T]) -> T:
        """What one record alone gives, as it was made before if the record is as it was."""
        if not record.digest:
            return make()
        shelf = self.kept.shelf(name)
        made: T | None = shelf.head(record.digest)
        if made is None:
            made = make()
            shelf.put(record.digest, None, made)
        return made

    @cached_property
    def _places(self) -> Mapping[str, int]:
        return {record.source.file: place for place, record in enumerate(self.catalog.parts)}

    @cached_property
    def entries(self) -> tuple[Entry, ...]:
        """Every entry of the ledger, the oldest first."""
        return entries(self.catalog)

    def outdated(self, record: PartRecord) -> list[Entry]:
        """The decisions about a part that rest on a revision which has been replaced, the oldest first."""
        own = [entry for entry in part_ledger(record) if replaced_since(entry)]
        return sorted([*own, *self.outdated_at_positions(record)], key=lambda entry: entry.standing.on)

    def outdated_at_positions(self, record: PartRecord) -> list[Entry]:
        """Those of them that stand in the records of positions."""
        return self._outdated_at_positions.get(record.source.file, [])

    @cached_property
    def _outdated_at_positions(self) -> Mapping[str, list[Entry]]:
        by_part: dict[str, list[Entry]] = defaultdict(list)
        for place in self.catalog.positions:
            for ledger in alternate_ledgers(place, self.catalog):
                for entry in filter(replaced_since, ledger):
                    by_part[entry.part.source.file].append(entry)
        return by_part

    def positions_of(self, record: PartRecord) -> list[tuple[PositionRecord, str]]:
        """Where a part is fitted or an alternate, and which of the two."""
        return self._positions_by_part.get(record.source.file, [])

    def alternates(self, record: PositionRecord) -> list[PartRecord]:
        """The parts that are alternates at a position."""
        return [self.catalog.part(alternate.part) for alternate in record.position.alternates]

    def swap(self, record: PositionRecord, alternate: PartRecord) -> Swap:
        """What fitting an alternate at a position does; computed once."""
        key = record.source.file, alternate.source.file
        if key not in self._swaps:
            self._swaps[key] = swap(record, alternate, self.catalog)
        return self._swaps[key]

    @cached_property
    def _swaps(self) -> dict[tuple[str, str], Swap]:
        return {}

    @cached_property
    def pages_by_file(self) -> Mapping[str, tuple[str, str]]:
        """Name and page of the record that each file belongs to."""
        pages = {
            place.source.file: (place.position.position, self.paths.position(place)) for place in self.catalog.positions
        }
        for record in self.catalog.parts:
            page = record.number, self.paths.part(record)
            pages |= {record.source.file: page, record.table_file or record.source.file: page}
        return pages

    def verdict(self, record: PositionRecord, alternate: PartRecord) -> Verdict:
        """Whether an alternate may be fitted at a position; as found before, if no record that it rests on has changed."""
        return self._verdicts[record.source.file, alternate.source.file]

    @cached_property
    def _verdicts(self) -> Mapping[tuple[str, str], Verdict]:
        """Of every alternate at every position: nearly all the work of the whole matrix, so it is shared out."""
        swaps = [(place, part) for place in self.catalog.positions for part in self.alternates(place)]
        keys, shelf = [self._swap_key(*swap) for swap in swaps], self.kept.shelf("verdicts")
        missing = [(key, swap) for key, swap in zip(keys, swaps, strict=True) if shelf.head(key) is None]
        found = shared_out(self._found_verdicts, [swap for _, swap in missing], "Weighing swaps", _FEWEST_SWAPS)
        for (key, _), verdict in zip(missing, found, strict=True):
            shelf.put(key, None, verdict)
        places = ((place.source.file, part.source.file) for place, part in swaps)
        return dict(zip(places, map(shelf.head, keys), strict=True))

    def _swap_key(self, record: PositionRecord, alternate: PartRecord) -> str:
        named = [self.catalog.part(name) for name in record.position.named_parts().values()]
        return digest(repr([record.digest, alternate.digest, *(part.digest for part in named)]).encode())

    def _found_verdicts(self, swaps: Sequence[tuple[PositionRecord, PartRecord]]) -> list[Verdict]:
        return [self.swap(place, part).verdict for place, part in swaps]

    @cached_property
    def _problems_by_file(self) -> Mapping[str, tuple[Problem, ...]]:
        by_file: dict[str, list[Problem]] = defaultdict(list)
        for problem in self.catalog.problems:
            by_file[problem.file].append(problem)
        return {file: tuple(problems) for file, problems in by_file.items()}

    @cached_property
    def _positions_by_part(self) -> Mapping[str, list[tuple[PositionRecord, str]]]:
        by_part: dict[str, list[tuple[PositionRecord, str]]] = defaultdict(list)
        for place in self.catalog.positions:
            by_part[self.catalog.part(place.position.fitted).source.file].append((place, "fitted"))
            for alternate in place.position.alternates:
                by_part[self.catalog.part(alternate.part).source.file].append((place, "alternate"))
        return by_part


def _neighbours(nearest: NearestParts, places: Sequence[int]) -> list[list[tuple[Any, ...]]]:
    """The nearest parts of each of some parts, as plain tuples: these are kept, and come back ten times sooner."""
    return [[astuple(neighbour) for neighbour in nearest.of(place)] for place in places]


def _written(value: Any) -> str:
    """Numbers to the last digit, the same for equal values however they came about; a pickle is not."""
    if isinstance(value, np.ndarray):
        return repr(value.tolist())
    if is_dataclass(value):
        return f"{type(value).__name__}({', '.join(_written(getattr(value, field.name)) for field in fields(value))})"
    return ", ".join(map(_written, value)) if isinstance(value, tuple) else repr(value)
