"""The records as they are, and as they were at a commit."""

from __future__ import annotations

import hashlib
import posixpath
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from tempfile import TemporaryDirectory

from builder.history.repository import Commit, Repository, Tree
from builder.problems import Problem, errors
from builder.records import Catalog, PartRecord, PositionRecord, read_catalog
from builder.records.yaml_text import read_yaml

Record = PartRecord | PositionRecord


@dataclass(frozen=True, eq=False)
class State:
    """The records at one time.

    `name` is the commit's short hash, or `now`. `ids` has for each record's file and table, by its path below the
    records folder, the ids that git may know its content by. `unread` is what kept files from becoming records.
    """

    name: str
    catalog: Catalog
    ids: Mapping[str, frozenset[str]]
    unread: tuple[Problem, ...] = ()

    @property
    def records(self) -> tuple[Record, ...]:
        """Parts, then positions."""
        return _records(self.catalog)

    def is_held_by(self, tree: Tree, record: Record) -> bool:
        """Whether a tree has a record and its table just as they are here."""
        files = _files(record)
        return all(tree.in_submodule(file) or tree.ids.get(file) in self.ids[file] for file in files)

    def could_not_read(self, record: Record) -> bool:
        """Whether the file or the table of a record of another state stands among what could not be read."""
        table = record.table.file if isinstance(record, PartRecord) and record.table is not None else ""
        return any(problem.file in (record.source.file, table) for problem in self.unread)


def present_state(records: Path, catalog: Catalog | None = None) -> State:
    """The records as they stand in the folder; a catalog that was read of it already is taken as it is."""
    catalog = catalog or read_catalog(records)
    read = _records(catalog)
    ids = {file: _ids((records / file).read_bytes()) for record in read for file in _files(record)}
    named = {record.source.file for record in read}
    return State("now", catalog, ids, tuple(p for p in errors(catalog.problems) if p.file not in named))


def state_at(repository: Repository, commit: Commit, near: State) -> State:
    """The records at a commit; those that are the same in a state near it are taken from there, not read again.

    Raises
    ------
    HistoryUnread
        The commit has no such folder, or git cannot read it.
    """
    tree = repository.tree(commit)
    kept = [record for record in near.records if near.is_held_by(tree, record)]
    known = {record.source.below for record in kept}
    paths = [path for path in tree.ids if _is_record(path) and path not in known]
    texts = dict(zip(paths, repository.contents(tree.ids[path] for path in paths), strict=True))
    tables = sorted({file for path, text in texts.items() for file in _tables(path, text) if file in tree.ids})
    files = texts | dict(zip(tables, repository.contents(tree.ids[file] for file in tables), strict=True))
    read, unread = _read(files, repository.folder)
    records: tuple[Record, ...] = (*kept, *read)
    ids = {
        file: frozenset([tree.ids[file]]) if file in tree.ids else near.ids[file]
        for record in records
        for file in _files(record)
    }
    return State(commit.short, _catalog(records), ids, unread)


def _records(catalog: Catalog) -> tuple[Record, ...]:
    return (*catalog.parts, *catalog.positions)


def _catalog(records: Iterable[Record]) -> Catalog:
    records = tuple(records)
    parts = (record for record in records if isinstance(record, PartRecord))
    positions = (record for record in records if isinstance(record, PositionRecord))
    return Catalog(
        tuple(sorted(parts, key=lambda r: (r.name.casefold(), r.source.file))),
        tuple(sorted(positions, key=lambda r: (r.position.position.casefold(), r.source.file))),
    )


def _read(files: Mapping[str, bytes], folder: Path) -> tuple[list[Record], tuple[Problem, ...]]:
    """The records that files make, and what keeps others from being one, told as if they stood in a folder."""
    with TemporaryDirectory() as made:
        for path, content in files.items():
            place = Path(made, path)
            place.parent.mkdir(parents=True, exist_ok=True)
            place.write_bytes(content)
        catalog = read_catalog(Path(made))
    read = _records(catalog)
    named = {record.source.file for record in read}
    unread = [problem for problem in errors(catalog.problems) if problem.file not in named]
    here, there = Path(made).as_posix(), folder.as_posix()
    return (
        [_moved(record, here, there) for record in read],
        tuple(replace(problem, file=problem.file.replace(here, there, 1)) for problem in unread),
    )


def _moved(record: Record, here: str, there: str) -> Record:
    """A record told as if it stood in another folder."""
    source = replace(record.source, file=record.source.file.replace(here, there, 1))
    if isinstance(record, PositionRecord) or record.table is None:
        return replace(record, source=source)
    return replace(record, source=source, table=replace(record.table, file=record.table.file.replace(here, there, 1)))


def _files(record: Record) -> Iterator[str]:
    """A record's file, and its table's where that is a file of its own, below the records folder."""
    below = record.source.below
    yield below
    table = record.part.r_t_table if isinstance(record, PartRecord) else None
    if table is not None and table.file is not None:
        yield _beside(below, table.file)


def _tables(path: str, text: bytes) -> Iterator[str]:
    """The file of the table that the text of a record names."""
    value = read_yaml(text.decode("utf-8-sig", "replace")).value if b"file" in text else None
    table = value.get("r_t_table") if isinstance(value, dict) else None
    named = table.get("file") if isinstance(table, dict) else None
    if isinstance(named, str):
        yield _beside(path, named)


def _beside(path: str, name: str) -> str:
    return posixpath.normpath(posixpath.join(posixpath.dirname(path), name))


def _is_record(path: str) -> bool:
    return path.endswith(".yaml") and not any(name.startswith(".") for name in path.split("/"))


def _ids(content: bytes) -> frozenset[str]:
    """What git calls a content: as it stands, and with the line ends that git may have changed on the way out."""
    texts = {content, content.replace(b"\r\n", b"\n")}
    return frozenset(
        hashlib.new(kind, b"blob %d\0" % len(text) + text, usedforsecurity=False).hexdigest()
        for text in texts
        for kind in ("sha1", "sha256")
    )
