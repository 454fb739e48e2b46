"""After any history a rebuilt site is the one built from nothing, and a build that is killed leaves a whole site."""

from __future__ import annotations

import logging
import os
import random
import shutil
import signal
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest
from mkdocs.commands.build import build
from mkdocs.config import load_config
from mkdocs.exceptions import Abort

from builder.kept.folder import FOLDER
from builder.plugin import BeadrollPlugin
from tests.factory import CSV, PART, POSITION, WITH_CSV, changed

MKDOCS_YML = """\
site_name: Demo
site_url: https://demo.example.com/
use_directory_urls: false
theme: {name: material, font: false}
plugins: [search, {beadroll: {records: parts}}]
nav: [Home: index.md, Parts: parts/index.md, Positions: positions/index.md, Method: method.md]
"""
A, B, C, PLACE = "parts/t/a.yaml", "parts/t/b.yaml", "parts/o/c.yaml", "parts/boards/rt1.yaml"
FILES = {
    "mkdocs.yml": MKDOCS_YML,
    "docs/method.md": "# Method\n\n[Parts](parts/index.md)\n",
    A: PART + "notes: first\n",
    B: changed(WITH_CSV, "part: TB3A-103F38", "part: TB9-103"),
    "parts/t/table.csv": CSV,
    C: changed(changed(PART, "part: TB3A-103F38", "part: OS-1"), "maker: Tarnbrook Ceramics", "maker: Ostrel"),
    PLACE: changed(POSITION, "part: TB3A-103F38, standing", "part: OS-1, standing"),
}
ENTRY = "  - {state: proposed, on: 2026-02-12, by: sensors, because: more samples}\n"
Change = Callable[[], object]


def put(file: str, text: str) -> None:
    Path(file).parent.mkdir(parents=True, exist_ok=True)
    Path(file).write_text(text, "utf-8")


def edit(file: str, old: str, new: str) -> Change:
    return lambda: put(file, changed(Path(file).read_text("utf-8"), old, new))


def built(*, serving: bool = False) -> None:
    """Build the site as a new process would, or as a server that goes on running does, from what it has in memory."""
    config = load_config("mkdocs.yml")
    plugin = config.plugins["beadroll"]
    assert isinstance(plugin, BeadrollPlugin)
    if not serving:
        plugin._kept_for = None
    build(config)


def tree(folder: str | Path) -> dict[str, bytes]:
    """Every file of a site, with its content."""
    return {p.relative_to(folder).as_posix(): p.read_bytes() for p in sorted(Path(folder).rglob("*")) if p.is_file()}


def differing(one: dict[str, bytes], other: dict[str, bytes]) -> list[str]:
    return [name for name in sorted({*one, *other}) if one.get(name) != other.get(name)]


def clean() -> dict[str, bytes]:
    """The site built from nothing, from what the records and the project say now."""
    shutil.rmtree("clean", ignore_errors=True)
    here = Path.cwd()
    for name in ("mkdocs.yml", "docs", "parts"):
        copy = shutil.copytree if Path(name).is_dir() else shutil.copy
        Path("clean").mkdir(exist_ok=True)
        copy(name, Path("clean", name))
    os.chdir("clean")
    try:
        built()
        return tree("site")
    finally:
        os.chdir(here)


@pytest.fixture(scope="module")
def before(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The project, built once, with its site and what was kept."""
    folder = tmp_path_factory.mktemp("before")
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(folder)
        patch.setenv("SOURCE_DATE_EPOCH", "0")
        for file, text in FILES.items():
            put(file, text)
        built()
    return folder


@pytest.fixture
def project(before: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A copy of it to change, which is the working directory."""
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "0")
    shutil.copytree(before, tmp_path, dirs_exist_ok=True)
    monkeypatch.chdir(tmp_path)
    return tmp_path


def in_turn(*changes: Change) -> Change:
    """Several changes, each built, the last one left to be built."""

    def do() -> None:
        for change in changes[:-1]:
            change()
            built()
        changes[-1]()

    return do


HISTORIES: dict[str, Change] = {
    "nothing": lambda: None,
    "notes edited": edit(A, "notes: first", "notes: second"),
    "a table's row edited": edit("parts/t/table.csv", "50,4000", "50,4010"),
    "a curve edited": edit(C, "b_k: 3435", "b_k: 3450"),
    "a standing appended": lambda: put(C, FILES[C] + ENTRY),
    "a record's file renamed": lambda: Path(A).rename("parts/t/z.yaml"),
    "a part renamed": lambda: (edit(PLACE, "part: OS-1", "part: OS-2")(), edit(C, "part: OS-1", "part: OS-2")()),
    "a part removed": lambda: Path(B).unlink(),
    "a part added": lambda: put("parts/n/n.yaml", changed(PART, "part: TB3A-103F38", "part: NV-7")),
    "a part whose page takes the name of another's": lambda: put(
        "parts/n/n.yaml", changed(PART, "TB3A-103F38", "tb3a 103f38")
    ),
    "the position edited": edit(PLACE, "limit_k: 1.0", "limit_k: 2.0"),
    "the position removed": lambda: Path(PLACE).unlink(),
    "there and back": in_turn(edit(A, "notes: first", "notes: second"), edit(A, "notes: second", "notes: first")),
    "removed and put back": in_turn(lambda: Path(B).unlink(), lambda: put(B, FILES[B])),
    "figures left out": edit("mkdocs.yml", "records: parts", "records: parts, figures: false"),
    "something said about the catalog": edit("mkdocs.yml", "records: parts", "records: parts, about: Ours"),
    "another address": edit("mkdocs.yml", "demo.example.com", "other.example.com/sub"),
    "another theme option": edit("mkdocs.yml", "font: false", "font: false, features: [navigation.tabs]"),
    "a page of the project edited": edit("docs/method.md", "# Method", "# Our method"),
    "nothing kept": edit("mkdocs.yml", "records: parts", "records: parts, cache: false"),
}


@pytest.mark.usefixtures("project")
@pytest.mark.parametrize("history", HISTORIES)
def test_a_rebuilt_site_is_the_one_built_from_nothing(history: str) -> None:
    HISTORIES[history]()
    built()
    assert differing(tree("site"), clean()) == []


@pytest.mark.usefixtures("project")
def test_what_a_server_has_in_memory_leads_to_the_same_site() -> None:
    for history in ("nothing", "a curve edited", "a part removed", "figures left out", "the position removed"):
        HISTORIES[history]()
        built(serving=True)
        edit(A, "maker: Tarnbrook", "makr: Tarnbrook")()
        with pytest.raises(Abort):
            built(serving=True)
        edit(A, "makr: Tarnbrook", "maker: Tarnbrook")()
    built(serving=True)
    assert differing(tree("site"), clean()) == []


@pytest.mark.usefixtures("project")
def test_only_what_changed_is_made_again() -> None:
    pages = {name: Path("site", name).stat().st_ino for name in tree("site") if name.startswith("parts/")}
    edit(A, "notes: first", "notes: second")()
    built()
    made = [name for name, inode in pages.items() if Path("site", name).stat().st_ino != inode]
    assert sorted(made) == [
        "parts/index.html",
        "parts/tarnbrook-ceramics/tb3a-103f38.csv",
        "parts/tarnbrook-ceramics/tb3a-103f38.html",
        "parts/tarnbrook-ceramics/tb3a-103f38.js",
    ]


@pytest.mark.usefixtures("project")
def test_refused_records_leave_site_and_what_is_kept_usable() -> None:
    old = tree("site")
    edit(A, "maker: Tarnbrook", "makr: Tarnbrook")()
    with pytest.raises(Abort):
        built()
    assert differing(tree("site"), old) == []
    edit(A, "makr: Tarnbrook", "maker: Tarnbrook")()
    built()
    assert differing(tree("site"), old) == []


@pytest.mark.usefixtures("project")
def test_a_file_of_the_site_that_was_changed_or_removed_by_hand_comes_back() -> None:
    old = tree("site")
    page, data = (Path("site/parts/tarnbrook-ceramics", name) for name in ("tb9-103.html", "tb9-103.csv"))
    page.write_text("changed")
    data.unlink()
    Path("site/more.html").write_text("none of ours")
    built()
    assert differing(tree("site"), old) == []


def damaged(data: bytes, how: str) -> bytes:
    middle = len(data) // 2
    return {
        "emptied": b"",
        "cut short": data[:middle],
        "one byte flipped": data[:middle] + bytes([data[middle] ^ 0x55]) + data[middle + 1 :],
        "of other code": data.replace(data[17:81], b"0" * 64, 1),
        "something else": b"\x80\x05cos\nsystem\n(S'false'\ntR." + data[:9],
    }[how]


@pytest.mark.parametrize("how", ["emptied", "cut short", "one byte flipped", "of other code", "something else"])
def test_damaged_files_are_not_used(how: str, project: Path) -> None:
    old = tree("site")
    for file in [path for path in (project / FOLDER).rglob("*") if path.is_file() and path.name != ".gitignore"]:
        file.write_bytes(damaged(file.read_bytes(), how))
    built()
    assert differing(tree("site"), old) == []


@pytest.mark.usefixtures("project")
def test_where_nothing_can_be_kept_a_build_says_so_once(caplog: pytest.LogCaptureFixture) -> None:
    caplog.set_level(logging.INFO)
    old = tree("site")
    shutil.rmtree(FOLDER)
    Path(FOLDER).write_text("in the way")
    built()
    assert differing(tree("site"), old) == []
    assert len([message for message in caplog.messages if "Nothing is kept for the next run" in message]) == 1


def test_what_is_kept_does_not_grow(project: Path) -> None:
    def size() -> int:
        return sum(path.stat().st_size for path in (project / FOLDER).rglob("*"))

    edit(A, "notes: first", "notes: round 0")()
    built()
    first = size()
    for number in range(4):
        edit(A, f"notes: round {number}", f"notes: round {number + 1}")()
        built()
    assert abs(size() - first) < 200


def test_a_build_killed_at_any_moment_leaves_the_old_site_or_the_new_one_whole(project: Path) -> None:
    command = [sys.executable, "-m", "mkdocs", "build", "--quiet"]
    drawn = random.Random(7)
    start_s = time.perf_counter()
    subprocess.run(command, check=True, env=os.environ | {"NO_MKDOCS_2_WARNING": "1"})
    duration_s = time.perf_counter() - start_s
    sites = [tree("site")]
    edit(C, "b_k: 3435", "b_k: 3450")()
    sites.append(clean())
    for _ in range(10):
        process = subprocess.Popen(command, start_new_session=True, stderr=subprocess.DEVNULL)
        # Late moments are the dangerous ones.
        time.sleep(duration_s * drawn.triangular(0.2, 1.05, 0.95))
        if process.poll() is None:
            os.killpg(process.pid, signal.SIGKILL)
        process.wait()
        assert tree("site") in sites
    built()
    assert tree("site") == sites[1]
    assert [path.name for path in project.glob(".site.*")] == []
