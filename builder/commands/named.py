"""The records that a command names."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import NoReturn

import click

from builder.commands import reading
from builder.crosschecks.checked import findings
from builder.crosschecks.subject import Subject
from builder.part_curve import part_curve
from builder.problems import Problem, count_text, errors, nearest
from builder.records import Catalog, PartRecord, PositionRecord, UnknownPart


def named_position(catalog: Catalog, name: str) -> PositionRecord:
    """The position a command names; that it is unknown ends the command."""
    numbers = [record.position.position for record in catalog.positions]
    known = {number.casefold(): record for number, record in zip(numbers, catalog.positions, strict=True)}
    if name.strip().casefold() not in known:
        near = nearest(name, numbers) or " Check its name."
        raise click.UsageError(f"{name} is not a position of the catalog.{near}")
    return known[name.strip().casefold()]


def named_part(records: Path, name: str) -> PartRecord:
    """The part a command names; its problems, or that it is unknown, end the command."""
    (record,) = named_parts(reading.catalog(records), (name,))
    return record


def named_parts(catalog: Catalog, names: tuple[str, ...]) -> list[PartRecord]:
    """The parts a command names; their problems, or that one is unknown, end the command."""
    faulty = errors(catalog.problems)
    found = [_named(catalog, name, faulty) for name in names]
    files = {record.source.file for record in found}
    own = [problem for problem in faulty if problem.file in files]
    for record in found:
        own += errors(findings(Subject(record, part_curve(record))))
    for problem in own:
        click.echo(str(problem), err=True)
    if own:
        sys.exit(1)
    tell_of_faults(catalog, "Other records")
    return found


def tell_of_faults(catalog: Catalog, whose: str) -> None:
    """Say on standard error that records have errors, where they have."""
    faulty = errors(catalog.problems)
    if faulty:
        click.echo(f"{whose} have {count_text(len(faulty), 'error')}; beadroll check shows them.", err=True)


def _named(catalog: Catalog, name: str, faulty: tuple[Problem, ...]) -> PartRecord:
    try:
        return catalog.part(name)
    except UnknownPart as unknown:
        if not faulty:
            raise click.UsageError(str(unknown)) from None
        for problem in faulty:
            click.echo(str(problem), err=True)
        stop(
            f"{unknown} The records have {count_text(len(faulty), 'error')}, shown above; the part may be among them.",
            1,
        )


def stop(message: str, code: int) -> NoReturn:
    """End the command with a message."""
    click.echo(message, err=True)
    sys.exit(code)
