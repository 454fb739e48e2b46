"""Rules about what a record states and what it leaves out."""

from __future__ import annotations

from collections.abc import Iterator

from builder.crosschecks.subject import Check, Subject
from builder.problems import Problem, quoted
from builder.records.yaml_text import Path
from builder.units import number_text, range_text, temperature_text


def _tolerance_missing(subject: Subject) -> Iterator[Problem]:
    part, source, curve = subject.record.part, subject.record.source, subject.curve
    if curve is None or not curve.band.incomplete(curve.operating_c).any():
        return
    if part.rated.tolerance_pct is None:
        message = "is not stated, so the tolerance band is incomplete. Add it from the data sheet, in per cent."
        yield source.problem(("rated", "tolerance_pct"), "tolerance-missing", message, "warning")
    if not curve.band.b_tolerances:
        message = (
            "no B-value has a tolerance, so away from the rated temperature the tolerance band is incomplete. "
            "Add tolerance_pct to a B-value, or min and max columns to the table."
        )
        yield source.problem(("b_values",), "tolerance-missing", message, "warning")


def _document_missing(subject: Subject) -> Iterator[Problem]:
    if not subject.record.part.documents:
        message = "no document is named, so nobody can compare these figures with anything. Add the data sheet and its revision."
        yield subject.record.source.problem(("documents",), "document-missing", message, "warning")


def _outside_operating(subject: Subject) -> Iterator[Problem]:
    stated = subject.record.part.limits.operating_c
    if stated is None or subject.curve is None:
        return
    curve = subject.curve.curve
    beyond = [t_c for t_c in stated if curve.extrapolated(t_c)]
    if beyond:
        what = "is extrapolated" if curve.extends else "is unknown"
        ends = " and ".join(temperature_text(t_c) for t_c in beyond)
        message = (
            f"{range_text(stated)} reaches beyond the curve, {range_text(curve.span_c)}, which {what} up to {ends}. "
            "Ask the maker for a longer table, or state the range that the figures cover."
        )
        path = ("limits", "operating_c")
        yield subject.record.source.problem(path, "outside-operating", message, "warning")


def _bends_back(subject: Subject) -> Iterator[Problem]:
    stated = subject.record.part.steinhart_hart
    if stated is not None and stated.c <= 0:
        message = (
            f"{number_text(stated.c)} is not above zero, which no real ceramic has; the curve is not used outside its span. "
            "Compare the coefficients with the data sheet."
        )
        yield subject.record.source.problem(("steinhart_hart", "c"), "bends-back", message, "warning")


def _to_be_filled_in(subject: Subject) -> Iterator[Problem]:
    source = subject.record.source
    for path, text in _texts((), subject.record.part.model_dump()):
        if "FILL-IN" in text:
            message = f"{quoted(text)} is what intake puts where it cannot know. Fill it in from the data sheet."
            yield source.problem(path, "to-be-filled-in", message)


def _texts(path: Path, value: object) -> Iterator[tuple[Path, str]]:
    if isinstance(value, str):
        yield path, value
    elif isinstance(value, dict):
        for name, inner in value.items():
            yield from _texts((*path, name), inner)
    elif isinstance(value, list | tuple):
        for i, inner in enumerate(value):
            yield from _texts((*path, i), inner)


CHECKS: tuple[Check, ...] = (
    _tolerance_missing,
    _document_missing,
    _outside_operating,
    _bends_back,
    _to_be_filled_in,
)
