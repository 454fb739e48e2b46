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
from builder.records import Catalog, PartRecord, PositionRecord


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

    def maker(self, maker: str) -> str:
        """`parts/<maker>/index.html`."""
        return f"parts/{self._makers[maker]}/index.html"

    @cached_property
    def _makers(self) -> Mapping[str, str]:
        return _distinct(
            (record.part.maker, slug(record.part.maker), record.part.maker) for record in self.catalog.parts
        )

    @cached_property
    def _parts(self) -> Mapping[str, str]:
        # `index` is the maker's own page.
        wanted = (
            (
                record.source.file,
                f"parts/{self._makers[record.part.maker]}/{_number_slug(record.part.part)}",
                record.name,
            )
            for record in self.catalog.parts
        )
        return MappingProxyType({file: f"{path}.html" for file, path in _distinct(wanted).items()})

    @cached_property
    def _positions(self) -> Mapping[str, str]:
        wanted = (
            (record.source.file, f"positions/{_number_slug(record.position.position)}", record.position.position)
            for record in self.catalog.positions
        )
        return MappingProxyType({file: f"{path}.html" for file, path in _distinct(wanted).items()})


def relative(target: str, page: str) -> str:
    """The way from a page to a target, both given from the site's root.

    >>> relative("parts/index.html", "parts/tarnbrook/x.html")
    '../index.html'
    """
    return posixpath.relpath(target, posixpath.dirname(page) or ".")


def _number_slug(number: str) -> str:
    made = slug(number)
    return made if made != "index" else "index-part"


def _distinct(wanted: Iterable[tuple[str, str, str]]) -> dict[str, str]:
    """A path for each key; where several keys want one path, all of them get a hash of their name."""
    asked = dict.fromkeys(wanted)
    count = Counter(path for path in {key: path for key, path, _ in asked}.values())
    return {
        key: path if count[path] == 1 else f"{path}-{hashlib.sha256(name.encode()).hexdigest()[:6]}"
        for key, path, name in asked
    }
