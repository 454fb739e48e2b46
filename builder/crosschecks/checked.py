"""A catalog with every problem in it: of reading the records, and of every cross-check."""

from __future__ import annotations

import datetime
from collections import defaultdict
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise
from pathlib import Path

from builder.crosschecks import coefficients, statements, table_findings
from builder.crosschecks.acceptance import not_accepted
from builder.crosschecks.ledger_findings import approvals_of_errors, ledger_findings
from builder.crosschecks.position_findings import position_findings
from builder.crosschecks.subject import Check, Subject
from builder.kept import Kept, Shelf
from builder.part_curve import PartCurve, part_curve
from builder.problems import Problem, in_order
from builder.processes import shared_out
from builder.records import Catalog, PartRecord, read_catalog
from builder.records.table import TableData

_SHELF = "findings"
# One from a table of 166 rows with a band has 20 kB, and is made in a fifth of a millisecond.
_MOST_CURVES = 2000
_CHECKS: tuple[Check, ...] = (*table_findings.CHECKS, *coefficients.CHECKS, *statements.CHECKS)


@dataclass(frozen=True, eq=False)
class CheckedCatalog:
    """A catalog with every problem in it, and the curve of each part by the file of its record."""

    catalog: Catalog
    curves: Mapping[str, PartCurve]
    today: datetime.date

    @property
    def problems(self) -> tuple[Problem, ...]:
        """What is wrong or doubtful, in file and line order."""
        return self.catalog.problems


class _Curves(Mapping[str, PartCurve]):
    """Each part's curve by the file of its record, made when it is asked for; so many are held, the newest."""

    def __init__(self, parts: Iterable[PartRecord]) -> None:
        self._records = {record.source.file: record for record in parts}
        self._made: dict[str, PartCurve] = {}

    def __getitem__(self, file: str) -> PartCurve:
        if file not in self._made:
            if len(self._made) == _MOST_CURVES:
                del self._made[next(iter(self._made))]
            self._made[file] = part_curve(self._records[file])
        return self._made[file]

    def __iter__(self) -> Iterator[str]:
        return iter(self._records)

    def __len__(self) -> int:
        return len(self._records)


def checked_catalog(root: Path, *, today: datetime.date, kept: Kept | None = None) -> CheckedCatalog:
    """The records of a folder with every problem: of reading them, and of every cross-check.

    What `kept` has of a record that is as it was is not read and checked again.
    """
    kept = kept or Kept()
    catalog = read_catalog(root, kept)
    curves, shelf = _Curves(catalog.parts), kept.shelf(_SHELF)
    key = f"{catalog.digest} {today}"
    problems: tuple[Problem, ...] | None = shelf.get(key)
    if problems is None:
        problems = _problems(catalog, curves, today, shelf)
        shelf.put(key, problems)
        kept.save(_SHELF)
    return CheckedCatalog(replace(catalog, problems=problems), curves, today)


def _problems(
    catalog: Catalog, curves: Mapping[str, PartCurve], today: datetime.date, shelf: Shelf
) -> tuple[Problem, ...]:
    of_ledger = _by_file(ledger_findings(catalog, today, shelf))
    found: list[Problem] = []
    records = [*catalog.parts, *catalog.curveless]
    for record, of_figures in zip(records, _findings_of_figures(records, curves, shelf), strict=True):
        found += not_accepted(record, [*of_figures, *of_ledger.pop(record.source.file, ())])
    found += [problem for problems in of_ledger.values() for problem in problems]
    found += position_findings(catalog)
    found += [problem for loose in catalog.loose_tables for problem in table_findings.loose_table_findings(loose)]
    examined = [*(r.table for r in catalog.curveless), *(loose.table for loose in catalog.loose_tables)]
    found += _unexplained(catalog.problems, [table for table in examined if table is not None], found)
    found += approvals_of_errors(catalog, found)
    return in_order(found)


def _findings_of_figures(
    records: Sequence[PartRecord], curves: Mapping[str, PartCurve], shelf: Shelf
) -> list[list[Problem]]:
    """What the cross-checks find in the figures of each record, or have found in them."""
    missing = [record for record in records if shelf.get(record.digest) is None]
    subjects = [Subject(record, curves.get(record.source.file)) for record in missing]
    for record, found in zip(missing, shared_out(_findings_of_share, subjects, "Checking records"), strict=True):
        shelf.put(record.digest, found)
    return [shelf.get(record.digest) for record in records]


def findings(subject: Subject) -> list[Problem]:
    """What the cross-checks find in the figures of one part and its record does not accept."""
    return list(not_accepted(subject.record, _findings(subject)))


def _findings(subject: Subject) -> list[Problem]:
    return [problem for check in _CHECKS for problem in check(subject)]


def _findings_of_share(subjects: Sequence[Subject]) -> list[list[Problem]]:
    return [_findings(subject) for subject in subjects]


def _by_file(problems: Iterable[Problem]) -> dict[str, list[Problem]]:
    by_file: dict[str, list[Problem]] = defaultdict(list)
    for problem in problems:
        by_file[problem.file].append(problem)
    return by_file


def _unexplained(
    problems: Iterable[Problem], tables: Iterable[TableData], found: Iterable[Problem]
) -> Iterator[Problem]:
    """Problems of reading, without rows out of order that a finding explains: the wrong row itself says it better.

    A row that is too high stands above the row before it, one that is too low has the next row above it.
    """
    following = {(table.file, line): after for table in tables for line, after in pairwise(table.lines)}
    explained = {place for p in found for place in ((p.file, p.line), (p.file, following.get((p.file, p.line))))}
    out_of_order = ("not-falling", "repeated-temperature")
    return (p for p in problems if p.rule not in out_of_order or (p.file, p.line) not in explained)
