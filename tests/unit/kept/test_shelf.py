"""Values on a shelf come back as they were put there, or not at all."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from builder.kept import Kept, Shelf
from builder.kept.folder import FOLDER

CODE = "a" * 64


class Trap:
    """What must never be unpickled."""

    def __reduce__(self) -> tuple[object, ...]:
        return os._exit, (3,)


def filled(path: Path) -> Path:
    shelf = Shelf(path, CODE)
    shelf.put("a", [1, 2], {"head": 1})
    shelf.put("b", "text")
    shelf.save()
    return path


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return filled(tmp_path / "shelf")


def test_values_and_heads_come_back(path: Path) -> None:
    shelf = Shelf(path, CODE)
    assert (shelf.head("a"), shelf.get("a"), shelf.get("b"), shelf.get("c")) == ({"head": 1}, [1, 2], "text", None)


def test_what_nobody_asked_for_since_the_last_saving_goes_at_the_next(path: Path) -> None:
    shelf = Shelf(path, CODE)
    shelf.head("a")
    shelf.save()
    again = Shelf(path, CODE)
    assert (again.get("a"), again.get("b")) == ([1, 2], None)


def test_nothing_is_written_where_nothing_changes(path: Path) -> None:
    before = path.stat()
    shelf = Shelf(path, CODE)
    shelf.get("a"), shelf.get("b")
    shelf.save()
    assert path.stat().st_mtime_ns == before.st_mtime_ns


@pytest.mark.parametrize("size", range(0, 400, 25))
def test_a_file_cut_short_gives_less_and_nothing_wrong(path: Path, size: int) -> None:
    path.write_bytes(path.read_bytes()[:size])
    shelf = Shelf(path, CODE)
    assert shelf.get("a") in (None, [1, 2])
    assert shelf.get("b") in (None, "text")


def test_every_flipped_byte_is_noticed(path: Path) -> None:
    data = path.read_bytes()
    for place in range(len(data)):
        path.write_bytes(data[:place] + bytes([data[place] ^ 1]) + data[place + 1 :])
        shelf = Shelf(path, CODE)
        assert None in (shelf.get("a"), shelf.get("b")), place


def test_a_file_of_other_code_is_not_used(path: Path) -> None:
    assert Shelf(path, "b" * 64).get("a") is None


def test_a_value_is_compared_before_it_is_unpickled(tmp_path: Path) -> None:
    shelf = Shelf(tmp_path / "shelf", CODE)
    shelf.put("trap", Trap())
    shelf.save()
    data = (tmp_path / "shelf").read_bytes()
    (tmp_path / "shelf").write_bytes(data[:-1] + b"!")
    assert Shelf(tmp_path / "shelf", CODE).get("trap") is None


def test_two_that_save_at_the_same_time_leave_one_whole_file(path: Path) -> None:
    one, other = Shelf(path, CODE), Shelf(path, CODE)
    one.put("one", 1)
    other.put("other", 2)
    one.save()
    other.save()
    assert Shelf(path, CODE).get("other") == 2
    assert [file.name for file in path.parent.iterdir()] == ["shelf"]


def test_without_a_file_values_last_for_the_run(tmp_path: Path) -> None:
    kept = Kept()
    kept.shelf("x").put("a", 1)
    kept.save()
    assert (kept.shelf("x").get("a"), kept.trouble, list(tmp_path.iterdir())) == (1, "", [])


def test_git_ignores_the_folder(tmp_path: Path) -> None:
    kept = Kept.beside(tmp_path / "parts").below("site")
    kept.shelf("x").put("a", 1)
    kept.save()
    assert (tmp_path / FOLDER / ".gitignore").read_text("utf-8") == "*\n"
    assert (tmp_path / FOLDER / "parts" / "site" / "x").exists()


def test_that_nothing_can_be_written_is_told_in_a_sentence(tmp_path: Path) -> None:
    (tmp_path / FOLDER).write_text("in the way")
    kept = Kept.beside(tmp_path / "parts")
    kept.shelf("x").put("a", 1)
    kept.save()
    assert kept.trouble == f"Nothing is kept for the next run: {tmp_path / FOLDER}: File exists."
    assert kept.shelf("x").get("a") == 1


def test_a_value_for_later_is_the_one_of_now(path: Path) -> None:
    shelf = Shelf(path, CODE)
    later, missing = shelf.later("a"), shelf.later("c")
    shelf.put("a", "another")
    shelf.save()
    assert (later(), shelf.get("a"), missing()) == ([1, 2], "another", None)
