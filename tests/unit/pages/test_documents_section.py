"""Documents on the pages: revisions, the figures that rest on each, the decisions that rest on one that was replaced."""

from __future__ import annotations

import hashlib
from pathlib import Path
from typing import Any

from small_site import only_page, read, rows, section, text

from builder.pages.context import Context
from builder.pages.documents_section import document_files
from builder.pages.page import CopiedFile, Page
from builder.pages.part_page import part_page
from builder.pages.position_page import position_page
from builder.pages.site import site

B = {"title": "sheet", "revision": "B", "dated": "2025-01-07"}
C = {"title": "sheet", "revision": "C", "dated": "2026-02-03"}
TABLE = {"title": "table", "revision": "2", "figures": ["limits"]}
HASH = hashlib.sha256(b"x").hexdigest()


def entry(state: str, revision: str, on: str = "2026-01-15") -> dict[str, Any]:
    document = {"title": "sheet", "revision": revision}
    return {"state": state, "on": on, "by": "us", "because": "good enough", "document": document}


def page_of(context: Context, number: str) -> Page:
    return part_page(context.catalog.part(number), context)


def test_each_revision_says_which_figures_rest_on_it_and_what_has_replaced_it(tmp_path: Path) -> None:
    found = only_page(tmp_path, documents=[B, C, TABLE], limits={"max_power_mw": 50}, accuracy=[])
    assert rows(section(found, "documents"), "Documents, and the revision") == [
        ["sheet", "B", "2025-01-07", "", "replaced by C"],
        ["sheet", "C", "2026-02-03", "rated resistance, B-values", ""],
        ["table", "2", "", "limits", ""],
    ]


def test_a_later_document_without_a_revision_replaces_too(tmp_path: Path) -> None:
    found = only_page(tmp_path, documents=[{"title": "sheet", "revision": "B"}, {"title": "sheet"}])
    assert rows(section(found, "documents"), "Documents, and the revision")[0][-1] == "replaced by a later one"


def test_decisions_on_a_replaced_revision_stand_on_the_part_s_page(tmp_path: Path) -> None:
    at = {"alternates": [{"part": "PX-2", "standing": [entry("restricted", "B", "2026-01-20")]}]}
    other = {"part": "PX-2", "documents": [B, C], "standing": [entry("approved", "B")]}
    context = read(tmp_path, {}, other, positions=(at,))
    body = page_of(context, "PX-2").body()
    assert "Decisions that rest on a replaced revision" in body
    assert rows(body, "Compare both revisions") == [
        ["2026-01-15", "the part", "approved", "us", "sheet, revision B, replaced by C"],
        ["2026-01-20", "alternate at board/RT1", "restricted", "us", "sheet, revision B, replaced by C"],
    ]
    assert 'href="../../positions/board-rt1.html"' in body


def test_decisions_on_the_newest_revision_need_no_table(tmp_path: Path) -> None:
    found = only_page(tmp_path, documents=[B, C], standing=[entry("approved", "B"), entry("approved", "C")])
    assert "rest on a replaced revision" not in found


def test_a_decision_at_a_position_is_among_what_the_part_s_page_is_made_from(tmp_path: Path) -> None:
    made = []
    for by in ("us", "them"):
        at = {"alternates": [{"part": "PX-2", "standing": [entry("approved", "B") | {"by": by}]}]}
        context = read(tmp_path, {}, {"part": "PX-2", "documents": [B, C]}, positions=(at,))
        made.append(page_of(context, "PX-2").made_from)
    assert made[0] != made[1]


def test_a_position_says_on_which_revision_each_part_rests(tmp_path: Path) -> None:
    at = {"alternates": [{"part": "PX-2", "standing": [entry("approved", "B")]}, {"part": "PX-3"}]}
    parts = ({"documents": [B, C], "standing": [entry("approved", "C")]}, {"part": "PX-2", "documents": [B, C]})
    context = read(tmp_path, *parts, {"part": "PX-3"}, positions=(at,))
    body = position_page(context.catalog.positions[0], context).body()
    assert [row[-1] for row in rows(body, "Parts of this position")] == [
        "sheet, revision C",
        "sheet, revision B, replaced by C",
        "",
    ]


def test_a_file_is_copied_once_and_linked_from_every_part_that_names_it(tmp_path: Path) -> None:
    (tmp_path / "Sheet C.PDF").write_bytes(b"x")
    filed = {"documents": [C | {"file": "Sheet C.PDF", "sha256": HASH}]}
    context = read(tmp_path, filed, filed | {"part": "PX-2"})
    path = f"documents/{HASH[:16]}/sheet-c.pdf"
    assert list(document_files(context)) == [CopiedFile(path, tmp_path / "Sheet C.PDF")]
    assert [item.path for item in site(context.checked) if isinstance(item, CopiedFile)] == [path]
    for number in ("PX-1", "PX-2"):
        found = section(page_of(context, number).body(), "documents")
        assert f'<a href="../../{path}">Sheet C.PDF</a>' in found


def test_a_markdown_file_is_copied_as_text_and_not_made_a_page(tmp_path: Path) -> None:
    (tmp_path / "index.md").write_bytes(b"x")
    context = read(tmp_path, {"documents": [C | {"file": "index.md", "sha256": HASH}]})
    (copied,) = document_files(context)
    assert copied.path == f"documents/{HASH[:16]}/index-part.txt"


def test_what_documents_are_called_is_text(tmp_path: Path) -> None:
    hostile = {"title": "<b>x</b>", "revision": "<i>", "dated": "2025-01-07"}
    named = {"title": hostile["title"], "revision": hostile["revision"]}
    standing = [entry("approved", "B") | {"document": named}]
    found = only_page(
        tmp_path, documents=[hostile, hostile | {"revision": "<u>", "dated": "2026-01-07"}], standing=standing
    )
    assert not [tag for tag in ("<b>x", "<i>", "<u>") if tag in found]
    assert "<b>x</b>, revision <i>, replaced by <u>" in text(found)


def test_the_site_has_the_file_as_it_lies_beside_its_record(demo_site: Path) -> None:
    (copied,) = (demo_site / "documents").rglob("*.txt")
    (kept,) = (Path(__file__).parents[3] / "parts").rglob("*.txt")
    assert copied.read_bytes() == kept.read_bytes()
