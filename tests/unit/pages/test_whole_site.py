"""The site as a whole: what records say is data on every page, and every page leads where it says."""

from __future__ import annotations

import posixpath
import re
from html.parser import HTMLParser
from pathlib import Path
from urllib.parse import unquote, urlsplit

import pytest
from small_site import TODAY, pages_of, read, text

from builder.crosschecks import checked_catalog
from builder.pages.page import Page
from builder.pages.site import site
from builder.plugin import search_entry

MARK = '"><img src=x onerror=alert(1)>'
HOSTILE = {
    "part": f"P{MARK}",
    "maker": f"M{MARK}",
    "own_number": f"O{MARK}",
    "description": f"D{MARK}",
    "body": {"form": "chip", "size_code": f"S{MARK}"},
    "limits": {"operating_c": [-40, 125], "medium": f"E{MARK}"},
    "qualification": [f"Q{MARK}"],
    "documents": [
        {
            "title": f"T{MARK}",
            "revision": f"R{MARK}",
            "link": "https://example.com/?a=1&lt;b",
            "sha256": "0" * 64,
        }
    ],
    "standing": [
        {
            "state": "restricted",
            "on": "2026-01-01",
            "by": f"B{MARK}",
            "because": f"W{MARK}",
            "document": {"title": f"T{MARK}", "revision": f"R{MARK}"},
            "only_for": [f"P{MARK}"],
        }
    ],
    "accepted": [{"rule": "tolerance-missing", "because": f"A{MARK}"}],
    "notes": f"N{MARK}</script><script>alert(1)</script>",
}
HOSTILE_PLACE = {
    "position": f"P{MARK}",
    "board": f"B{MARK}",
    "purpose": f"U{MARK}",
    "trips": [{"name": f"T{MARK}", "at_c": 5, "when": "rising"}],
    "requires": {"qualification": [f"Q{MARK}"], "size_code": f"S{MARK}"},
    "fitted": f"P{MARK}",
    "alternates": [{"part": "P2", "standing": HOSTILE["standing"]}],
    "notes": f"N{MARK}",
}

# Two charts beside each other need the room that the table of contents would take.
WITHOUT_CONTENTS = ("side-by-side.html",)


class Elements(HTMLParser):
    """The start tags of a page with their attributes."""

    def __init__(self, html: str) -> None:
        super().__init__()
        self.found: list[tuple[str, dict[str, str | None]]] = []
        self.feed(html)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.found.append((tag, dict(attrs)))

    def values(self, *names: str) -> list[str]:
        """Every value of attributes of these names."""
        return [value for _, attributes in self.found for name in names if (value := attributes.get(name)) is not None]


def elements(file: Path) -> Elements:
    return Elements(file.read_text("utf-8"))


def test_nothing_that_a_record_says_becomes_html_anywhere(tmp_path: Path) -> None:
    context = read(tmp_path, HOSTILE, HOSTILE | {"part": "P2"}, positions=(HOSTILE_PLACE,))
    shown = 0
    for item in site(context.checked, about=MARK):
        made = item.body() if isinstance(item, Page) else item.content()
        # A CSV is text: nothing reads it as HTML.
        assert "<img" not in made or item.path.endswith(".csv"), item.path
        if isinstance(item, Page):
            tags = {name for name, _ in Elements(made).found}
            assert "<script>" not in made and not tags & {"img", "iframe"}, item.path
            assert not [name for _, attributes in Elements(made).found for name in attributes if name.startswith("on")]
            entry = search_entry(item)
            assert not any("<" in value or '"' in value for value in entry.values())
            shown += made.count("&lt;img")
    assert shown > 50


def test_hostile_text_is_still_shown_as_it_was_typed(tmp_path: Path) -> None:
    context = read(tmp_path, HOSTILE)
    bodies = {page.path: text(page.body()) for page in pages_of(list(site(context.checked)))}
    own = bodies[context.paths.part(context.catalog.parts[0])]
    for letter in "PMODSEQTRBWA":
        assert f"{letter}{MARK}" in own, letter
    assert f"N{MARK}</script><script>alert(1)</script>" in own


def test_every_page_has_a_title_a_description_one_h1_and_headings_that_match_its_h2s(tmp_path: Path) -> None:
    pages = pages_of(list(site(read(tmp_path, positions=({},)).checked)))
    for page in pages:
        body = page.body()
        assert page.title and page.description, page.path
        assert body.count("<h1") == 1 and body.startswith("<h1"), page.path
        if page.path in WITHOUT_CONTENTS:
            assert page.headings == ()
            continue
        assert [heading.anchor for heading in page.headings] == re.findall(r'<h2[^>]* id="([^"]+)"', body), page.path
        headings = [text(found) for found in re.findall(r"<h2[^>]*>(.*?)</h2>", body)]
        assert [heading.text for heading in page.headings] == headings[: len(page.headings)], page.path
        assert "None" not in text(body).replace("None beyond", ""), page.path


def test_no_two_files_share_a_path_on_any_file_system(tmp_path: Path) -> None:
    numbers = ("A/B", "a-b", "A B", "index", "parts-data", "Größe", "groesse", "50%", "PX", "px")
    context = read(tmp_path, *({"part": number, "maker": f"M {i}"[: 2 + i % 2]} for i, number in enumerate(numbers)))
    paths = [item.path.casefold() for item in site(context.checked)]
    assert len(set(paths)) == len(paths)


def test_an_empty_catalog_makes_a_site(tmp_path: Path) -> None:
    (tmp_path / "parts").mkdir()
    checked = checked_catalog(tmp_path / "parts", today=TODAY)
    pages = pages_of(list(site(checked)))
    assert all(page.body() for page in pages)


@pytest.fixture(scope="module")
def built_pages(demo_site: Path) -> dict[str, Elements]:
    return {file.relative_to(demo_site).as_posix(): elements(file) for file in sorted(demo_site.rglob("*.html"))}


def test_every_link_of_the_demo_site_leads_to_a_file_and_every_fragment_to_its_anchor(
    demo_site: Path, built_pages: dict[str, Elements]
) -> None:
    anchors = {path: {*page.values("id", "name")} for path, page in built_pages.items()}
    broken = []
    for path, page in built_pages.items():
        if path == "404.html":  # served for any address, so its links start from the host's root
            continue
        for address in page.values("href", "src"):
            parts = urlsplit(address)
            if parts.scheme or parts.netloc:
                continue
            target = posixpath.normpath(
                posixpath.join(posixpath.dirname(path), unquote(parts.path) or posixpath.basename(path))
            )
            target = target if not (demo_site / target).is_dir() else f"{target}/index.html"
            if not (demo_site / target).is_file():
                broken.append(f"{path}: {address}")
            elif parts.fragment and "=" not in parts.fragment and unquote(parts.fragment) not in anchors[target]:
                broken.append(f"{path}: {address} has no such anchor")
    assert broken == []


def test_the_demo_site_s_pages_each_have_one_h1_a_title_and_a_description(built_pages: dict[str, Elements]) -> None:
    titles = []
    for path, page in built_pages.items():
        if path == "404.html":
            continue
        assert [tag for tag, _ in page.found].count("h1") == 1, path
        described = [found for tag, found in page.found if tag == "meta" and found.get("name") == "description"]
        assert len(described) == 1 and described[0].get("content"), path
        titles.append(path)
    assert len(titles) > 80


def test_no_page_of_the_demo_site_loads_anything_from_elsewhere(built_pages: dict[str, Elements]) -> None:
    loading = ("script", "img", "iframe", "source", "audio", "video", "embed", "object")
    for path, page in built_pages.items():
        for tag, found in page.found:
            address = found.get("src") or found.get("data") if tag in loading else None
            if tag == "link" and found.get("rel") != "canonical":
                address = found.get("href")
            assert not re.match(r"(https?:)?//", address or ""), f"{path}: {address}"
