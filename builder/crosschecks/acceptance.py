"""Findings that a record accepts: they are silenced, and an acceptance of nothing is itself a finding."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from builder.crosschecks.rules import ACCEPTABLE, RULE_NAMES
from builder.problems import Problem, nearest
from builder.records import PartRecord
from builder.records.part import Accepted
from builder.units import temperature_text


def not_accepted(record: PartRecord, found: Sequence[Problem]) -> Iterator[Problem]:
    """What a record does not accept of what was found, and what it accepts in vain."""
    accepted = [entry for entry in record.part.accepted if entry.rule in ACCEPTABLE]
    yield from (problem for problem in found if not any(_meets(entry, problem) for entry in accepted))
    for i, entry in enumerate(record.part.accepted):
        if entry.rule not in RULE_NAMES:
            known = nearest(entry.rule, RULE_NAMES) or " The page Checks lists them."
            message = f"{entry.rule} is not a rule of the cross-checks.{known}"
            yield record.source.problem(("accepted", i, "rule"), "wrong-choice", message)
        elif entry.rule not in ACCEPTABLE:
            message = (
                f"{entry.rule} cannot be accepted: what it finds is never right. Remove the entry and correct that."
            )
            yield record.source.problem(("accepted", i, "rule"), "wrong-choice", message)
        elif not any(_meets(entry, problem) for problem in found):
            where = "" if entry.row is None else f" at {temperature_text(entry.row)}"
            message = f"{entry.rule} finds nothing{where}. Remove the entry, so that it hides nothing later."
            yield record.source.problem(("accepted", i), "accepted-nothing", message, "warning")


def _meets(entry: Accepted, problem: Problem) -> bool:
    return entry.rule == problem.rule and entry.row in (None, problem.row)
