"""How commands read the records: what is known of them from before is taken, unless --no-cache is given."""

from __future__ import annotations

import datetime
from pathlib import Path

import click

from builder.commands.options import REFUSES_CACHE
from builder.crosschecks import CheckedCatalog, checked_catalog
from builder.kept import Kept
from builder.records import Catalog, read_catalog


def catalog(records: Path) -> Catalog:
    """The records of a folder."""
    kept = _kept(records)
    read = read_catalog(records, kept)
    _tell(kept)
    return read


def checked(records: Path, today: datetime.date) -> CheckedCatalog:
    """The records of a folder with every problem that the cross-checks find."""
    kept = _kept(records)
    found = checked_catalog(records, today=today, kept=kept)
    _tell(kept)
    return found


def _kept(records: Path) -> Kept:
    context = click.get_current_context(silent=True)
    return Kept() if context and context.meta.get(REFUSES_CACHE) else Kept.beside(records)


def _tell(kept: Kept) -> None:
    if kept.trouble:
        click.echo(kept.trouble, err=True)
