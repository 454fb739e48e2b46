"""A site changes all at once, and what a build that ended early has left behind is put right."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

from builder.kept import SiteFolder, digest, site_folder


@pytest.fixture(params=[True, False], ids=["exchanged at once", "renamed twice"])
def place(request: pytest.FixtureRequest, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A site, on a system that can exchange two folders and on one that cannot."""
    if not request.param:
        monkeypatch.setattr(site_folder, "_exchange", lambda *_: False)
    site = tmp_path / "site"
    (site / "parts").mkdir(parents=True)
    (site / "index.html").write_text("old")
    (site / "parts" / "a.html").write_text("kept")
    (site / ".nojekyll").write_text("")
    return site


def begun(place: Path) -> SiteFolder:
    folder = SiteFolder(place)
    folder.begin()
    return folder


def names(folder: Path) -> list[str]:
    return sorted(path.relative_to(folder).as_posix() for path in folder.rglob("*") if path.is_file())


def ended_pid() -> int:
    process = subprocess.Popen([sys.executable, "-c", ""])
    process.wait()
    return process.pid


def test_the_new_site_takes_the_place_of_the_old_one(place: Path) -> None:
    folder = begun(place)
    (folder.building / "index.html").write_text("new")
    assert folder.take("parts/a.html", digest(b"kept"))
    assert (place / "index.html").read_text() == "old"
    folder.finish()
    assert names(place) == [".nojekyll", "index.html", "parts/a.html"]
    assert (place / "index.html").read_text() == "new"
    assert [path.name for path in place.parent.iterdir()] == ["site"]
    assert (place / "parts" / "a.html").stat().st_nlink == 1


def test_a_first_site_needs_no_old_one(tmp_path: Path) -> None:
    folder = begun(tmp_path / "site")
    (folder.building / "index.html").write_text("new")
    folder.finish()
    assert names(tmp_path) == ["site/index.html"]


def test_a_file_that_is_not_what_it_was_is_not_taken_over(place: Path) -> None:
    folder = begun(place)
    assert not folder.take("parts/a.html", digest(b"other"))
    assert not folder.take("parts/b.html", digest(b"other"))
    assert names(folder.building) == []


def test_where_there_are_no_hard_links_the_content_is_written(place: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(*_: object) -> None:
        raise OSError

    monkeypatch.setattr(os, "link", refuse)
    folder = begun(place)
    assert folder.take("parts/a.html", digest(b"kept"))
    assert (folder.building / "parts" / "a.html").read_text() == "kept"


def test_giving_up_leaves_the_site_alone(place: Path) -> None:
    folder = begun(place)
    (folder.building / "index.html").write_text("new")
    folder.give_up()
    assert (place / "index.html").read_text() == "old"
    assert [path.name for path in place.parent.iterdir()] == ["site"]


def test_what_a_killed_build_had_built_is_removed(place: Path) -> None:
    left = place.with_name(f".site.{ended_pid()}.building")
    left.mkdir()
    begun(place).give_up()
    assert [path.name for path in place.parent.iterdir()] == ["site"]


def test_what_a_running_build_builds_is_left_alone(place: Path) -> None:
    other = place.with_name(f".site.{os.getppid()}.building")
    other.mkdir()
    begun(place).give_up()
    assert other.exists()


def test_a_site_set_aside_by_a_killed_build_comes_back(place: Path) -> None:
    place.rename(place.with_name(f".site.{ended_pid()}.replaced"))
    begun(place).give_up()
    assert (place / "index.html").read_text() == "old"
    assert [path.name for path in place.parent.iterdir()] == ["site"]
