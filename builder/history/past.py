"""The newest revisions that touched the records, and what each of them changed."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

from builder.history.changes import Changes, changes
from builder.history.repository import Commit, Repository
from builder.history.revision import State, present_state, state_at
from builder.records import Catalog

_NOTHING = State("", Catalog(), {})


@dataclass(frozen=True)
class Step:
    """A commit and the one before it that touched the records; None where they begin with it."""

    newer: Commit
    older: Commit | None


@dataclass(frozen=True)
class Past:
    """The newest revisions of a records folder, at most so many."""

    records: Path
    most: int

    @property
    def is_under_git(self) -> bool:
        """Whether the folder lies in a repository; git itself is not asked."""
        here = self.records.resolve()
        return any((folder / ".git").exists() for folder in (here, *here.parents))

    def steps(self) -> tuple[Step, ...]:
        """The revisions, newest first; the last one of a clone that was cut off is left out, it cannot be compared.

        Raises
        ------
        HistoryUnread
            Git cannot read them.
        """
        repository = Repository(self.records)
        commits = repository.commits(f"--max-count={self.most + 1}", repository.commit("HEAD").hash, "--", ".")
        older: list[Commit | None] = [*commits[1:]]
        if len(commits) <= self.most and not repository.is_shallow:
            older.append(None)
        return tuple(Step(newer, before) for newer, before in zip(commits, older, strict=False))

    def told(self, steps: tuple[Step, ...], catalog: Catalog) -> Iterator[tuple[Step, Changes]]:
        """What each revision changed; records that are the same in the present catalog are taken from there.

        Raises
        ------
        HistoryUnread
            Git cannot read one of them.
        """
        repository, state = Repository(self.records), present_state(self.records, catalog)
        for step in steps:
            newer = state_at(repository, step.newer, state)
            state = state_at(repository, step.older, newer) if step.older else _NOTHING
            yield step, changes(state, newer)
