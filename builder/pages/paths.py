"""Where each page of the site stands, and the way from one to another."""

from __future__ import annotations

import hashlib
import posixpath
from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from functools import cached_property
from types import MappingProxyType

from builder.pages.html import slug
from builder.records import Catalog, DocumentFile, PartRecord, PositionRecord

_LONGEST = 80
_HASH_DIGITS = 6
_DOCUMENT_DIGITS = 16
_MARKDOWN = (".md", ".mkd", ".mkdn", ".mdown", ".markdown")
# Windows keeps the names of its devices, whatever follows after a point.
_DEVICES = ("con", "prn", "aux", "nul", *(f"{port}{number}" for port in ("com", "lpt") for number in range(10)))
_TAKEN = frozenset(("index", *_DEVICES))


@dataclass(frozen=True, eq=False)
class Paths:
    """The path of every part's and position's page; two that would share one are told apart by a hash."""

    catalog: Catalog

    def part(self, record: PartRecord) -> str:
        """`parts/<maker>/<number>.html`."""
        return self._parts[record.source.file]

    def part_csv(self, record: PartRecord) -> str:
        """The curve's CSV, beside the part's page."""
        return self.part(record).removesuffix(".html") + ".csv"

    def position(self, record: PositionRecord) -> str:
        """`positions/<position>.html`."""
        return self._positions[record.source.file]

    def position_csv(self, record: PositionRecord) -> str:
        """The budget's CSV, beside the position's page."""
        return self.position(record).removesuffix(".html") + ".csv"

    def swap(self, record: PositionRecord, alternate: PartRecord) -> str:
        """`positions/<position>/<maker>/<number>.html`: the review of an alternate there."""
        return f"{self.position(record).removesuffix('.html')}/{self.part(alternate).removeprefix('parts/')}"

    def swap_csv(self, record: PositionRecord, alternate: PartRecord) -> str:
        """What the instrument reads with the alternate, beside its review."""
        return self.swap(record, alternate).removesuffix(".html") + ".csv"

    def maker(self, maker: str) -> str:
        """`parts/<maker>/index.html`."""
        return f"parts/{self._makers[maker]}/index.html"

    def document(self, file: DocumentFile) -> str:
        """`documents/<digits of its SHA-256>/<file>`: a file that several records name is there once."""
        kind = f".{slug(file.path.suffix)}" if file.path.suffix else ""
        # As a Markdown file it would become a page.
        shown = ".txt" if kind in _MARKDOWN else kind
        return f"documents/{file.sha256[:_DOCUMENT_DIGITS]}/{_file_slug(file.path.stem)}{shown}"

    @cached_property
    def _makers(self) -> Mapping[str, str]:
        # A point would let a folder take the place of a file such as `index.html`.
        makers = dict.fromkeys(record.maker for record in self.catalog.parts)
        return _distinct((maker, _file_slug(maker.replace(".", "-")), maker) for maker in makers)

    @cached_property
    def _parts(self) -> Mapping[str, str]:
        wanted = (
            (
                record.source.file,
                f"parts/{self._makers[record.maker]}/{_file_slug(record.number)}",
                record.name,
            )
            for record in self.catalog.parts
        )
        return MappingProxyType({file: f"{path}.html" for file, path in _distinct(wanted).items()})

    @cached_property
    def _positions(self) -> Mapping[str, str]:
        wanted = (
            (record.source.file, f"positions/{_file_slug(record.position.position)}", record.position.position)
            for record in self.catalog.positions
        )
        return MappingProxyType({file: f"{path}.html" for file, path in _distinct(wanted).items()})


def relative(target: str, page: str) -> str:
    """The way from a page to a target, both given from the site's root.

    >>> relative("parts/index.html", "parts/tarnbrook/x.html")
    '../index.html'
    """
    return posixpath.relpath(target, posixpath.dirname(page) or ".")


def _file_slug(name: str) -> str:
    """A name as a file or folder of any file system, beside the `index` that every folder has."""
    made = slug(name)
    if len(made) > _LONGEST:
        made = f"{made[: _LONGEST - _HASH_DIGITS - 1]}-{_hash(name)}"
    first, point, rest = made.partition(".")
    return f"{first}-part{point}{rest}" if first in _TAKEN else made


def _distinct(wanted: Iterable[tuple[str, str, str]]) -> dict[str, str]:
    """A path for each key, from keys, paths and names; where keys want one path, all of them get a hash of their name."""
    wanted = tuple(wanted)
    paths = {key: path for key, path, _ in wanted}
    for digits in range(_HASH_DIGITS, 65):
        count = Counter(paths.values())
        if len(count) == len(paths):
            break
        # What a hash was added to may be another's plain name.
        paths |= {key: f"{path}-{_hash(name, digits)}" for key, path, name in wanted if count[paths[key]] > 1}
    return paths


def _hash(name: str, digits: int = _HASH_DIGITS) -> str:
    return hashlib.sha256(name.encode()).hexdigest()[:digits]
