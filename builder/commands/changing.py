"""The command `changes`."""

from __future__ import annotations

import sys
from pathlib import Path

import click

from builder.commands import reading
from builder.commands.named import stop
from builder.commands.options import NO_CACHE, RECORDS
from builder.crosschecks.checked import findings
from builder.crosschecks.subject import Subject
from builder.exports import change_rows, rows
from builder.history import Changes, HistoryUnread, Repository, changes, present_state, state_at
from builder.part_curve import part_curve
from builder.problems import Problem, errors


@click.command("changes")
@click.argument("revision", default="HEAD", metavar="[REVISION]")
@RECORDS
@click.option(
    "--format",
    "form",
    type=click.Choice(["table", "json", "markdown"]),
    default="table",
    show_default=True,
    help="How to answer.",
)
@NO_CACHE
def changes_command(revision: str, records: Path, form: str) -> None:
    """What the records' edits since REVISION change, in kelvin.

    REVISION is any that git knows: a commit, branch or tag; without it the last commit.
    """
    catalog = reading.catalog(records)
    repository = Repository(records)
    try:
        since, now = repository.commit(revision), present_state(records, catalog)
        found = changes(state_at(repository, since, now), now)
    except HistoryUnread as unread:
        stop(str(unread), 2)
    if form == "json":
        click.echo(rows.json_text(change_rows.changes_answer(found, since)), nl=False)
    elif form == "markdown":
        click.echo(change_rows.changes_markdown(found, since))
    else:
        click.echo(change_rows.changes_text(found, since))
    wrong = [*errors(catalog.problems), *_faults(found)]
    for problem in wrong:
        click.echo(str(problem), err=True)
    sys.exit(1 if wrong else 0)


def _faults(found: Changes) -> list[Problem]:
    """Errors that the cross-checks find in parts that changed."""
    changed = [change.pair.now for change in found.parts if change.pair.now is not None]
    return [p for r in changed for p in errors(findings(Subject(r, part_curve(r))))]
