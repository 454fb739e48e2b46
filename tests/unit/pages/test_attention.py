"""What the home page says of decisions that somebody must look at."""

from __future__ import annotations

import re
from pathlib import Path
from typing import Any

import pytest

from builder.pages.attention_section import attention_table
from tests.unit.pages.small_site import SHEET, read
from tests.unit.pages.test_ledger_page import DOCUMENTS, entry


def told(
    folder: Path, standing: list[dict[str, Any]], alternate: list[dict[str, Any]] | None = None
) -> list[list[str]]:
    """The table's rows, of a part that is fitted, and its alternate."""
    second = {"part": "PX-2", "documents": DOCUMENTS}
    position = {"alternates": [{"part": "PX-2", "standing": alternate or []}]}
    context = read(folder, {"standing": standing, "documents": DOCUMENTS}, second, positions=(position,))
    found = re.findall(r"<tr><th scope=\"row\">(.*?)</th><td>(.*?)</td><td>(.*?)</td></tr>", attention_table(context))
    return [[re.sub(r'<a href="([^"]*)">(.*?)</a>', r"\2 -> \1", cell) for cell in row] for row in found]


def test_nothing_is_said_where_there_is_nothing(tmp_path: Path) -> None:
    assert told(tmp_path, [entry("approved", "2026-05-05")], [entry("proposed", "2026-05-05")]) == []


def test_reviews_overdue_and_due_soon_lead_to_the_ledger(tmp_path: Path) -> None:
    approved = entry("approved", "2026-01-05", document=SHEET)
    assert told(tmp_path, [approved | {"review_due": "2026-05-31"}]) == [
        ["reviews overdue -> ledger.html#review=overdue", "1", "PX-1 -> ledger.html#pellworm_px-1_1"]
    ]
    assert told(tmp_path, [approved | {"review_due": "2026-06-01"}]) == [
        ["reviews due within 60 days -> ledger.html#review=soon", "1", "PX-1 -> ledger.html#pellworm_px-1_1"]
    ]


def test_an_alternate_is_undecided_for_long_after_ninety_days(tmp_path: Path) -> None:
    """Ninety days before 2026-06-01 is 2026-03-03."""
    assert told(tmp_path, [entry("approved", "2026-01-05")], [entry("proposed", "2026-03-03")]) == []
    ((what, count, which),) = told(tmp_path, [entry("approved", "2026-01-05")], [entry("proposed", "2026-03-02")])
    filters = "about=alternate&amp;state=proposed&amp;to=2026-03-02&amp;holds=yes"
    assert what == f"alternates proposed and undecided for over 90 days -> ledger.html#{filters}"
    assert (count, which) == ("1", "PX-2 at board/RT1 -> ledger.html#board-rt1__pellworm_px-2_1")


def test_parts_that_are_fitted_though_withdrawn_are_named(tmp_path: Path) -> None:
    ((what, count, which),) = told(tmp_path, [entry("withdrawn", "2026-01-05")])
    assert what == "parts fitted that are withdrawn -> ledger.html#state=withdrawn&amp;holds=yes"
    assert (count, which) == ("1", "PX-1 at board/RT1 -> positions/board-rt1.html")


@pytest.mark.parametrize("standing", [[], [entry("proposed", "2026-05-30")]])
def test_parts_that_are_fitted_and_nobody_approved_are_named(tmp_path: Path, standing: list[dict[str, Any]]) -> None:
    assert told(tmp_path, standing) == [
        ["parts fitted that nobody approved -> positions/index.html", "1",
         "PX-1 at board/RT1 -> positions/board-rt1.html"],
    ]  # fmt: skip
