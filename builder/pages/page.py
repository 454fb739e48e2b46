"""A page and a file of the site, knowing nothing of the site generator that frames them."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path


@dataclass(frozen=True)
class Heading:
    """One entry of a page's table of contents: the `id` its h2 carries, and its text (plain, not HTML)."""

    anchor: str
    text: str


@dataclass(frozen=True)
class Page:
    """One page, its body rendered only when asked for.

    `path` is the page's place in the site, e.g. `parts/tarnbrook/tb3a-103f38.html`; `title` and
    `description` are plain text; `body` returns ready HTML, starting with its h1; `search_text` is what the
    site's search knows of the page beside its title (empty: the page is not found), with resistances in one
    word, as `10kΩ` and `10k`; `record` is the record's file below the records folder,
    for the edit link; `wide` pages hold tables that want the room beside them; `in_nav` pages stand in mkdocs.yml's nav, the others are filled into a ready shell.

    A page that was made before is taken as it was, if nothing that it is made from has changed: `made_from` has a text
    or digest of everything that the body shows or is computed from (`Context.digest` for a record), beside the code,
    the options, the shell and the other fields here, which count anyway. What a page does not show stays out. None:
    the page is made anew at every build.
    """

    path: str
    title: str
    description: str
    body: Callable[[], str]
    headings: tuple[Heading, ...] = ()
    search_text: str = ""
    record: str | None = None
    in_nav: bool = False
    wide: bool = True
    made_from: tuple[str, ...] | None = None


@dataclass(frozen=True)
class DataFile:
    """A file of the site beside the pages: a table, a script with data, a schema; `made_from` as of a page."""

    path: str
    content: Callable[[], str]
    made_from: tuple[str, ...] | None = None


@dataclass(frozen=True)
class CopiedFile:
    """A file of the site that is the copy of one beside a record: a document."""

    path: str
    source: Path
