"""The MkDocs plugin: it puts the catalog's pages, data files and search entries into the site.

The only module that knows MkDocs and Material.
"""

from __future__ import annotations

import gc
import json
import posixpath
import re
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from functools import lru_cache
from html import escape
from os.path import relpath
from pathlib import Path
from string import ascii_lowercase
from urllib.parse import quote, urljoin

import jinja2
from mkdocs import utils
from mkdocs.commands.build import get_context
from mkdocs.config import config_options
from mkdocs.config.base import Config
from mkdocs.config.defaults import MkDocsConfig
from mkdocs.exceptions import PluginError
from mkdocs.livereload import LiveReloadServer
from mkdocs.plugins import BasePlugin, event_priority, get_plugin_logger
from mkdocs.structure.files import File, Files
from mkdocs.structure.nav import Navigation
from mkdocs.structure.pages import Page as SitePage
from mkdocs.structure.toc import AnchorLink, TableOfContents

from builder.crosschecks import CheckedCatalog, checked_catalog
from builder.history import Past
from builder.kept import Kept, Shelf, SiteFolder, digest
from builder.pages.figures.axes import newly_drawn, recall
from builder.pages.figures.scales import Scale
from builder.pages.ledger_feed import FEED_LINK
from builder.pages.ledger_page import PAGE as LEDGER
from builder.pages.page import CopiedFile, DataFile, Heading, Page
from builder.pages.site import site
from builder.problems import count_text, errors, warnings
from builder.processes import shared_out

log = get_plugin_logger("beadroll")

ASSETS = Path(__file__).with_name("assets")
SEARCH = "search.js"  # must run before Material's own script starts its worker
BODY_ID = "page-body"
NO_DIRECTORY_URLS = (
    "Set use_directory_urls: false in mkdocs.yml: links must work from files, and with MkDocs' default, true, pages come out "
    "empty. The site is left as it was."
)


def slot(name: str) -> str:
    """The text that stands in a shell for what each page fills in; letters only, so that no escaping changes it."""
    return f"bdslot{name}slot"


SLOT = re.compile(slot("([a-z]+)"))
CONTENTS_ENTRY = re.compile(rf"<li\b(?:(?!<li\b).)*{slot('anchor')}.*?</li>", re.DOTALL)
# Material puts a title of its own above a body without h1, so the slot stands in one.
BODY = f"<h1>{slot('body')}</h1>"


def filled(pieces: list[str], values: dict[str, str]) -> str:
    """Text and slot names, alternating as `SLOT.split` gives them, with each slot's value in its place."""
    return "".join(values[piece] if index % 2 else piece for index, piece in enumerate(pieces))


def folder_slot(depth: int) -> str:
    """The name of the slot for a folder of a page's path, counted from the second."""
    return f"folder{ascii_lowercase[depth]}"


class Shell:
    """The frame that Material gives a page, rendered once and filled in for many."""

    def __init__(self, html: str) -> None:
        entry = CONTENTS_ENTRY.search(html)
        self._entry = SLOT.split(entry[0]) if entry else []
        html = CONTENTS_ENTRY.sub(slot("contents"), html).replace(BODY, slot("body"))
        self._pieces = SLOT.split(html)
        self.digest = digest(html.encode())

    def page(self, page: Page) -> str:
        """The page's HTML: everything but its body is text and is escaped."""
        return filled(
            self._pieces,
            {
                "title": escape(page.title),
                "description": escape(page.description),
                **{folder_slot(depth): quote(name) for depth, name in enumerate(page.path.split("/")[1:-1])},
                "name": quote(posixpath.basename(page.path).removesuffix(".html")),
                "record": quote(page.record or ""),
                "contents": "".join(map(self._contents_entry, page.headings)),
                "body": page.body(),
            },
        )

    def _contents_entry(self, heading: Heading) -> str:
        return filled(self._entry, {"anchor": escape(heading.anchor), "heading": escape(heading.text)})


class WrittenFile(File):
    """A file of the site whose content is made while it is written, so that it is never held.

    `key` tells what it is made from: a file of an earlier build that has the same need not be made again.
    """

    def __init__(
        self, path: str, config: MkDocsConfig, content: Callable[[], str | bytes], key: Callable[[], str | None]
    ) -> None:
        super().__init__(path, None, config.site_dir, config.use_directory_urls)
        self.generated_by = "beadroll"
        self._made = content
        self.key = key

    def write(self) -> str:
        """Make the content and write it; gives its digest."""
        content = self._made()
        data = content if isinstance(content, bytes) else content.encode()
        utils.write_file(data, self.abs_dest_path)
        return digest(data)

    def copy_file(self, dirty: bool = False) -> None:
        """Nothing: the plugin has written all such files before MkDocs copies its own."""


def write(files: Sequence[WrittenFile]) -> list[tuple[str, dict[Scale, str]]]:
    """Write a share of the files; gives the digest of each, and the axes that had to be drawn for it."""
    return [(file.write(), newly_drawn()) for file in files]


class KeptTemplates(jinja2.BytecodeCache):
    """Material's templates as compiled before: compiling them takes longer than filling them in."""

    def __init__(self, shelf: Shelf) -> None:
        self._shelf = shelf

    def load_bytecode(self, bucket: jinja2.bccache.Bucket) -> None:
        """Take a template from the shelf; jinja compares its source."""
        code = self._shelf.get(bucket.key)
        if code is not None:
            bucket.bytecode_from_string(code)

    def dump_bytecode(self, bucket: jinja2.bccache.Bucket) -> None:
        """Put a template on the shelf."""
        self._shelf.put(bucket.key, bucket.bytecode_to_string())


def meta(title: str, description: str, wide: bool) -> dict[str, object]:
    """A page's metadata. The search is told of the page by `search_entry`, not by its HTML."""
    hidden = ["navigation"] if wide else []
    return {"title": title, "description": description, "search": {"exclude": True}, "hide": hidden}


def contents(title: str, headings: tuple[Heading, ...]) -> TableOfContents:
    """A table of contents with the title on top, where the skip link leads, and the headings below it."""
    top = AnchorLink(title, BODY_ID, level=1)
    top.children = [AnchorLink(escape(head.text), escape(head.anchor), level=2) for head in headings]
    return TableOfContents([top])


def framed(body: str) -> str:
    """The body as Material is given it."""
    return f'<div id="{BODY_ID}">{body}</div>'


def search_entry(page: Page) -> dict[str, str]:
    """What the search knows of a page; it shows titles and texts as HTML."""
    return {"location": quote(page.path), "title": escape(page.title), "text": escape(page.search_text)}


class Options(Config):  # type: ignore[no-untyped-call]
    """The plugin's options in mkdocs.yml."""

    records = config_options.Dir(default="parts", exists=True)
    about = config_options.Type(str, default="")  # what the home page says of this catalog
    changes = config_options.Type(int, default=10)  # how many revisions the Changes page shows
    figures = config_options.Type(bool, default=True)  # without them a build shows what figures cost
    cache = config_options.Type(bool, default=True)  # whether what was made is kept for the next build


class BeadrollPlugin(BasePlugin[Options]):  # type: ignore[no-untyped-call]
    """The events, in the order in which MkDocs calls them."""

    def __init__(self) -> None:
        self._checked: CheckedCatalog
        self._kept_for: tuple[str, bool] | None = None
        self._kept: Kept  # what was read and checked
        self._made: Kept  # what the site was made of
        self._site_folder: SiteFolder | None = None
        self._serving = False
        self._pages: list[Page] = []
        self._pages_in_nav: dict[str, Page] = {}
        self._nav: Navigation
        self._shell: Callable[[str, bool, bool, bool], Shell]

    def on_config(self, config: MkDocsConfig) -> MkDocsConfig:
        if config.use_directory_urls:
            raise PluginError(NO_DIRECTORY_URLS)
        asked = self.config.records, self.config.cache
        if self._kept_for != asked:  # while serving, what is in memory goes on to the next build
            self._kept_for = asked
            self._kept = Kept.beside(Path(self.config.records)) if self.config.cache else Kept()
            self._made = self._kept.below("site")
        # A build makes many objects that stay and few that go: looking through them again and again takes a tenth of it.
        gc.set_threshold(200_000, 20, 20)
        self._read_records()
        self._site_url = f"{config.site_url.rstrip('/')}/" if config.site_url else ""
        self._begin_site(config)
        names = sorted(asset.name for asset in ASSETS.iterdir())
        config.extra.setdefault("polyfills", []).append(f"assets/{SEARCH}")
        config.extra_css[:0] = [f"assets/{name}" for name in names if name.endswith(".css")]
        config.extra_javascript[:0] = [f"assets/{name}" for name in names if name.endswith(".js") and name != SEARCH]
        return config

    def _read_records(self) -> None:
        """Take the records; refuse bad ones, or while serving go on with those read before."""
        log.info(f"Reading the records in {self.config.records}")
        checked = checked_catalog(
            Path(relpath(self.config.records)), today=utils.get_build_datetime().date(), kept=self._kept
        )
        bad = errors(checked.problems)
        for problem in bad:
            log.error(str(problem))
        if not bad:
            self._checked = checked
            log.info(f"Records read: {count_text(len(warnings(checked.problems)), 'warning')}")
        elif self._serving:
            log.error(f"Records refused: {count_text(len(bad), 'error')}. Serving those read before.")
        else:
            raise PluginError(f"Records refused: {count_text(len(bad), 'error')}. The site is left as it was.")

    def _begin_site(self, config: MkDocsConfig) -> None:
        """Have MkDocs build beside the site; where that cannot be, it builds in its place."""
        folder = SiteFolder(Path(config.site_dir))
        try:
            folder.begin()
        except OSError as error:
            log.info(f"The site is built in its place, not beside it: {error.filename}: {error.strerror}.")
            return
        self._site_folder = folder
        config.site_dir = str(folder.building)

    def on_files(self, files: Files, *, config: MkDocsConfig) -> Files:
        for asset in sorted(ASSETS.iterdir()):
            files.append(File.generated(config, f"assets/{asset.name}", abs_src_path=str(asset)))
        self._pages = []
        for item in self._site():
            files.append(self._file(item, config))
            if isinstance(item, Page):
                self._pages.append(item)
        self._pages_in_nav = {page.path: page for page in self._pages if page.in_nav}
        return files

    def _site(self) -> Iterator[Page | DataFile | CopiedFile]:
        past = Past(Path(relpath(self.config.records)), self.config.changes)
        about, figures = self.config.about, self.config.figures
        return site(self._checked, about=about, figures=figures, past=past, kept=self._made, site_url=self._site_url)

    def _file(self, item: Page | DataFile | CopiedFile, config: MkDocsConfig) -> File:
        if isinstance(item, CopiedFile):
            return File.generated(config, item.path, abs_src_path=str(item.source))
        if isinstance(item, DataFile):
            return WrittenFile(item.path, config, item.content, lambda: self._key(item, ""))
        if item.in_nav:
            return File.generated(config, item.path.removesuffix(".html") + ".md", content="")
        return WrittenFile(
            item.path,
            config,
            lambda: self._shell_of(item).page(item),
            lambda: self._key(item, self._shell_of(item).digest),
        )

    def _shell_of(self, page: Page) -> Shell:
        folder = posixpath.dirname(page.path)
        top, *below = folder.split("/")
        folder = "/".join([top, *(slot(folder_slot(depth)) for depth in range(len(below)))])
        return self._shell(folder, page.record is not None, bool(page.headings), page.wide)

    def _key(self, item: Page | DataFile, shell: str) -> str | None:
        """What a file is made from, the code apart; None where the item does not say."""
        if item.made_from is None:
            return None
        fields = (item.title, item.description, item.headings, item.record, item.wide) if isinstance(item, Page) else ()
        options = self.config.about, self.config.figures
        return digest(repr((item.path, item.made_from, fields, options, shell)).encode())

    def on_page_content(self, html: str, *, page: SitePage, **_: object) -> str:
        ours = self._pages_in_nav.get(page.file.dest_uri)
        if ours is None:
            return html
        page.meta = meta(escape(ours.title), escape(ours.description), ours.wide)
        page.toc = contents(escape(ours.title), ours.headings)
        return framed(self._body(ours))

    def _body(self, page: Page) -> str:
        """The body of a page in the nav, as it was made before if it may be."""
        key = self._key(page, "")
        if key is None:
            return page.body()
        shelf = self._made.shelf("bodies")
        body: str | None = shelf.get(key)
        if body is None:
            body = page.body()
            shelf.put(key, body)
        return body

    def on_nav(self, nav: Navigation, **_: object) -> Navigation:
        self._nav = nav
        return nav

    def on_env(self, env: jinja2.Environment, *, config: MkDocsConfig, files: Files) -> jinja2.Environment:
        """The last event before the files are written: from here on shells can be rendered."""

        def shell(folder: str, has_record: bool, has_headings: bool, wide: bool) -> Shell:
            page = self._shell_page(folder, has_record, has_headings, wide, config)
            with self._section_active(folder):
                context = get_context(self._nav, files, config, page)
                context = config.plugins.on_page_context(context, page=page, config=config, nav=self._nav)
                html = env.get_template("main.html").render(context)
            return Shell(config.plugins.on_post_page(html, page=page, config=config) or "")

        self._shell = lru_cache(maxsize=16)(shell)
        env.bytecode_cache = KeptTemplates(self._made.shelf("templates"))
        self._write_files([file for file in files if isinstance(file, WrittenFile)])
        return env

    def _write_files(self, files: Sequence[WrittenFile]) -> None:
        """Take over what the site has already, and write the rest."""
        shelf = self._made.shelf("files")
        keys = {file.dest_uri: file.key() for file in files}
        missing = [file for file in files if not self._taken_over(file.dest_uri, keys[file.dest_uri], shelf)]
        log.info(f"Writing {count_text(len(missing), 'file')}, keeping {len(files) - len(missing)}")
        axes: dict[Scale, str] = self._made.shelf("axes").get("all") or {}
        recall(axes)
        known = len(axes)
        for file, (written, drawn) in zip(missing, shared_out(write, missing, "Writing files"), strict=True):
            axes |= drawn
            if keys[file.dest_uri] is not None:
                shelf.put(file.dest_uri, None, [keys[file.dest_uri], written])
        if len(axes) > known:
            self._made.shelf("axes").put("all", axes)

    def _taken_over(self, path: str, key: str | None, shelf: Shelf) -> bool:
        head = shelf.head(path) if key is not None else None
        if self._site_folder is None or head is None or head[0] != key:
            return False
        return self._site_folder.take(path, head[1])

    @contextmanager
    def _section_active(self, folder: str) -> Iterator[None]:
        """Have the nav show where a page outside it belongs: beside the index of its topmost folder."""
        index = f"{folder.split('/')[0]}/index.html"
        found = [page for page in self._nav.pages if page.file.dest_uri == index]
        for page in found:
            page.active = True
        yield
        for page in found:
            page.active = False

    def _shell_page(
        self, folder: str, has_record: bool, has_headings: bool, wide: bool, config: MkDocsConfig
    ) -> SitePage:
        """A page of that folder with a slot for all that differs between its pages; it is in no collection."""
        path = posixpath.join(folder, slot("name") + ".html")
        file = File(path, None, config.site_dir, use_directory_urls=False)
        records = Path(relpath(self.config.records, config.docs_dir)).as_posix()
        can_be_edited = has_record and self._in_project(config)
        file.edit_uri = f"{records}/{slot('record')}" if can_be_edited else None
        page = SitePage(slot("title"), file, config)
        if page.edit_url:
            page.edit_url = re.sub(r"[^/]+/\.\./", "", page.edit_url)
        headings = (Heading(slot("anchor"), slot("heading")),) if has_headings else ()
        page.meta = meta(slot("title"), slot("description"), wide)
        page.toc = contents(slot("title"), headings)
        page.content = framed(BODY)
        return page

    def _in_project(self, config: MkDocsConfig) -> bool:
        """Whether the records lie below the folder of mkdocs.yml, so that the web address of the project has them."""
        folder = Path(config.config_file_path).resolve().parent
        return Path(self.config.records).resolve().is_relative_to(folder)

    def on_post_page(self, output: str, *, page: SitePage, **_: object) -> str:
        """Have the Ledger's head name its feed, where readers of feeds look for it."""
        if page.file.dest_uri != LEDGER:
            return output
        return output.replace("</head>", f"{FEED_LINK}</head>", 1)

    def on_post_template(self, output: str, *, template_name: str, config: MkDocsConfig) -> str:
        if template_name != "sitemap.xml":
            return output
        base = (config.site_url or "/").rstrip("/") + "/"
        places = [urljoin(base, quote(page.path)) for page in self._pages if not page.in_nav]
        entries = "".join(f"    <url>\n         <loc>{escape(place)}</loc>\n    </url>\n" for place in places)
        return output.replace("</urlset>", f"{entries}</urlset>")

    @event_priority(-100)  # after the search has written its index
    def on_post_build(self, *, config: MkDocsConfig) -> None:
        self._complete_search(Path(config.site_dir, "search", "search_index.json"))
        if self._site_folder is not None:
            self._site_folder.finish()
            config.site_dir = str(self._site_folder.place)
            self._site_folder = None
        self._made.save()
        if trouble := self._kept.trouble or self._made.trouble:
            log.info(trouble)

    def _complete_search(self, index_file: Path) -> None:
        if not index_file.exists():
            return
        index = json.loads(index_file.read_text("utf-8"))
        index["docs"] += [search_entry(page) for page in self._pages if page.search_text]
        text = json.dumps(index, ensure_ascii=False, separators=(",", ":"))
        index_file.write_text(text, "utf-8")
        # A page from file:// cannot fetch JSON, so Material looks there for a script that sets this name.
        index_file.with_suffix(".js").write_text(f"var __index = {text}", "utf-8")
        log.info(f"Pages written; the search has {len(index['docs'])} entries")

    def on_build_error(self, **_: object) -> None:
        if self._site_folder is not None:
            self._site_folder.give_up()
            self._site_folder = None

    def on_serve(self, server: LiveReloadServer, **_: object) -> LiveReloadServer:
        self._serving = True
        server.watch(self.config.records)
        return server

    def on_shutdown(self) -> None:
        """For a plugin that has this event MkDocs keeps one object, and so the last catalog, while it serves."""
        self._serving = False
