"""The plugin in real MkDocs builds of a small project; the records and the pages are stand-ins."""

from __future__ import annotations

import json
import logging
import re
import socket
import threading
import time
import urllib.error
import urllib.request
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from unittest import mock

import pytest
from click.testing import CliRunner
from mkdocs.__main__ import cli
from mkdocs.commands import serve
from mkdocs.commands.build import build
from mkdocs.config import load_config
from mkdocs.exceptions import Abort
from mkdocs.livereload import LiveReloadServer
from playwright.sync_api import Browser

from builder import plugin
from builder.history import Past
from builder.pages.page import DataFile, Heading, Page
from builder.problems import Problem

SEPARATOR = re.search(r"separator: '(.*)'", Path(__file__).parents[2].joinpath("mkdocs.yml").read_text())[1]

MKDOCS_YML = f"""
site_name: Demo
site_url: https://demo.example.com/sub/
edit_uri_template: https://git.example.com/demo/edit/main/docs/{{path}}
use_directory_urls: false
theme: {{name: material, font: false, features: [content.action.edit, navigation.tabs]}}
plugins:
  - search: {{separator: '{SEPARATOR}'}}
  - beadroll
nav:
  - Home: index.md
  - Parts: [parts/index.md, side.md]
  - Method: method.md
"""

TITLE = "TB3A-103F38"
PATH = "parts/tarnbrook-ceramics/tb3a-103f38.html"
PART = Page(
    PATH,
    TITLE,
    "10 kΩ chip, 0603",
    lambda: f'<h1>{TITLE}</h1><h2 id="curve">Curve</h2><h2 id="band">Band</h2>',
    (Heading("curve", "Curve"), Heading("band", "Band")),
    "Tarnbrook Ceramics 10kΩ 10k 0603",
    "tarnbrook/TB3A-103F38.yaml",
)
OTHER = replace(PART, path=PATH.replace("103f38", "473f38"), title="TB3A-473F38", search_text="47kΩ 47k 0402 HS-10")
POSITION = Page("positions/coolbox-rt1.html", "coolbox/RT1", "air", lambda: "<h1>coolbox/RT1</h1>")


def nav_page(path: str, title: str) -> Page:
    return Page(path, title, f"{title} described", lambda: f"<h1>{title}</h1>", in_nav=True, search_text=title)


NAV_PAGES = (nav_page("index.html", "Start"), nav_page("parts/index.html", "All"), nav_page("side.html", "Side"))


@dataclass(frozen=True)
class Catalog:
    problems: tuple[Problem, ...] = ()
    text: str = ""


@dataclass
class Project:
    """A folder with a MkDocs project, and what its records and pages are."""

    folder: Path
    pages: tuple[Page | DataFile, ...] = (*NAV_PAGES, PART, OTHER, POSITION)
    problems: tuple[Problem, ...] = ()

    def build(self) -> None:
        build(load_config(str(self.folder / "mkdocs.yml"), strict=True))

    def read(self, path: str) -> str:
        return (self.folder / "site" / path).read_text("utf-8")

    def built(self, path: str, **changes: object) -> str:
        """The page's HTML after a build in which `PART` is changed."""
        self.pages = (*NAV_PAGES, replace(PART, **changes))
        self.build()
        return self.read(path)


@pytest.fixture
def project(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Project:
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "0")
    made = Project(tmp_path)
    monkeypatch.setattr(plugin, "checked_catalog", lambda _, **__: Catalog(made.problems))
    monkeypatch.setattr(plugin, "site", lambda _, **__: iter(made.pages))
    (tmp_path / "mkdocs.yml").write_text(MKDOCS_YML)
    (tmp_path / "parts").mkdir()
    (tmp_path / "docs").mkdir()
    (tmp_path / "docs" / "method.md").write_text(f"# Method\n\n[a part]({PATH}) and [all](parts/index.md)\n")
    return made


def problem(severity: str, file: str = "parts/a.yaml") -> Problem:
    return Problem(file, 3, "maker", "missing", "is missing. Add the maker.", severity)  # type: ignore[arg-type]


def test_a_part_page_has_its_title_description_address_and_body(project: Project) -> None:
    project.build()
    html = project.read(PATH)
    assert f"<title>{TITLE} - Demo</title>" in html
    assert '<meta name="description" content="10 kΩ chip, 0603">' in html
    assert f'<link rel="canonical" href="https://demo.example.com/sub/{PATH}">' in html
    assert html.count("<h1") == 1
    assert PART.body() in html


def test_the_edit_link_leads_to_the_record(project: Project) -> None:
    project.build()
    link = "https://git.example.com/demo/edit/main/parts/tarnbrook/TB3A-103F38.yaml"
    assert f'<a href="{link}"' in project.read(PATH)


def test_a_page_without_a_record_has_no_edit_link(project: Project) -> None:
    assert 'rel="edit"' in project.built(PATH)
    assert 'rel="edit"' not in project.built(PATH, record=None)
    assert 'rel="edit"' not in project.read("parts/index.html")


def test_a_record_outside_the_project_has_no_edit_link(
    project: Project, tmp_path_factory: pytest.TempPathFactory
) -> None:
    elsewhere = tmp_path_factory.mktemp("records")
    (project.folder / "mkdocs.yml").write_text(
        MKDOCS_YML.replace("- beadroll", f"- beadroll: {{records: {elsewhere}}}")
    )
    assert 'rel="edit"' not in project.built(PATH)


def test_text_from_records_is_escaped_in_the_frame(project: Project) -> None:
    evil = '"><script>alert("&")</script>'
    html = project.built(
        PATH, title=evil, description=evil, headings=(Heading("a", evil),), record=f"{evil}.yaml", search_text=evil
    )
    assert evil not in html
    assert html.count("&quot;&gt;&lt;script&gt;alert(&quot;&amp;&quot;)&lt;/script&gt;") >= 3


def test_text_that_looks_like_a_slot_stays_text(project: Project) -> None:
    assert "<title>bdslotbodyslot - Demo</title>" in project.built(PATH, title="bdslotbodyslot")


@pytest.mark.parametrize("path", [PATH, "positions/coolbox-rt1.html", "top.html", "index.html"])
def test_every_address_in_a_page_leads_to_a_file_of_the_site(project: Project, path: str) -> None:
    project.pages = (*project.pages, replace(PART, path="top.html"))
    project.build()
    folder = (project.folder / "site" / path).parent
    addresses = re.findall(r'(?:href|src)="(?!https:|#|javascript:)([^"#]*)', project.read(path))
    assert len(addresses) > 10
    assert [a for a in addresses if not (folder / a).is_file()] == []


def test_no_slot_is_left_open(project: Project) -> None:
    project.build()
    pages = (project.folder / "site").rglob("*.html")
    assert [page for page in pages if "bdslot" in page.read_text("utf-8")] == []


@pytest.mark.parametrize("path", [PATH, "parts/index.html"])
def test_the_table_of_contents_lists_the_headings(project: Project, path: str) -> None:
    project.pages = tuple(replace(page, headings=PART.headings) for page in project.pages if isinstance(page, Page))
    project.build()
    contents = project.read(path).split('data-md-type="toc"')[1].split("</nav>")[0]
    assert re.findall(r'href="#(\w+)".*?<span class="md-ellipsis">\s*(\w+)', contents, re.DOTALL) == [
        ("curve", "Curve"),
        ("band", "Band"),
    ]


def test_a_page_without_headings_has_no_table_of_contents(project: Project) -> None:
    project.build()
    assert 'data-md-component="toc"' in project.read(PATH)
    assert 'data-md-component="toc"' not in project.read(POSITION.path)


def test_the_skip_link_leads_to_the_body(project: Project) -> None:
    project.build()
    for path in (PATH, POSITION.path, "parts/index.html"):
        assert 'href="#page-body" class="md-skip"' in project.read(path)
        assert '<div id="page-body"><h1>' in project.read(path)


def test_a_page_in_the_nav_has_its_own_body_title_and_description(project: Project) -> None:
    project.build()
    html = project.read("parts/index.html")
    assert "<title>All - Demo</title>" in html
    assert '<meta name="description" content="All described">' in html
    assert re.findall("<h1.*?</h1>", html) == ["<h1>All</h1>"]


def test_the_nav_shows_the_section_of_a_page_outside_it(project: Project) -> None:
    project.build()
    active = r'md-tabs__item--active">\s*<a href="([^"]*)"'
    assert re.findall(active, project.read(PATH)) == ["../index.html"]
    assert re.findall(active, project.read(POSITION.path)) == []
    assert re.findall(active, project.read("method.html")) == ["method.html"]


def test_the_sitemap_lists_every_page_once(project: Project) -> None:
    project.build()
    places = re.findall("<loc>https://demo.example.com/sub/(.*)</loc>", project.read("sitemap.xml"))
    pages = [page.path for page in project.pages if isinstance(page, Page)]
    assert sorted(places) == sorted([*pages, "method.html"])


@pytest.mark.parametrize(("options", "most"), [("beadroll", 10), ("beadroll: {changes: 3}", 3)])
def test_the_site_is_given_as_many_revisions_as_asked_for(
    project: Project, monkeypatch: pytest.MonkeyPatch, options: str, most: int
) -> None:
    given: list[Past] = []
    monkeypatch.setattr(plugin, "site", lambda _, past, **__: given.append(past) or iter(project.pages))
    (project.folder / "mkdocs.yml").write_text(MKDOCS_YML.replace("- beadroll", f"- {options}"))
    project.build()
    assert [(past.records.resolve(), past.most) for past in given] == [(project.folder / "parts", most)]


def test_a_data_file_is_written_as_it_is(project: Project) -> None:
    project.pages += (DataFile("data/parts.js", lambda: "var parts = ['10 kΩ'];\n"),)
    project.build()
    assert project.read("data/parts.js") == "var parts = ['10 kΩ'];\n"


def test_the_search_has_one_lean_entry_a_page(project: Project) -> None:
    project.build()
    index = json.loads(project.read("search/search_index.json"))
    found = {entry["location"]: entry for entry in index["docs"]}
    assert set(found) == {"index.html", "method.html", PATH, OTHER.path, "parts/index.html", "side.html"}
    assert len(index["docs"]) == len(found)
    assert found[PATH] == {"location": PATH, "title": TITLE, "text": PART.search_text}


def test_the_search_entry_is_escaped(project: Project) -> None:
    project.built(PATH, title="a<b", search_text="<i>&")
    entry = json.loads(project.read("search/search_index.json"))["docs"][-1]
    assert (entry["title"], entry["text"]) == ("a&lt;b", "&lt;i&gt;&amp;")


def test_the_search_index_is_shipped_as_a_script_too(project: Project) -> None:
    project.build()
    assert project.read("search/search_index.js") == "var __index = " + project.read("search/search_index.json")


def test_a_link_from_markdown_to_a_missing_part_fails_a_strict_build(project: Project) -> None:
    (project.folder / "docs" / "method.md").write_text("[gone](parts/gone.html)\n")
    with pytest.raises(Abort, match="1 warnings in strict mode"):
        project.build()


@pytest.mark.parametrize("line", ["", "use_directory_urls: true\n"])
def test_directory_urls_are_refused_and_the_old_site_stays(
    project: Project, caplog: pytest.LogCaptureFixture, line: str
) -> None:
    project.build()
    old = {path: path.read_bytes() for path in project.folder.rglob("site/**/*.*")}
    (project.folder / "mkdocs.yml").write_text(MKDOCS_YML.replace("use_directory_urls: false\n", line))
    (project.folder / "docs" / "method.md").write_text("# Method\n")
    with pytest.raises(Abort):
        project.build()
    assert [record.message for record in caplog.records if record.levelno == logging.ERROR] == [
        "Set use_directory_urls: false in mkdocs.yml: links must work from files, and with MkDocs' default, true, pages come out "
        "empty. The site is left as it was."
    ]
    assert {path: path.read_bytes() for path in project.folder.rglob("site/**/*.*")} == old


def test_bad_records_are_all_told_and_the_old_site_stays(project: Project, caplog: pytest.LogCaptureFixture) -> None:
    project.build()
    project.problems = (problem("error"), problem("warning", "parts/b.yaml"), problem("error", "parts/c.yaml"))
    with pytest.raises(Abort):
        project.build()
    assert [record.message for record in caplog.records if record.levelno == logging.ERROR] == [
        "beadroll: parts/a.yaml:3: maker: is missing. Add the maker.",
        "beadroll: parts/c.yaml:3: maker: is missing. Add the maker.",
        "Records refused: 2 errors. The site is left as it was.",
    ]
    assert TITLE in project.read(PATH)


def test_warnings_are_counted_and_pass_a_strict_build(project: Project, caplog: pytest.LogCaptureFixture) -> None:
    caplog.set_level(logging.INFO)
    project.problems = (problem("warning"),)
    project.build()
    assert "beadroll: Records read: 1 warning" in caplog.messages
    assert [record for record in caplog.records if record.levelno > logging.INFO] == []


def test_a_body_is_made_when_the_page_before_it_is_written(project: Project) -> None:
    seen: list[bool] = []

    def body() -> str:
        seen.append(any(project.folder.glob(f".site.*.building/{PATH}")))
        return "<h1>later</h1>"

    project.pages = (*NAV_PAGES, PART, replace(OTHER, body=body))
    project.build()
    assert seen == [True]


def test_two_builds_are_byte_identical(project: Project) -> None:
    def content() -> dict[Path, bytes]:
        project.build()
        return {path: path.read_bytes() for path in (project.folder / "site").rglob("*") if path.is_file()}

    assert content() == content()


def test_mkdocs_serve_watches_for_changes_with_this_click() -> None:
    """Some releases of click turn MkDocs' live reload off."""
    with mock.patch("mkdocs.commands.serve.serve") as served:
        CliRunner().invoke(cli, ["serve"])
    assert served.call_args.kwargs["livereload"] is True


@pytest.fixture
def reply(project: Project, monkeypatch: pytest.MonkeyPatch) -> Iterator[Callable[[str], str]]:
    """The project under `mkdocs serve`, its part's body being its record; gives an address's answer."""
    record = project.folder / "parts" / "a.yaml"
    record.write_text("first")

    def catalog(_: Path, **__: object) -> Catalog:
        text = record.read_text()
        return Catalog((problem("error"),) if text == "bad" else (), text)

    def pages(read: Catalog, **_: object) -> Iterator[Page]:
        yield from NAV_PAGES
        yield replace(PART, body=lambda: f"<h1>{read.text}</h1>")

    monkeypatch.setattr(plugin, "checked_catalog", catalog)
    monkeypatch.setattr(plugin, "site", pages)
    servers: list[LiveReloadServer] = []

    def server(**named: object) -> LiveReloadServer:
        servers.append(LiveReloadServer(**named))
        return servers[0]

    monkeypatch.setattr(serve, "LiveReloadServer", server)
    with socket.socket() as free:
        free.bind(("127.0.0.1", 0))
        address = f"127.0.0.1:{free.getsockname()[1]}"
    arguments = {"config_file": str(project.folder / "mkdocs.yml"), "dev_addr": address}
    thread = threading.Thread(target=serve.serve, kwargs=arguments)
    thread.start()

    def answer(path: str) -> str:
        for _ in range(100):
            try:
                with urllib.request.urlopen(f"http://{address}{path}", timeout=10) as response:
                    return str(response.read().decode())
            except urllib.error.URLError:  # not yet listening
                time.sleep(0.1)
        raise TimeoutError(path)

    yield answer
    servers[0].shutdown()
    thread.join(10)


def test_an_edited_record_reloads_the_page_and_a_bad_one_leaves_it(
    project: Project, reply: Callable[[str], str]
) -> None:
    def saved(text: str) -> str:
        """The page once the browser has been told to reload."""
        epoch = re.search(r"livereload\((\d+)", reply(f"/sub/{PATH}"))[1]  # type: ignore[index]
        (project.folder / "parts" / "a.yaml").write_text(text)
        assert int(reply(f"/livereload/{epoch}/1")) > int(epoch)
        return reply(f"/sub/{PATH}")

    assert "<h1>first</h1>" in reply(f"/sub/{PATH}")
    assert "<h1>second</h1>" in saved("second")
    assert "<h1>second</h1>" in saved("bad")
    assert "<h1>third</h1>" in saved("third")


@pytest.mark.parametrize(
    ("query", "found"),
    [
        ("TB3A-103F38", [TITLE, "TB3A-473F38"]),
        ("103F38", [TITLE]),
        ("TB3A-4", ["TB3A-473F38", TITLE]),
        ("tarnb", [TITLE]),
        ("10 kΩ", [TITLE]),
        ("47k", ["TB3A-473F38"]),
        ("0603", [TITLE, "X-14730603"]),
        ("73F38", ["TB3A-473F38"]),
        ("03F", [TITLE]),
        ("473", ["TB3A-473F38", "X-14730603"]),
    ],
)
def test_the_search_works_from_a_file_with_the_network_off(
    project: Project, chromium: Browser, query: str, found: list[str]
) -> None:
    project.pages += (replace(PART, path=PATH.replace("103f38", "x"), title="X-14730603", search_text="1k"),)
    project.build()
    page = chromium.new_page(offline=True)
    page.set_default_timeout(5000)
    told: list[str] = []
    asked: list[str] = []
    page.on("console", lambda message: told.append(message.text))
    page.on("pageerror", lambda error: told.append(str(error)))
    page.on("request", lambda request: asked.append(request.url))
    page.goto(f"file://{project.folder}/site/{PATH}")
    page.locator(".md-search__input").fill(query)
    page.locator(".md-search__input").press("End")
    page.locator(f".md-search-result__item:nth-child({len(found)})").wait_for()
    assert page.locator(".md-search-result__item h1").all_inner_texts() == found
    # Of two words joined by a hyphen one result may lack one; a fragment that is there is never said to be missing.
    assert ("Missing" in page.locator(".md-search-result").inner_text()) == ("-" in query)
    page.close()
    assert told == []
    assert [url for url in asked if not url.startswith(f"file://{project.folder}/site/")] == []
    assert sum("search_index" in url for url in asked) == 1
