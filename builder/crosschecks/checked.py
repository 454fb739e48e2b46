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
from builder.crosschecks.subject import Check, Subject
from builder.part_curve import PartCurve, part_curve
from builder.problems import Problem, in_order
from builder.processes import shared_out
from builder.records import Catalog, read_catalog
from builder.records.table import TableData

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


def checked_catalog(root: Path, *, today: datetime.date) -> CheckedCatalog:
    """The records of a folder with every problem: of reading them, and of every cross-check."""
    catalog = read_catalog(root)
    curves = {record.source.file: part_curve(record) for record in catalog.parts}
    subjects = [Subject(r, curves.get(r.source.file)) for r in (*catalog.parts, *catalog.curveless)]
    of_ledger = _by_file(ledger_findings(catalog, today))
    found: list[Problem] = []
    for subject, of_figures in zip(subjects, shared_out(_findings_of_share, subjects), strict=True):
        found += not_accepted(subject.record, [*of_figures, *of_ledger.pop(subject.record.source.file, ())])
    found += [problem for problems in of_ledger.values() for problem in problems]
    found += [problem for loose in catalog.loose_tables for problem in table_findings.loose_table_findings(loose)]
    examined = [*(r.table for r in catalog.curveless), *(loose.table for loose in catalog.loose_tables)]
    found += _unexplained(catalog.problems, [table for table in examined if table is not None], found)
    found += approvals_of_errors(catalog, found)
    return CheckedCatalog(replace(catalog, problems=in_order(found)), curves, today)


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
