"""Sites of a few records, made without the site generator."""

from __future__ import annotations

import datetime
import json
import re
from html import unescape
from pathlib import Path
from typing import Any

from builder.crosschecks import checked_catalog
from builder.pages.context import Context
from builder.pages.page import Page
from builder.pages.part_page import part_page
from builder.pages.position_page import position_page

TODAY = datetime.date(2026, 6, 1)
SHEET = {"title": "sheet", "revision": "C"}  # what approvals in these records rest on
LEAST = {
    "part": "PX-1",
    "maker": "Pellworm",
    "body": {"form": "leaded"},
    "rated": {"resistance_ohm": 1e4},
    "b_values": [{"between_c": [25, 85], "b_k": 3435}],
}
LEAST_POSITION = {
    "position": "board/RT1",
    "board": "Board",
    "purpose": "air",
    "range_c": [0, 60],
    "limit_k": 1,
    "circuit": {"thermistor": "low side", "fixed": {"resistance_ohm": 1e4}, "supply_v": 3.3},
    "adc": {"bits": 12},
    "firmware": {"method": "curve"},
    "fitted": "PX-1",
}


def read(folder: Path, *parts: dict[str, Any], positions: tuple[dict[str, Any], ...] = (), about: str = "") -> Context:
    """The records, each differing from the least one in the fields given, checked and without errors."""
    changes = [*((LEAST, part) for part in parts or ({},)), *((LEAST_POSITION, place) for place in positions)]
    for i, (least, change) in enumerate(changes):
        # JSON is YAML: nothing needs a quoting of its own.
        (folder / f"{i}.yaml").write_text(json.dumps(least | change), "utf-8")
    checked = checked_catalog(folder, today=TODAY)
    assert not [p for p in checked.problems if p.severity == "error"], checked.problems
    return Context(checked, about, figures=True)


def only_page(folder: Path, **fields: Any) -> str:
    """The body of the page of one part."""
    context = read(folder, fields)
    return part_page(context.catalog.parts[0], context).body()


def only_position(folder: Path, **fields: Any) -> str:
    """The body of the page of one position."""
    context = read(folder, positions=(fields,))
    return position_page(context.catalog.positions[0], context).body()


def section(body: str, anchor: str) -> str:
    """A page's HTML from one h2 to the next."""
    _, found, rest = body.partition(f'<h2 id="{anchor}">')
    assert found, f"there is no section {anchor}"
    return rest.partition("<h2")[0]


def text(html: str) -> str:
    """What a reader sees: without tags, a space between elements."""
    return " ".join(unescape(re.sub("<[^>]*>", " ", html)).split())


def fact(html: str, name: str) -> str:
    """The value beside a name."""
    found = re.search(rf"<dt>{re.escape(name)}</dt><dd>(.*?)</dd>", html)
    assert found, f"{name} is not there"
    return text(found[1])


def rows(html: str, caption: str) -> list[list[str]]:
    """The cells of the table with a caption."""
    found = re.search(rf"<caption>{re.escape(caption)}.*?<tbody>(.*?)</tbody>", html, re.DOTALL)
    assert found, f"there is no table {caption}"
    return [
        [text(cell) for cell in re.findall(r"<t[hd].*?>(.*?)</t[hd]>", row)] for row in found[1].split("</tr>") if row
    ]


def pages_of(items: list[Any]) -> list[Page]:
    """The pages among what a site yields."""
    return [item for item in items if isinstance(item, Page)]
