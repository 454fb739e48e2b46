"""What `check --since` adds: whether the ledger was kept."""

from __future__ import annotations

from pathlib import Path

import click

from builder.commands.named import stop
from builder.history import HistoryUnread, Repository, ledger_slips, present_state, states_since
from builder.problems import Problem
from builder.records import Catalog

_APART = (
    "Revision {revision} is not among the commits that lead to this one, as far as this clone knows: what was entered there "
    "counts as removed here. Where a branch is behind, give git merge-base of the two."
)


def slips_since(records: Path, since: str, catalog: Catalog) -> tuple[Problem, ...]:
    """What of the ledger is not as it was since a revision; that git cannot say ends the command."""
    repository = Repository(records)
    try:
        commit, now = repository.commit(since), present_state(records, catalog)
        if not repository.leads_to_head(commit):
            click.echo(_APART.format(revision=commit.short), err=True)
        states = states_since(repository, commit, now)
    except HistoryUnread as unread:
        stop(str(unread), 2)
    for problem in states[0].unread:
        click.echo(f"Not readable in revision {commit.short}, so no ledger in it is compared: {problem}", err=True)
    return ledger_slips(states, now)
