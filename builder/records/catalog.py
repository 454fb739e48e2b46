"""All records below a folder, read and checked: the parts, the positions, and what is wrong with any of them."""

from __future__ import annotations

import codecs
import hashlib
import os
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from functools import cache, cached_property, partial
from pathlib import Path
from typing import TypeVar

from pydantic import ValidationError

from builder.kept import Kept, Shelf
from builder.problems import Problem, Severity, clipped, count_text, in_order, nearest, one_line
from builder.processes import shared_out
from builder.records import yaml_text
from builder.records.part import Document, Part, Rated, RTTable, Standing
from builder.records.position import Position
from builder.records.quantities import RecordModel
from builder.records.record import DocumentFile, KeptPartRecord, PartRecord, PositionRecord, Source, known_of
from builder.records.table import RawTable, TableData, csv_table, table_data
from builder.records.wording import worded

# A record of a thousand rows has 50 kB; more than this is not a record.
LARGEST_FILE_BYTES = 1_000_000
_LEADS_OUT = "leads out of the records folder."
# What stands for a file that was looked at: a digest of its content, or one of these.
_OUTSIDE, _MISSING, _THERE, _UNREAD = "outside", "missing", "there", "unread"
_SHELF = "records"
_Model = TypeVar("_Model", bound=RecordModel)
_MODELS: Mapping[str, type[RecordModel]] = {"part": Part, "position": Position}


@dataclass(frozen=True, eq=False)
class LooseTable:
    """A table whose record has errors elsewhere, so that its rows are looked at all the same."""

    source: Source
    table: TableData
    rated: Rated | None


@dataclass(frozen=True, eq=False)
class LooseStanding:
    """The standing that holds for a part whose record was refused, and its place in the record's list."""

    source: Source
    standing: Standing
    index: int


class UnknownPart(LookupError):
    """No part, or more than one, goes by a name; the message says which names are near."""


@dataclass(frozen=True, eq=False)
class Catalog:
    """The records of one folder, parts and positions in the order of their names.

    `curveless` are parts whose table does not fall, so that no curve can be made: nothing finds them by name, and the
    cross-checks say which of their rows is wrong, as they do for `loose_tables`. `loose_standings` are those of parts whose
    records were refused. `digest` is of every file that was looked at and of what was found in reading them.
    """

    parts: tuple[PartRecord, ...] = ()
    positions: tuple[PositionRecord, ...] = ()
    problems: tuple[Problem, ...] = ()
    curveless: tuple[PartRecord, ...] = ()
    loose_tables: tuple[LooseTable, ...] = ()
    loose_standings: tuple[LooseStanding, ...] = ()
    digest: str = ""

    def part(self, name: str) -> PartRecord:
        """The part that goes by a maker's number, `maker number`, or an own number; upper and lower case alike.

        Raises
        ------
        UnknownPart
            None does, or several do.
        """
        found = self._by_name.get(name.strip().casefold(), ())
        if len(found) == 1:
            return found[0]
        shown = clipped(name) or '""'
        if found:
            names = ", ".join(record.name for record in found)
            raise UnknownPart(
                f"{shown} is the number of {count_text(len(found), 'part')}: {names}. Name the maker too."
            )
        advice = nearest(name, self._numbers) or " Check the number."
        raise UnknownPart(f"{shown} is not a part of the catalog.{advice}")

    def known_part(self, name: str) -> PartRecord | None:
        """The part that goes by a name as `part` finds it; None where none or several do."""
        found = self._by_name.get(name.strip().casefold(), ())
        return found[0] if len(found) == 1 else None

    @cached_property
    def _numbers(self) -> tuple[str, ...]:
        return tuple(record.number for record in self.parts)

    @cached_property
    def _by_name(self) -> Mapping[str, tuple[PartRecord, ...]]:
        by_name: dict[str, list[PartRecord]] = {}
        full_names = tuple(record.name for record in self.parts)
        own_numbers = tuple(record.own_number or "" for record in self.parts)
        # Own numbers come last: a maker's number is never hidden by somebody's internal one.
        for names in (self._numbers, full_names, own_numbers):
            taken = set(by_name)
            for record, name in zip(self.parts, names, strict=True):
                if name and name.casefold() not in taken:
                    by_name.setdefault(name.casefold(), []).append(record)
        return {name: tuple(records) for name, records in by_name.items()}


@dataclass
class _Reading:
    """What one run collects on its way through a records folder."""

    root: Path
    parts: list[PartRecord] = field(default_factory=list)
    curveless: list[PartRecord] = field(default_factory=list)
    loose_tables: list[LooseTable] = field(default_factory=list)
    loose_standings: list[LooseStanding] = field(default_factory=list)
    positions: list[PositionRecord] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)
    # What records that have errors may go by: a position that names one is not told that there is no such part.
    faulty: set[str] = field(default_factory=set)
    # Every file that was looked at, with what was found there.
    seen: dict[str, str] = field(default_factory=dict)

    @property
    def digest(self) -> str:
        """Of every file that was looked at."""
        return hashlib.sha256(repr(sorted(self.seen.items())).encode()).hexdigest()

    def add(self, other: _Reading) -> None:
        """Take over what another reading of the same folder collected."""
        for name in ("parts", "curveless", "loose_tables", "loose_standings", "positions", "problems"):
            getattr(self, name).extend(getattr(other, name))
        self.faulty |= other.faulty
        self.seen |= other.seen

    @property
    def is_one_part(self) -> bool:
        """Whether there is a part and nothing else."""
        others = (self.curveless, self.loose_tables, self.loose_standings, self.positions, self.problems, self.faulty)
        return len(self.parts) == 1 and not any(others)

    def still_finds(self, seen: Mapping[str, str]) -> bool:
        """Whether everything that another reading looked at is as it was."""
        return all(self._found(Path(path), was) == was for path, was in seen.items())

    def _found(self, path: Path, was: str) -> str:
        if not self.holds(path):
            return _OUTSIDE
        if not os.path.isfile(path):  # noqa: PTH113 -- Path.is_file raises for a name that is too long
            return _MISSING
        try:
            return _THERE if was == _THERE else hashlib.sha256(path.read_bytes()).hexdigest()
        except OSError:
            return _UNREAD

    def report(self, problem: Problem) -> None:
        self.problems.append(problem)

    def report_file(self, path: Path, rule: str, message: str, line: int = 1, severity: Severity = "error") -> None:
        """Report what is wrong with a whole file or folder."""
        self.report(Problem(one_line(path.as_posix()), line, "", rule, message, severity))

    def holds(self, path: Path) -> bool:
        """Whether a path lies in the records folder once its links are followed; a loop of links ends where it is."""
        # Following every part of every path would take longer than reading the files.
        is_plain = path.name != ".." and not os.path.islink(path)  # noqa: PTH114 -- raises for a name that is too long
        return (is_plain and _leads_into(path.parent, self.root)) or _leads_into.__wrapped__(path, self.root)


@cache
def _leads_into(path: Path, root: Path) -> bool:
    return Path(os.path.realpath(path)).is_relative_to(os.path.realpath(root))


def _read_share(root: Path, paths: Sequence[Path]) -> list[_Reading]:
    """One reading for each file."""
    readings = [_Reading(root) for _ in paths]
    for reading, path in zip(readings, paths, strict=True):
        _read_record(reading, path)
    return readings


def read_catalog(root: Path, kept: Kept | None = None) -> Catalog:
    """Every record below a folder; nothing is raised for anything that stands in a file.

    A record of which every file is as it was when `kept` was saved is taken from there.
    """
    kept = kept or Kept()
    reading = _Reading(root)
    if not root.is_dir():
        message = "there is no such folder. Name the folder of the records with --records."
        return Catalog(problems=(Problem(one_line(root.as_posix()), 1, "", "missing-file", message),))
    _leads_into.cache_clear()
    for read in _readings(reading, list(_record_files(reading)), kept.shelf(_SHELF)):
        reading.add(read)
    kept.save(_SHELF)
    parts = tuple(sorted(reading.parts, key=lambda r: (r.name.casefold(), r.source.file)))
    positions = tuple(sorted(reading.positions, key=lambda r: (r.position.position.casefold(), r.source.file)))
    catalog = Catalog(parts, positions)
    problems = [*reading.problems, *_duplicates(catalog), *_unknown_parts(catalog, reading.faulty)]
    return Catalog(
        parts,
        positions,
        in_order(problems),
        tuple(reading.curveless),
        tuple(reading.loose_tables),
        tuple(reading.loose_standings),
        hashlib.sha256(repr((reading.digest, problems)).encode()).hexdigest(),
    )


def _readings(reading: _Reading, paths: Sequence[Path], shelf: Shelf) -> Iterator[_Reading]:
    """A reading for each file, in their order."""
    known = {path: read for path in paths if (read := _kept_reading(reading, path, shelf))}
    missing = [path for path in paths if path not in known]
    for path, read in zip(
        missing, shared_out(partial(_read_share, reading.root), missing, "Reading records"), strict=True
    ):
        _keep(read, path, shelf)
        known[path] = read
    return (known[path] for path in paths)


def _keep(read: _Reading, path: Path, shelf: Shelf) -> None:
    head = {"seen": read.seen, "part": known_of(read.parts[0]) if read.is_one_part else None}
    shelf.put(path.as_posix(), read, head)


def _kept_reading(reading: _Reading, path: Path, shelf: Shelf) -> _Reading | None:
    """What the reading of a file gave before, if all that it looked at is as it was."""
    head = shelf.head(path.as_posix())
    if head is None or not reading.still_finds(head["seen"]):
        return None
    if head["part"] is None:
        read: _Reading | None = shelf.get(path.as_posix())
        return read
    part = KeptPartRecord(head["part"], partial(_fetched, reading.root, path, shelf.later(path.as_posix())))
    return _Reading(reading.root, parts=[part], seen=head["seen"])


def _fetched(root: Path, path: Path, later: Callable[[], _Reading | None]) -> PartRecord:
    """A kept part; one whose value is damaged is read again."""
    return (later() or _read_share(root, [path])[0]).parts[0]


def _record_files(reading: _Reading) -> Iterator[Path]:
    """Files that are records, in the order of their paths; links that leave the folder are reported, not followed."""
    for folder, folders, files in os.walk(reading.root, onerror=partial(_report_unreadable, reading)):
        folders[:] = sorted(name for name in folders if not name.startswith("."))
        linked = [name for name in folders if Path(folder, name).is_symlink()]
        for name in sorted(name for name in [*files, *linked] if not name.startswith(".")):
            path = Path(folder, name)
            is_record = path.suffix.lower() in (".yaml", ".yml")
            if (is_record or name in linked) and not reading.holds(path):
                reading.report_file(path, "link-out-of-records", f"{_LEADS_OUT} Put the file itself here.")
            elif is_record and name not in linked and _can_be_read(reading, path):
                yield path


def _can_be_read(reading: _Reading, path: Path) -> bool:
    if path.suffix != ".yaml":
        message = "is not read: the name of a record ends in .yaml. Rename the file."
        reading.report_file(path, "file-name", message, severity="warning")
    elif not path.is_file():
        reading.report_file(
            path, "missing-file", "is no file, or a link that leads to none. Put the record itself here."
        )
    else:
        return True
    return False


def _report_unreadable(reading: _Reading, error: OSError) -> None:
    message = f"cannot be read: {error.strerror}. Check that it is there, and its permissions."
    reading.report_file(Path(error.filename), "unreadable-file", message)


def _text(reading: _Reading, path: Path) -> str | None:
    """A file's text, or None with a problem of the file reported."""
    reading.seen[path.as_posix()] = _UNREAD
    try:
        data = path.read_bytes() if path.stat().st_size <= LARGEST_FILE_BYTES else None
    except OSError as error:
        _report_unreadable(reading, error)
        return None
    if data is None:
        message = f"the file is larger than {LARGEST_FILE_BYTES / 1e6:.0f} MB. Move it out of the records, if it is none, or give fewer rows."
        reading.report_file(path, "file-too-large", message)
        return None
    reading.seen[path.as_posix()] = hashlib.sha256(data).hexdigest()
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        is_utf16 = data.startswith((codecs.BOM_UTF16_LE, codecs.BOM_UTF16_BE))
        what = "the file is UTF-16" if is_utf16 else f"byte 0x{data[error.start]:02X} is not UTF-8"
        reading.report_file(path, "not-utf-8", f"{what}. Save the file as UTF-8.", line)
        return None


def _read_record(reading: _Reading, path: Path) -> None:
    text = _text(reading, path)
    document = yaml_text.read_yaml(text or "")
    if text is None or not _added(reading, path, document):
        reading.faulty |= {path.stem.casefold(), *_names(document)}


def _names(document: yaml_text.YamlText) -> Iterator[str]:
    """What a part goes by, of a record that has errors."""
    value = document.value if isinstance(document.value, dict) else {}
    number, maker, own_number = (
        document.plain.get((name,), str(value.get(name, ""))).strip().casefold()
        for name in ("part", "maker", "own_number")
    )
    yield from (number, f"{maker} {number}", own_number)


def _added(reading: _Reading, path: Path, document: yaml_text.YamlText) -> bool:
    """Whether the document became a record; what keeps it from being one is reported."""
    file = one_line(path.as_posix())
    for fault in document.faults:
        reading.report(Problem(file, fault.line, fault.field, fault.rule, fault.message))
    if any(fault.rule == "broken-yaml" for fault in document.faults):
        return False
    kind, message = _kind(document.value)
    if message:
        reading.report_file(path, "not-a-record", message)
        return False
    source = Source(file, path.relative_to(reading.root).as_posix(), document.lines)
    try:
        record = _MODELS[kind].model_validate(document.value)
    except ValidationError as error:
        for where, rule, message in worded(error, _MODELS[kind], document):
            reading.report(source.problem(where, rule, message))
        if kind == "part":
            _add_loose_table(reading, path.parent, source, document.value)
            _add_loose_standing(reading, source, document.value)
        return False
    if isinstance(record, Part):
        return _part_added(reading, path.parent, source, record)
    assert isinstance(record, Position)
    reading.positions.append(PositionRecord(record, source, reading.digest))
    return True


def _kind(value: object) -> tuple[str, str]:
    """Which kind of record a document is, or what keeps it from being one."""
    if value is None:
        return "", "the file is empty. Write a record that begins with part: or position:, or remove the file."
    if not isinstance(value, dict):
        return "", "the file holds no fields. Begin the record with part: or position:."
    kinds = [kind for kind in _MODELS if kind in value]
    if len(kinds) == 1:
        return kinds[0], ""
    if kinds:
        return "", "the file has both part: and position:. Keep one record in a file."
    near = next((n for key in value if (n := nearest(str(key), _MODELS))), "")
    return "", f"the file has neither part: nor position:, so it is no record.{near or ' Add one of the two.'}"


def _part_added(reading: _Reading, folder: Path, source: Source, part: Part) -> bool:
    """Whether the part could be added: its documents and its table's rows are looked at first."""
    files = {
        document.file: found
        for i, document in enumerate(part.documents)
        if document.file and (found := _document_file(reading, folder, source, ("documents", i), document))
    }
    table = None
    if part.r_t_table is not None:
        table = _table(reading, folder, source, part.r_t_table, part.rated)
        if table is None:
            return False
    falls = table is None or table.falls
    (reading.parts if falls else reading.curveless).append(PartRecord(part, source, table, reading.digest, files))
    return falls


def _add_loose_table(reading: _Reading, folder: Path, source: Source, value: dict[str, object]) -> None:
    """Keep the table of a record that has errors elsewhere, so that one run finds all there is to mend."""
    stated, rated = _valid(RTTable, value.get("r_t_table")), _valid(Rated, value.get("rated"))
    if stated is None:
        return
    # Without a rated resistance a ratio cannot be told in ohm; in what does not fall it makes no difference.
    raw = _raw_table(reading, folder, source, stated)
    table = table_data(raw, rated.resistance_ohm if rated else 1.0, reading.report) if raw else None
    if table is not None:
        reading.loose_tables.append(LooseTable(source, table, rated))


def _add_loose_standing(reading: _Reading, source: Source, value: dict[str, object]) -> None:
    """Keep the standing that holds for a part whose record is refused, so that one learns who relies on it."""
    entries = value.get("standing")
    last = _valid(Standing, entries[-1]) if isinstance(entries, list) and entries else None
    if isinstance(entries, list) and last is not None:
        reading.loose_standings.append(LooseStanding(source, last, len(entries) - 1))


def _valid(model: type[_Model], value: object) -> _Model | None:
    try:
        return model.model_validate(value)
    except ValidationError:
        return None


def _table(reading: _Reading, folder: Path, source: Source, stated: RTTable, rated: Rated) -> TableData | None:
    raw = _raw_table(reading, folder, source, stated)
    return table_data(raw, rated.resistance_ohm, reading.report) if raw else None


def _raw_table(reading: _Reading, folder: Path, source: Source, stated: RTTable) -> RawTable | None:
    if stated.rows is not None:
        lines = [yaml_text.line_of(source.lines, ("r_t_table", "rows", i)) for i in range(len(stated.rows))]
        return RawTable(source.file, stated.columns, stated.rows, tuple(lines))
    path = _file_beside(reading, folder, source, ("r_t_table", "file"), stated.file or "")
    text = _text(reading, path) if path else None
    raw = csv_table(text, one_line(path.as_posix()), reading.report) if path and text is not None else None
    if raw and "columns" in stated.model_fields_set and raw.columns != stated.columns:
        message = (
            f"{', '.join(stated.columns)} is not what the header row of the CSV says: "
            f"{', '.join(raw.columns)}. Correct one of the two, or leave columns out."
        )
        reading.report(source.problem(("r_t_table", "columns"), "table-columns", message))
        return None
    return raw


def _file_beside(reading: _Reading, folder: Path, source: Source, where: yaml_text.Path, name: str) -> Path | None:
    """A file named in a record, or None with the reason reported."""
    path = folder / name
    if not reading.holds(path):
        reading.seen[path.as_posix()] = _OUTSIDE
        message = f"{clipped(name)} {_LEADS_OUT} Put the file beside the record."
        reading.report(source.problem(where, "link-out-of-records", message))
        return None
    if not os.path.isfile(path):  # noqa: PTH113 -- Path.is_file raises for a name that is too long
        reading.seen[path.as_posix()] = _MISSING
        message = f"there is no file {clipped(name)} beside the record. Check the name, or remove the field."
        reading.report(source.problem(where, "missing-file", message))
        return None
    reading.seen[path.as_posix()] = _THERE
    return path


def _document_file(
    reading: _Reading, folder: Path, source: Source, where: yaml_text.Path, document: Document
) -> DocumentFile | None:
    """A document's file, or None with the reason reported; one that is not as the record says is reported too."""
    path = _file_beside(reading, folder, source, (*where, "file"), document.file or "")
    if path is None:
        return None
    reading.seen[path.as_posix()] = _UNREAD
    try:
        found = hashlib.sha256(path.read_bytes()).hexdigest()
    except OSError as error:
        _report_unreadable(reading, error)
        return None
    reading.seen[path.as_posix()] = found
    if document.sha256 is None:
        message = f"is missing, so nobody would notice another file in its place. Add sha256: {found}"
        reading.report(source.problem((*where, "sha256"), "hash-missing", message, "warning"))
    elif found != document.sha256:
        message = "is not that of the file beside the record. Was the document replaced? Then add its revision as a new entry."
        reading.report(source.problem((*where, "sha256"), "file-hash-differs", message))
    return DocumentFile(path, found)


def _duplicates(catalog: Catalog) -> Iterator[Problem]:
    parts = [(r.name.casefold(), r.source, ("part",), r.name) for r in catalog.parts]
    positions = [
        (r.position.position.casefold(), r.source, ("position",), r.position.position) for r in catalog.positions
    ]
    for rule, named in (("duplicate-part", parts), ("duplicate-position", positions)):
        yield from _repeated(rule, named)


def _repeated(rule: str, named: Sequence[tuple[str, Source, yaml_text.Path, str]]) -> Iterator[Problem]:
    first: dict[str, Source] = {}
    for key, source, path, name in sorted(named, key=lambda n: n[1].file):
        if key in first:
            message = f"{clipped(name)} has a record already, {first[key].file}. Keep one of the two."
            yield source.problem(path, rule, message)
        first.setdefault(key, source)


def _unknown_parts(catalog: Catalog, faulty: set[str]) -> Iterator[Problem]:
    for record in catalog.positions:
        for path, name in record.position.named_parts().items():
            if name.casefold() in faulty:
                continue
            try:
                catalog.part(name)
            except UnknownPart as unknown:
                yield record.source.problem(path, "unknown-part", str(unknown))
