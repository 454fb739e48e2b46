"""What git holds of a folder, read through the `git` program; nothing is written and no hook runs."""

from __future__ import annotations

import os
import posixpath
import re
import stat
import subprocess
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory

from builder.problems import clipped

# Set while a hook runs, they would lead away from the folder asked for.
_ELSEWHERE = ("GIT_DIR", "GIT_WORK_TREE", "GIT_INDEX_FILE", "GIT_PREFIX", "GIT_NAMESPACE", "GIT_CEILING_DIRECTORIES")
# Replaced objects would show another history than the one that was made.
_QUIET = {
    "GIT_OPTIONAL_LOCKS": "0",
    "GIT_NO_REPLACE_OBJECTS": "1",
    "GIT_TERMINAL_PROMPT": "0",
    "LC_ALL": "C",
    "LANGUAGE": "C",
}
_SETTINGS = ("--no-pager", "--literal-pathspecs", "-c", "core.fsmonitor=false", "-c", "core.hooksPath=/dev/null")
_LOG = ("-z", "--first-parent", "--no-show-signature", "--encoding=UTF-8", "--no-color", "--format=%H%x00%cs%x00%s")
_RENAMES = ("diff", "--no-index", "--no-ext-diff", "-z", "--name-status", "-M60%", "--")
_MOST_LINKS = 40
_SHORT = 10


class HistoryUnread(Exception):
    """Git, the repository or a revision cannot be read; the message says which, and what to do."""


@dataclass(frozen=True)
class Commit:
    """A commit: its hash, the day it was made, year-month-day, and the first line of its message."""

    hash: str
    day: str
    subject: str

    @property
    def short(self) -> str:
        """The hash as people quote it."""
        return self.hash[:_SHORT]


@dataclass(frozen=True)
class Tree:
    """The files of a folder at a commit: the id of each one's content by its path, and the submodules in it."""

    ids: Mapping[str, str]
    submodules: tuple[str, ...] = ()

    def in_submodule(self, path: str) -> bool:
        """Whether a path lies where another repository is checked out."""
        return any(path.startswith(f"{folder}/") for folder in self.submodules)


@dataclass(frozen=True)
class Repository:
    """The repository that a folder lies in; every path is below that folder."""

    folder: Path

    def commit(self, revision: str) -> Commit:
        """The commit that a revision names, which has the folder.

        Raises
        ------
        HistoryUnread
            There is no such commit here, it has no such folder, or there is no repository.
        """
        git(self.folder, ("rev-parse", "--git-dir"))
        named = not revision.startswith("-") and self._line(
            "rev-parse", "--verify", "--quiet", f"{revision}^{{commit}}"
        )
        if not named:
            raise HistoryUnread(
                f"{clipped(revision) or 'an empty text'} is no revision of this repository. {self._advice}"
            )
        if not self._folder(named):
            raise HistoryUnread(
                f"{self.folder} is not in revision {clipped(revision)}. Name a later one, or commit the folder first."
            )
        return self.commits("--max-count=1", named)[0]

    def _folder(self, commit: str) -> str:
        """The id of the folder in a commit; empty where it has none."""
        return self._line("rev-parse", "--verify", "--quiet", f"{commit}:./")

    @property
    def _advice(self) -> str:
        if not self._line("rev-parse", "--verify", "--quiet", "HEAD"):
            return "It has no commit yet: make one with the records."
        if not self._line("rev-parse", "--verify", "--quiet", "HEAD^{commit}"):
            return "The commit checked out is missing; git fsck says what is damaged."
        if self.is_shallow:
            return "The history of this clone is not deep enough, or the name is wrong: git fetch --deepen=100"
        return "git log --oneline shows the revisions."

    @property
    def is_shallow(self) -> bool:
        """Whether the clone has only the newest part of the history."""
        return self._line("rev-parse", "--is-shallow-repository") == "true"

    def leads_to_head(self, commit: Commit) -> bool:
        """Whether a commit is the one that is checked out, or among its ancestors."""
        return self._line("rev-list", "--max-count=1", commit.hash, "--not", "HEAD") == ""

    def commits_since(self, commit: Commit) -> tuple[Commit, ...]:
        """The commits after one that touched the folder, newest first, without side branches."""
        return self.commits(f"{commit.hash}..HEAD", "--", ".")

    def commits(self, *which: str) -> tuple[Commit, ...]:
        """Commits as `git log` chooses them by these arguments, without side branches."""
        told = git(self.folder, ("log", *_LOG, *which))
        fields = told.decode("utf-8", "replace").split("\0")
        return tuple(Commit(*fields[i : i + 3]) for i in range(0, len(fields) - 2, 3))

    def tree(self, commit: Commit) -> Tree:
        """The folder's files at a commit, links within it followed; none where it has no such folder."""
        folder = self._folder(commit.hash)
        if not folder:
            return Tree({})
        listing = git(self.folder, ("ls-tree", "-r", "-z", "--full-tree", folder)).decode("utf-8", "surrogateescape")
        entries = [entry.partition("\t") for entry in listing.split("\0") if entry]
        listed = [(*about.split(" "), path) for about, _, path in entries if _is_inside(path)]
        links = {path: id_ for mode, _, id_, path in listed if stat.S_ISLNK(int(mode, 8))}
        ids = {path: id_ for _, kind, id_, path in listed if kind == "blob" and path not in links}
        submodules = tuple(path for _, kind, _, path in listed if kind == "commit")
        return Tree(ids | self._linked(links, ids), submodules)

    def _linked(self, links: Mapping[str, str], ids: Mapping[str, str]) -> dict[str, str]:
        """The content that each link leads to; what leads out of the folder, or nowhere, is left out."""
        targets = {
            path: posixpath.normpath(posixpath.join(posixpath.dirname(path), target.decode("utf-8", "surrogateescape")))
            for path, target in zip(links, self.contents(links.values()), strict=True)
        }
        ends = {path: path for path in links}
        for _ in range(_MOST_LINKS):
            ends = {path: targets.get(end, end) for path, end in ends.items()}
        return {path: ids[end] for path, end in ends.items() if end in ids}

    def contents(self, ids: Iterable[str]) -> list[bytes]:
        """The contents that belong to these ids, by one process for all."""
        asked = list(ids)
        if not asked:
            return []
        answer = git(self.folder, ("cat-file", "--batch"), "\n".join([*asked, ""]).encode())
        at, found = 0, []
        for id_ in asked:
            head, _, _ = answer[at : at + 200].partition(b"\n")
            if not head.endswith(b" missing") and head.startswith(id_.encode()):
                at += len(head) + 1
                size = int(head.split()[2])
                found.append(answer[at : at + size])
                at += size + 1
            else:
                raise HistoryUnread(f"the repository lacks the content {id_[:_SHORT]}. git fsck says what is damaged.")
        return found

    def _line(self, *arguments: str) -> str:
        """One line that git answers; empty where it has none to give."""
        return git(self.folder, arguments, may_fail=True).decode("utf-8", "surrogateescape").rstrip("\n")


def renamed_files(before: Mapping[str, bytes], now: Mapping[str, bytes]) -> dict[str, str]:
    """The new path of each file that git takes for renamed, of files that are gone and files that are new."""
    if not before or not now:
        return {}
    with TemporaryDirectory() as folder:
        paths = {}
        for side, files in (("before", before), ("now", now)):
            Path(folder, side).mkdir()
            for number, (path, content) in enumerate(files.items()):
                # One name on both sides would be one file that was edited.
                made = f"{side}/{side}-{number}"
                paths[made] = path
                Path(folder, made).write_bytes(content)
        # It says by its exit code that there are differences.
        told = git(Path(folder), (*_RENAMES, "before", "now"), may_fail=True).decode().split("\0")
    at = (i for i, word in enumerate(told) if word.startswith("R"))
    return {paths[told[i + 1]]: paths[told[i + 2]] for i in at}


def git(folder: Path, arguments: Sequence[str], stdin: bytes = b"", *, may_fail: bool = False) -> bytes:
    """What git answers in a folder.

    Raises
    ------
    HistoryUnread
        There is no git, or it fails where it may not.
    """
    surroundings = {name: value for name, value in os.environ.items() if name not in _ELSEWHERE} | _QUIET
    command = ["git", *_SETTINGS, *arguments]
    try:
        done = subprocess.run(command, cwd=folder, env=surroundings, input=stdin, capture_output=True)
    except OSError as error:
        raise HistoryUnread(f"git cannot be run: {error.strerror}. Install git, and have it on the PATH.") from None
    said = done.stderr.decode("utf-8", "replace")
    if done.returncode and (not may_fail or "corrupt" in said):
        raise HistoryUnread(_told(said, folder))
    return done.stdout


def _told(stderr: str, folder: Path) -> str:
    """Why git failed, in our words where we know them."""
    if "not a git repository" in stderr:
        return f"{folder} is not in a git repository. Run this where the records are kept under git."
    distrusted = re.search("dubious ownership in repository at '(.*)'", stderr)
    if distrusted:
        cure = f"If you do trust it: git config --global --add safe.directory {distrusted[1]}"
        return f"git does not trust the repository of {folder}, which belongs to somebody else. {cure}"
    said = clipped(stderr.strip().rpartition("\n")[2].removeprefix("fatal: ").removeprefix("error: "), 120)
    return f"git cannot read the repository of {folder}: {said or 'it says nothing'}. git fsck says what is damaged."


def _is_inside(path: str) -> bool:
    """Whether a path of a tree is one that can be written below a folder; git makes no others."""
    return bool(path) and not {"", ".", ".."} & set(path.split("/"))
