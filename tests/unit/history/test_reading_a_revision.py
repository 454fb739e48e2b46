"""The records as they were at a revision, in every kind of repository and against every kind of trouble."""

import shutil
import stat
from pathlib import Path

import pytest
from git_records import GitRecords, other_part, part, position

from builder.history import HistoryUnread, Repository, present_state, state_at

TABLE = "t_c,r_ohm\n0,32000\n25,10000\n50,4000\n"
WITH_TABLE = part(("shape: plain", "r_t_table: {file: table.csv}\nshape: plain"))


def states(records: Path = Path("parts"), revision: str = "HEAD"):
    repository, now = Repository(records), present_state(records)
    return state_at(repository, repository.commit(revision), now), now


def names(state):
    return [getattr(record, "name", None) or record.position.position for record in state.records]


def refusal(records: Path = Path("parts"), revision: str = "HEAD") -> str:
    with pytest.raises(HistoryUnread) as refused:
        states(records, revision)
    return str(refused.value)


def test_records_are_as_they_were(kept):
    kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(x=part(("3950", "3900")), y=None, z=other_part("Z-103"))
    before, now = states()
    assert names(before) == ["Maker X-103", "Maker Y-103", "board/RT1"]
    assert names(now) == ["Maker X-103", "Maker Z-103", "board/RT1"]
    assert [state.catalog.part("X-103").part.b_values[0].b_k for state in (before, now)] == [3950, 3900]


def test_what_is_the_same_is_not_read_again(kept):
    kept.commit("one", x=part(), y=other_part())
    kept.write(y=other_part("Y-103", ("3960", "3970")))
    before, now = states()
    assert before.catalog.part("X-103") is now.catalog.part("X-103")
    assert before.catalog.part("Y-103") is not now.catalog.part("Y-103")


def test_a_table_beside_an_unchanged_record_is_as_it_was(kept):
    (kept.records / "table.csv").write_text(TABLE)
    kept.commit("one", x=WITH_TABLE)
    (kept.records / "table.csv").write_text(TABLE.replace("4000", "4100"))
    before, now = states()
    assert [state.catalog.part("X-103").table.r_ohm[-1] for state in (before, now)] == [4000, 4100]
    assert before.catalog.part("X-103").table.file == "parts/table.csv"


def test_line_ends_that_git_changes_are_no_change(kept):
    kept.git("config", "core.autocrlf", "true")
    kept.commit("one", x=part())
    (kept.records / "x.yaml").write_bytes(part().replace("\n", "\r\n").encode())
    before, now = states()
    assert before.catalog.part("X-103") is now.catalog.part("X-103")


def test_sha_256_repositories_are_read(kept):
    shutil.rmtree(".git")
    kept.git("init", "--quiet", "--object-format=sha256", "--initial-branch=main")
    kept.commit("one", x=part(), y=other_part())
    kept.write(y=None)
    before, now = states()
    assert before.catalog.part("X-103") is now.catalog.part("X-103")
    assert names(before) == ["Maker X-103", "Maker Y-103"]


@pytest.mark.parametrize("name", ["two words/x y", "Ωhm/ä", "line\nbreak", "-x", ":(top)x", "[a]*?", "a\\b"])
def test_any_name_of_a_file_is_read(kept, name):
    kept.commit("one", **{name: part()})
    kept.write(**{name: part(("3950", "3900"))})
    before, _ = states()
    assert before.catalog.part("X-103").part.b_values[0].b_k == 3950
    assert before.catalog.part("X-103").source.below == f"{name}.yaml"


@pytest.mark.usefixtures("kept")
def test_a_folder_of_any_name_is_read(tmp_path):
    deep = GitRecords(tmp_path / "other", "a b/ä:(x)*/parts")
    deep.commit("one", x=part())
    deep.write(x=None)
    assert names(states(deep.records)[0]) == ["Maker X-103"]


@pytest.mark.usefixtures("kept")
def test_the_root_of_a_repository_can_be_the_folder(tmp_path):
    root = GitRecords(tmp_path / "other", ".")
    root.commit("one", x=part())
    root.write(x=None)
    assert names(states(tmp_path / "other")[0]) == ["Maker X-103"]


def test_links_within_the_folder_are_followed_and_others_left_out(kept):
    (kept.root / "outside.yaml").write_text(other_part("Z-103"))
    kept.write(**{"real/x": part()})
    (kept.records / "link.yaml").symlink_to("real/x.yaml")
    (kept.records / "out.yaml").symlink_to("../outside.yaml")
    (kept.records / "loop.yaml").symlink_to("loop.yaml")
    kept.commit("one")
    shutil.rmtree(kept.records)
    kept.write(y=other_part())
    before, _ = states()
    assert [record.source.below for record in before.records] == ["link.yaml", "real/x.yaml"]


def test_records_of_a_submodule_count_as_they_are(tmp_path, kept):
    vendor = GitRecords(tmp_path / "vendor", ".")
    vendor.commit("one", z=other_part("Z-103"))
    kept.commit("one", x=part())
    kept.git(
        "-c", "protocol.file.allow=always", "submodule", "--quiet", "add", str(tmp_path / "vendor"), "parts/vendor"
    )
    kept.commit("two")
    (kept.records / "vendor" / "z.yaml").write_text(other_part("Z-103", ("3960", "3970")))
    before, now = states()
    assert before.catalog.part("Z-103") is now.catalog.part("Z-103")


def test_records_that_cannot_be_read_are_told_where_they_stood(kept):
    kept.commit("one", x=part(("b_k: 3950", "b_k: 39500")), y=other_part())
    kept.write(x=part())
    before, _ = states()
    assert names(before) == ["Maker Y-103"]
    assert [str(problem) for problem in before.unread] == [
        "parts/x.yaml:6: b_values[0].b_k: 39500 K is outside 1000 to 10000 K. Check the decimal point; data sheets print B in kelvin."
    ]


def test_a_shallow_clone_is_read_and_says_what_it_lacks(tmp_path, kept):
    first = kept.commit("one", x=part())
    kept.commit("two", x=part(("3950", "3900")))
    kept.git("clone", "--quiet", "--depth=1", f"file://{tmp_path}", "clone")
    before, _ = states(tmp_path / "clone" / "parts")
    assert before.catalog.part("X-103").part.b_values[0].b_k == 3900
    told = "{} is no revision of this repository. The history of this clone is not deep enough, or the name is wrong: git fetch --deepen=100"
    assert refusal(tmp_path / "clone" / "parts", "HEAD~1") == told.format("HEAD~1")
    assert refusal(tmp_path / "clone" / "parts", first) == told.format(first)


@pytest.mark.parametrize("revision", ["nowhere", "", "--all", "HEAD:parts", "0" * 40, "-", "HEAD~5", "a\nb"])
def test_a_revision_that_does_not_exist_is_refused(kept, revision):
    kept.commit("one", x=part())
    shown = revision.replace("\n", "\\n") or "an empty text"
    assert (
        refusal(revision=revision)
        == f"{shown} is no revision of this repository. git log --oneline shows the revisions."
    )


def test_a_revision_without_the_folder_is_refused(kept):
    (kept.root / "README").write_text("begun")
    kept.commit("one")
    kept.commit("two", x=part())
    assert (
        refusal(revision="HEAD~1") == "parts is not in revision HEAD~1. Name a later one, or commit the folder first."
    )


@pytest.mark.usefixtures("kept")
def test_a_repository_without_a_commit_is_refused():
    assert refusal() == "HEAD is no revision of this repository. It has no commit yet: make one with the records."


@pytest.mark.usefixtures("kept")
def test_a_folder_without_repository_is_refused():
    shutil.rmtree(".git")
    assert refusal() == "parts is not in a git repository. Run this where the records are kept under git."


@pytest.mark.usefixtures("kept")
def test_without_git_it_is_refused(monkeypatch):
    monkeypatch.setenv("PATH", "")
    assert refusal() == "git cannot be run: No such file or directory. Install git, and have it on the PATH."


def test_a_repository_of_somebody_else_is_refused(kept, monkeypatch):
    kept.commit("one", x=part())
    monkeypatch.setenv("GIT_TEST_ASSUME_DIFFERENT_OWNER", "1")
    assert refusal() == (
        "git does not trust the repository of parts, which belongs to somebody else. If you do trust it: "
        f"git config --global --add safe.directory {kept.root}"
    )


def objects(folder: Path) -> list[Path]:
    return [path for path in sorted((folder / ".git" / "objects").glob("??/*")) if path.is_file()]


def test_a_commit_that_is_checked_out_and_missing_is_told(kept):
    kept.commit("one", x=part())
    for file in objects(kept.root):
        file.unlink()
    assert (
        refusal()
        == "HEAD is no revision of this repository. The commit checked out is missing; git fsck says what is damaged."
    )


def test_a_content_that_is_missing_is_told(kept):
    kept.commit("one", x=part())
    lost = kept.git("rev-parse", "HEAD:parts/x.yaml")
    kept.write(x=None)
    (kept.root / ".git" / "objects" / lost[:2] / lost[2:]).unlink()
    assert refusal() == f"the repository lacks the content {lost[:10]}. git fsck says what is damaged."


def test_every_damage_of_an_object_is_told_and_nothing_else_happens(kept):
    kept.commit("one", x=part())
    kept.write(x=None)
    for path in objects(kept.root):
        content = path.read_bytes()
        path.chmod(path.stat().st_mode | stat.S_IWUSR)
        for damage in (b"", b"nonsense", content[: len(content) // 2]):
            path.write_bytes(damage)
            assert "git" in refusal()
        path.write_bytes(content)
    assert names(states()[0]) == ["Maker X-103"]


def test_reading_writes_nothing_and_runs_no_hook(kept, tmp_path):
    kept.commit("one", x=part(), y=other_part())
    kept.commit("two", x=None, z=part(("X-103", "X-104")))
    program = tmp_path / "program"
    program.write_text(f"#!/bin/sh\ntouch {tmp_path}/ran\n")
    program.chmod(0o755)
    kept.git("config", "core.fsmonitor", str(program))
    kept.git("config", "core.pager", str(program))
    kept.git("config", "diff.external", str(program))
    for hook in ("post-checkout", "post-index-change", "reference-transaction", "pre-commit"):
        shutil.copy(program, kept.root / ".git" / "hooks" / hook)
    kept.write(y=None)
    before = _listing(kept.root)
    states(revision="HEAD~1")
    assert _listing(kept.root) == before
    assert not (tmp_path / "ran").exists()


def _listing(root: Path) -> dict[str, tuple[int, bytes]]:
    paths = [path for path in root.rglob("*") if path.is_file()]
    return {str(path): (path.stat().st_mtime_ns, path.read_bytes()) for path in paths}


def test_a_hook_s_surroundings_lead_nowhere_else(kept, tmp_path, monkeypatch):
    kept.commit("one", x=part())
    GitRecords(tmp_path / "other").commit("other", z=other_part("Z-103"))
    monkeypatch.setenv("GIT_DIR", str(tmp_path / "other" / ".git"))
    monkeypatch.setenv("GIT_WORK_TREE", str(tmp_path / "other"))
    kept_names = names(states()[0])
    assert kept_names == ["Maker X-103"]


def test_replaced_commits_show_the_history_that_was_made(kept):
    kept.commit("one", x=part())
    first = kept.commit("two", x=part(("3950", "3900")))
    other = kept.commit("three", x=part(("3950", "4000")))
    kept.git("replace", first, other)
    before, _ = states(revision="HEAD~1")
    assert before.catalog.part("X-103").part.b_values[0].b_k == 3900


@pytest.mark.usefixtures("kept")
def test_the_user_s_language_changes_no_message(monkeypatch):
    monkeypatch.setenv("LANGUAGE", "de")
    monkeypatch.setenv("LC_ALL", "de_DE.UTF-8")
    shutil.rmtree(".git")
    assert refusal().startswith("parts is not in a git repository.")
