"""The Changes page: the newest revisions, from the repository that the records stand in."""

import datetime
import re
import shutil
import subprocess
from html import unescape
from pathlib import Path

import pytest
from git_records import ALONE, GitRecords, appended, other_part, part, position
from outside_tool import needed

from builder.crosschecks import checked_catalog
from builder.history import Past
from builder.pages.changes_page import changes_page
from builder.pages.context import Context

APPROVED = (
    "state: approved, on: 2026-02-10, by: components, because: tested, document: {title: data sheet, revision: A}"
)


@pytest.fixture
def kept(tmp_path, monkeypatch):
    needed("git")
    for name, value in ALONE.items():
        monkeypatch.setenv(name, value)
    monkeypatch.chdir(tmp_path)
    return GitRecords(tmp_path)


def page(most=10, records=Path("parts")):
    checked = checked_catalog(records, today=datetime.date(2026, 6, 1))
    return changes_page(Context(checked), Past(records, most))


def told(**options):
    """The text of the page below its lead, a line for each block."""
    body = page(**options).body()
    blocks = re.split(r"</?(?:p|h2|tr|li|caption|summary|div|dl)\b[^>]*>", body)
    lines = [unescape(re.sub(r"<[^>]+>", " ", block)).strip() for block in blocks]
    return [re.sub(r"\s+", " ", line) for line in lines if line][3:]


def test_each_revision_says_what_it_did(kept):
    first = kept.commit("first parts", x=part(), y=other_part(), place=position())
    second = kept.commit("x: B-value", x=part(("3950", "3900")))
    assert told() == [
        "2026-03-03 x: B-value",
        f"Revision {second[:10]} : 1 part and 1 position.",
        f"Parts changed by {second[:10]}",
        "part change curve K at °C band K at °C",
        "Maker X-103 edited −1.280 105 −1.302 105",
        f"Positions changed by {second[:10]}",
        "position change worst K before now limit trips alternates",
        "board/RT1 its parts 1.039 1.046 met as before Y-103: fits → fits with new firmware",
        "What differs",
        "Maker X-103 : b_values[0].b_k: 3950 → 3900",
        "board/RT1 : changed with Maker X-103",
        "2026-03-02 first parts",
        f"Revision {first[:10]} : 2 parts and 1 position.",
        "Parts added: Maker X-103 , Maker Y-103 .",
        "Positions added: board/RT1 .",
    ]


def test_edits_that_move_no_figure_are_named_only(kept):
    kept.commit("first", x=part(), y=other_part(), place=position())
    kept.commit("second", x=appended(part(), APPROVED), place=position(("purpose: air", "purpose: the air")))
    lines = told()
    assert "Parts edited, with the same figures: Maker X-103 ." in lines
    assert "Positions edited, with the same figures: board/RT1 ." not in lines  # its fitted part was approved
    kept.commit("third", place=position(("purpose: air", "purpose: the very air")))
    assert "Positions edited, with the same figures: board/RT1 ." in told()


def test_only_the_newest_revisions_that_touched_the_records_are_shown(kept):
    for b_k in range(3900, 3950, 10):
        kept.commit(f"to {b_k}", x=part(("3950", str(b_k))))
        (kept.root / "README").write_text(str(b_k))
        kept.commit("elsewhere")
    shown = [heading.text for heading in page(most=3).headings]
    assert [text.partition(" ")[2] for text in shown] == ["to 3940", "to 3930", "to 3920"]


def test_what_is_not_committed_is_not_shown(kept):
    kept.commit("first", x=part())
    before = page().body()
    kept.write(x=part(("3950", "3900")), z=other_part("Z-103"))
    assert page().body() == before


def test_text_of_the_history_is_text(kept):
    kept.commit("<script>alert(1)</script>", x=part(("3950", "3950")))
    kept.commit("second", x=part(("maker: Maker", 'maker: "<i>Maker</i>"')))
    body = page().body()
    assert "<script>" not in body and "<i>" not in body
    assert "&lt;script&gt;" in body and "&lt;i&gt;" in body


def test_many_parts_of_one_revision_are_told_by_their_number(kept):
    kept.commit("first", **{f"p{i}": other_part(f"P-{i}") for i in range(70)})
    kept.commit("second", **{f"p{i}": other_part(f"P-{i}", ("3960", "3900")) for i in range(70)})
    lines = told()
    assert sum(bool(re.fullmatch(r"Maker P-\d+ edited.*", line)) for line in lines) == 50
    assert "20 more are not shown." in lines
    assert any(line.endswith("and 50 more.") for line in lines)


def test_a_clone_that_was_cut_off_shows_what_it_can_compare(kept, tmp_path):
    for b_k in (3900, 3910, 3920):
        kept.commit(f"to {b_k}", x=part(("3950", str(b_k))))
    kept.git("clone", "--quiet", "--depth=2", f"file://{tmp_path}", "two")
    kept.git("clone", "--quiet", "--depth=1", f"file://{tmp_path}", "one")
    assert [h.text.partition(" ")[2] for h in page(records=Path("two/parts")).headings] == ["to 3920"]
    none = "This clone has no older revision of the records to compare with."
    assert told(records=Path("one/parts"))[-1] == none


def test_a_revision_that_could_not_be_read_says_so(kept):
    kept.commit("first", x=part(("b_k: 3950", "b_k: 39500")))
    kept.commit("second", x=part())
    assert "Maker X-103 not readable before" in told()
    assert any(line.startswith("parts/x.yaml:6: b_values[0].b_k: 39500 K is outside") for line in told())


def test_without_a_repository_nothing_is_run_and_the_page_says_so(kept, monkeypatch):
    kept.write(x=part())
    shutil.rmtree(".git")
    monkeypatch.setattr(subprocess, "run", lambda *_, **__: pytest.fail("git was run"))
    assert told()[-1] == "These records are not kept in a git repository, so nothing is known of how they came about."


def test_with_none_asked_for_nothing_is_run_and_the_page_says_so(kept, monkeypatch):
    kept.commit("first", x=part())
    monkeypatch.setattr(subprocess, "run", lambda *_, **__: pytest.fail("git was run"))
    assert told(most=0)[-1] == "This site shows no changes: its mkdocs.yml has changes: 0."


def test_what_git_cannot_read_is_told(kept, monkeypatch):
    kept.commit("first", x=part())
    lost = kept.git("rev-parse", "HEAD:parts/x.yaml")
    kept.commit("second", x=part(("3950", "3900")))
    (kept.root / ".git" / "objects" / lost[:2] / lost[2:]).unlink()
    told_of_loss = f"The history cannot be read further: the repository lacks the content {lost[:10]}. git fsck says what is damaged."
    assert told()[-1] == told_of_loss
    monkeypatch.setenv("PATH", "")
    assert told()[-1].startswith("The history cannot be read: git cannot be run: No such file or directory.")


def test_a_page_is_made_anew_only_when_history_or_names_change(kept):
    kept.commit("first", x=part())
    first = page().made_from
    kept.write(x=part(("3950", "3900")))
    assert page().made_from == first
    kept.commit("second")
    assert page().made_from != first
