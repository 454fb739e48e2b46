"""One record: what it says, its table's numbers, and where it was read."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path
from typing import Any

from builder.problems import Problem, Severity
from builder.records import yaml_text
from builder.records.part import Part, StandingState
from builder.records.position import Position
from builder.records.table import TableData


@dataclass(frozen=True)
class Source:
    """Where a record was read: its file as messages name it, its file below the records folder, its lines."""

    file: str
    below: str
    lines: Mapping[yaml_text.Path, int]

    def problem(self, path: yaml_text.Path, rule: str, message: str, severity: Severity = "error") -> Problem:
        """A problem of the field at a path."""
        line = yaml_text.line_of(self.lines, path)
        return Problem(self.file, line, yaml_text.field_name(path), rule, message, severity)


@dataclass(frozen=True)
class DocumentFile:
    """A document's file that lies beside a record, and the SHA-256 that was found for it."""

    path: Path
    sha256: str


@dataclass(frozen=True, eq=False)
class PartRecord:
    """A part, the numbers of its table where it has one, where it was read, a digest of all that was read for it, its documents' files."""

    part: Part
    source: Source
    table: TableData | None = None
    digest: str = ""
    files: Mapping[str, DocumentFile] = field(default_factory=dict)

    @cached_property
    def number(self) -> str:
        """The maker's part number."""
        return self.part.part

    @cached_property
    def maker(self) -> str:
        """Who makes it."""
        return self.part.maker

    @cached_property
    def own_number(self) -> str | None:
        """The team's internal number."""
        return self.part.own_number

    @cached_property
    def state(self) -> StandingState | None:
        """The standing that holds."""
        return self.part.state()

    @cached_property
    def table_file(self) -> str | None:
        """The file that its table stands in."""
        return self.table.file if self.table else None

    @cached_property
    def name(self) -> str:
        """Maker and number: no two parts share it."""
        return f"{self.maker} {self.number}"


@dataclass(frozen=True, eq=False)
class PositionRecord:
    """A position, where it was read, and a digest of that."""

    position: Position
    source: Source
    digest: str = ""


class KeptPartRecord(PartRecord):
    """A part's record that was read before: what it goes by is known, all else is fetched when it is asked for."""

    def __init__(self, known: Mapping[str, Any], fetch: Callable[[], PartRecord]) -> None:
        names = {name: known[name] for name in ("number", "maker", "own_number", "state", "table_file", "digest")}
        source = Source(known["file"], known["below"], _KeptLines(lambda: self._fetched))
        files = {name: DocumentFile(Path(path), sha256) for name, path, sha256 in known["files"]}
        self.__dict__.update(names, source=source, files=files, _fetch=fetch)

    @cached_property
    def part(self) -> Part:
        """What the record says."""
        return self._fetched.part

    @cached_property
    def table(self) -> TableData | None:
        """The numbers of its table."""
        return self._fetched.table

    @cached_property
    def _fetched(self) -> PartRecord:
        fetched: PartRecord = self.__dict__["_fetch"]()
        return fetched


class _KeptLines(Mapping[yaml_text.Path, int]):
    """The lines of a record that was read before."""

    def __init__(self, fetch: Callable[[], PartRecord]) -> None:
        self._fetch = fetch

    def __getitem__(self, path: yaml_text.Path) -> int:
        return self._fetch().source.lines[path]

    def __iter__(self) -> Iterator[yaml_text.Path]:
        return iter(self._fetch().source.lines)

    def __len__(self) -> int:
        return len(self._fetch().source.lines)


def known_of(record: PartRecord) -> dict[str, Any]:
    """What a record that is kept is known by before it is fetched."""
    names = {"number": record.number, "maker": record.maker, "own_number": record.own_number, "state": record.state}
    places = {"file": record.source.file, "below": record.source.below, "table_file": record.table_file}
    files = [[name, file.path.as_posix(), file.sha256] for name, file in record.files.items()]
    return names | places | {"files": files, "digest": record.digest}
