"""A year of a part and its alternate, commit by commit, and what the commands tell of it.

`PYTHONPATH=.:tests python tests/story/story.py` writes it anew.
"""

from __future__ import annotations

import os
from collections.abc import Iterator
from pathlib import Path
from tempfile import TemporaryDirectory

from click.testing import CliRunner
from git_records import ALONE, GitRecords, appended, changed, other_part, part, position

from builder.cli import main

TOLD = Path(__file__).with_name("story.txt")
TODAY = ("--today", "2026-12-01")

_FIRST = "state: approved, on: 2026-02-10, by: components, because: climate chamber, document: {title: data sheet, revision: A}"
_MOVED = "state: approved, on: 2026-04-20, by: components, because: the maker corrected B, document: {title: data sheet, revision: A}"
_REVISED = "state: approved, on: 2026-06-02, by: components, because: revision B read, document: {title: data sheet, revision: B}"
_WITHDRAWN = "state: withdrawn, on: 2026-08-14, by: quality, because: lead wires break off"
_SWAP = "state: approved, on: 2026-09-01, by: sensors, because: same within 0.2 K, document: {title: data sheet, revision: A}"

# The records after each step; a step is named as its commit is.
PROPOSED = part()
APPROVED = appended(PROPOSED, _FIRST)
MOVED = changed(APPROVED, "b_k: 3950", "b_k: 3930")
SIGNED = appended(MOVED, _MOVED)
REVISED = appended(
    changed(SIGNED, "revision: A}\nstanding", "revision: A}\n  - {title: data sheet, revision: B}\nstanding"), _REVISED
)
ALTERNATE = appended(other_part(), _FIRST)
STEPS: tuple[tuple[str, dict[str, str]], ...] = (
    ("propose", {"x": PROPOSED, "y": ALTERNATE, "boards/rt1": position()}),
    ("approve", {"x": APPROVED}),
    ("edit the B-value", {"x": MOVED}),
    ("sign the edit", {"x": SIGNED}),
    ("revise the document", {"x": REVISED}),
    ("approve the swap", {"boards/rt1": appended(position(), _SWAP)}),
    ("undo the swap", {"boards/rt1": position()}),
    ("withdraw", {"y": appended(ALTERNATE, _WITHDRAWN)}),
)


def told(records: GitRecords) -> str:
    """The whole story: each step, what it changed, and whether the ledger was kept since the first one and the last."""
    return "\n".join(_chapters(records))


def _chapters(records: GitRecords) -> Iterator[str]:
    names: dict[str, str] = {}
    for name, texts in STEPS:
        commit = records.commit(name, **texts)
        names[commit] = name
        yield f"# {name}\n"
        if len(names) > 1:
            for command in (
                ("changes", "HEAD~1"),
                ("check", "--since", "HEAD~1", *TODAY),
                ("check", "--since", next(iter(names)), *TODAY),
            ):
                yield _answer(command, names)


def _answer(command: tuple[str, ...], names: dict[str, str]) -> str:
    """A command with its answer, commits by the names of their steps."""
    result = CliRunner().invoke(main, list(command))
    text = f"$ beadroll {' '.join(command)}\n{result.output}exit {result.exit_code}\n"
    for commit, name in names.items():
        text = text.replace(commit, f"({name})").replace(commit[:10], f"({name})")
    return text


if __name__ == "__main__":
    # Look at `git diff tests/story` afterwards: every changed line must be meant.
    os.environ |= ALONE
    with TemporaryDirectory() as folder:
        os.chdir(folder)
        TOLD.write_text(told(GitRecords(Path(folder))), "utf-8")
