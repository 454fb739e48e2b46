"""The Ledger page, its CSV and its feed."""

from __future__ import annotations

import csv
import datetime
import io
import re
import uuid
import xml.etree.ElementTree as ET
from pathlib import Path
from typing import Any

from builder.pages.context import Context
from builder.pages.ledger import ledger_table
from builder.pages.ledger_feed import ledger_feed
from builder.pages.ledger_page import entry_anchor, ledger_csv, ledger_page
from tests.unit.pages.small_site import SHEET, read

ATOM = "{http://www.w3.org/2005/Atom}"
SITE = "https://ntc.example.com/site/"
DOCUMENTS = [{"title": "sheet", "revision": "C"}]


def entry(state: str, on: str, **fields: Any) -> dict[str, Any]:
    named = {"document": SHEET} if state in ("approved", "restricted") else {}
    return {"state": state, "on": on, "by": "sensors", "because": f"{state} <b>& why"} | named | fields


PROPOSED, APPROVED = entry("proposed", "2026-01-05"), entry("approved", "2026-02-05", review_due="2026-07-01")
AT_BOARD = entry("proposed", "2026-01-20", by="purchasing")


def of(folder: Path, *standing: dict[str, Any], at_board: tuple[dict[str, Any], ...] = (AT_BOARD,)) -> Context:
    """A part with these entries, and the same as an alternate at a position."""
    second = {"part": "PX-2", "documents": DOCUMENTS}
    position = {"alternates": [{"part": "PX-2", "standing": list(at_board)}]}
    return read(folder, {"standing": list(standing), "documents": DOCUMENTS}, second, positions=(position,))


def rows(body: str) -> list[list[str]]:
    found = re.findall(r"<tr id=.*?</tr>", body, re.DOTALL)
    return [
        [re.sub("<.*?>", "", cell) for cell in re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", row, re.DOTALL)]
        for row in found
    ]


def test_every_entry_is_a_row_the_newest_first(tmp_path: Path) -> None:
    assert rows(ledger_page(of(tmp_path, PROPOSED, APPROVED)).body()) == [
        ["2026-02-05", "PX-1 Pellworm", "everywhere", "approved", "sensors", "approved &lt;b&gt;&amp; why",
         "sheet, revision C", "", "2026-07-01"],
        ["2026-01-20", "PX-2 Pellworm", "board/RT1", "proposed", "purchasing", "proposed &lt;b&gt;&amp; why", "", "", ""],
        ["2026-01-05", "PX-1 Pellworm", "everywhere", "proposed", "sensors", "proposed &lt;b&gt;&amp; why", "", "", ""],
    ]  # fmt: skip


def test_each_row_can_be_linked_and_keeps_its_address_when_others_are_appended(tmp_path: Path) -> None:
    (tmp_path / "a").mkdir()
    (tmp_path / "b").mkdir()
    few, more = of(tmp_path / "a", PROPOSED), of(tmp_path / "b", PROPOSED, APPROVED)
    anchors = [entry_anchor(e, few) for e in few.entries]
    assert anchors == ["pellworm_px-1_1", "board-rt1__pellworm_px-2_1"]
    assert {*anchors} < {entry_anchor(e, more) for e in more.entries}
    body = ledger_page(few).body()
    assert all(f'id="{anchor}"' in body and f'href="#{anchor}"' in body for anchor in anchors)


def test_only_the_entry_that_holds_has_a_review_open(tmp_path: Path) -> None:
    earlier = entry("approved", "2026-01-06", review_due="2026-05-01")
    body = ledger_page(of(tmp_path, earlier, APPROVED)).body()
    assert re.findall(r'data-review="(\w+)"', body) == ["soon"]


def test_a_review_is_overdue_from_the_day_after_and_soon_for_sixty_days(tmp_path: Path) -> None:
    for due, kind in (
        ("2026-05-31", "overdue"),
        ("2026-06-01", "soon"),
        ("2026-07-31", "soon"),
        ("2026-08-01", "open"),
    ):
        body = ledger_page(of(tmp_path, APPROVED | {"review_due": due})).body()
        assert re.findall(r'data-review="(\w+)"', body) == [kind], due


def test_an_empty_ledger_says_so_and_has_its_files(tmp_path: Path) -> None:
    context = of(tmp_path, at_board=())
    assert "Nobody has decided anything yet." in ledger_page(context).body()
    assert len(ledger_csv(context).content().splitlines()) == 1
    assert ET.fromstring(ledger_feed(context, SITE).content()).find(f"{ATOM}updated") is not None


def test_the_csv_has_every_column_and_the_oldest_entry_first(tmp_path: Path) -> None:
    table = list(csv.DictReader(io.StringIO(ledger_csv(of(tmp_path, PROPOSED, APPROVED)).content())))
    assert [row["on"] for row in table] == ["2026-01-05", "2026-01-20", "2026-02-05"]
    assert table[2] == {
        "on": "2026-02-05", "state": "approved", "part": "PX-1", "maker": "Pellworm", "own_number": "", "position": "",
        "board": "", "by": "sensors", "because": "approved <b>& why", "document": "sheet", "revision": "C",
        "only_for": "", "review_due": "2026-07-01", "holds": "yes",
    }  # fmt: skip
    assert (table[1]["position"], table[1]["board"], table[0]["holds"]) == ("board/RT1", "Board", "no")


def feed(context: Context, site_url: str = SITE) -> ET.Element:
    return ET.fromstring(ledger_feed(context, site_url).content())


def text(element: ET.Element, name: str) -> str:
    (found,) = element.findall(f"{ATOM}{name}")
    return found.text or ""


def test_the_feed_has_what_rfc_4287_requires(tmp_path: Path) -> None:
    """Sections 4.1.1 and 4.1.2: one id, title and updated each; an author; an alternate link; dates by RFC 3339."""
    top = feed(of(tmp_path, PROPOSED, APPROVED))
    assert top.tag == f"{ATOM}feed"
    entries = top.findall(f"{ATOM}entry")
    assert len(entries) == 3
    for element in (top, *entries):
        assert text(element, "id") == uuid.UUID(text(element, "id").removeprefix("urn:uuid:")).urn
        assert text(element, "title")
        assert datetime.datetime.fromisoformat(text(element, "updated")).tzinfo is not None
        assert element.find(f"{ATOM}author/{ATOM}name") is not None
        alternates = [link for link in element.findall(f"{ATOM}link") if link.get("rel") == "alternate"]
        assert len(alternates) == 1 and (alternates[0].get("href") or "").startswith(f"{SITE}ledger.html")
    assert [link.get("href") for link in top.findall(f"{ATOM}link") if link.get("rel") == "self"] == [
        f"{SITE}ledger.xml"
    ]
    assert len({text(element, "id") for element in (top, *entries)}) == 4


def test_the_feed_says_what_was_decided_newest_first(tmp_path: Path) -> None:
    top = feed(of(tmp_path, PROPOSED, APPROVED))
    first, second, _ = top.findall(f"{ATOM}entry")
    assert (text(first, "title"), text(second, "title")) == ("PX-1 approved", "PX-2 proposed at board/RT1")
    assert text(first, "summary") == "approved <b>& why · document: sheet, revision C"
    assert text(top, "updated") == text(first, "updated") == "2026-02-05T00:00:00Z"


def test_ids_of_the_feed_stay_when_entries_are_appended(tmp_path: Path) -> None:
    (tmp_path / "a").mkdir()
    (tmp_path / "b").mkdir()
    few, more = feed(of(tmp_path / "a", PROPOSED)), feed(of(tmp_path / "b", PROPOSED, APPROVED))
    ids = [{text(e, "id") for e in top.findall(f"{ATOM}entry")} for top in (few, more)]
    assert ids[0] < ids[1]
    assert text(few, "id") == text(more, "id")


def test_the_feed_has_the_newest_hundred_entries(tmp_path: Path) -> None:
    day = datetime.date(2025, 1, 1)
    many = [entry("proposed", (day + datetime.timedelta(days=i)).isoformat()) for i in range(105)]
    top = feed(of(tmp_path, *many, at_board=()))
    found = [text(e, "updated")[:10] for e in top.findall(f"{ATOM}entry")]
    assert (len(found), found[0], found[-1]) == (100, "2025-04-15", "2025-01-06")


def test_without_the_site_s_address_the_feed_s_links_are_relative(tmp_path: Path) -> None:
    (first, *_) = feed(of(tmp_path, PROPOSED), "").findall(f"{ATOM}entry")
    assert [link.get("href") for link in first.findall(f"{ATOM}link")] == ["ledger.html#board-rt1__pellworm_px-2_1"]


def test_ledgers_of_parts_name_the_document(tmp_path: Path) -> None:
    (part, _) = of(tmp_path, APPROVED).catalog.parts
    assert "<td>sheet, revision C</td>" in ledger_table(part.part.standing, "Standings")
