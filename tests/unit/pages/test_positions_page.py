"""The Positions page: every board with its positions by their alternates."""

from __future__ import annotations

from pathlib import Path

from small_site import read, rows, text

from builder.pages.positions_page import positions_page

PARTS = ({}, {"part": "PX-2"}, {"part": "PX-3", "body": {"form": "disc"}})


def test_each_board_shows_its_positions_by_its_alternates_with_the_verdict(tmp_path: Path) -> None:
    places = (
        {"position": "a/RT1", "board": "A", "alternates": [{"part": "PX-2"}, {"part": "PX-3"}]},
        {"position": "a/RT2", "board": "A"},
        {"position": "b/RT1", "board": "B"},
    )
    context = read(tmp_path, *PARTS, positions=places)
    body = positions_page(context).body()
    verdicts = [context.swap(context.catalog.positions[0], part).verdict for part in context.catalog.parts[1:]]
    assert verdicts == ["undecided", "does not fit"]
    assert rows(body, "A: 2 positions, 2 alternates") == [
        ["a/RT1", "PX-1", *verdicts, "±1 K at 0 to 60 °C", "air"],
        ["a/RT2", "PX-1", "–", "–", "±1 K at 0 to 60 °C", "air"],
    ]
    assert rows(body, "B: 1 position, 0 alternates") == [["b/RT1", "PX-1", "±1 K at 0 to 60 °C", "air"]]


def test_names_and_verdicts_lead_to_their_pages(tmp_path: Path) -> None:
    context = read(tmp_path, *PARTS, positions=({"alternates": [{"part": "PX-2"}]},))
    body = positions_page(context).body()
    for address in ("board-rt1.html", "../parts/pellworm/px-1.html", "board-rt1/pellworm/px-2.html"):
        assert f'href="{address}"' in body


def test_boards_of_one_slug_have_anchors_of_their_own(tmp_path: Path) -> None:
    places = ({"position": "a/RT1", "board": "A B"}, {"position": "b/RT1", "board": "A/B"})
    page = positions_page(read(tmp_path, positions=places))
    anchors = [heading.anchor for heading in page.headings]
    assert len(set(anchors)) == 2
    assert all(f'<h2 id="{anchor}">' in page.body() for anchor in anchors)


def test_a_catalog_without_positions_says_so(tmp_path: Path) -> None:
    assert "The catalog has none yet." in text(positions_page(read(tmp_path)).body())
