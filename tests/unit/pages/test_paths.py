"""Every record has a path of its own that works on every file system."""

from __future__ import annotations

import re
from pathlib import Path

from small_site import read

from builder.pages.paths import relative


def paths_of(folder: Path, *numbers: str, maker: str = "Pellworm") -> dict[str, str]:
    context = read(folder, *({"part": number, "maker": maker} for number in numbers))
    return {record.part.part: context.paths.part(record) for record in context.catalog.parts}


def test_a_part_stands_below_its_maker(tmp_path: Path) -> None:
    assert paths_of(tmp_path, "PX-1") == {"PX-1": "parts/pellworm/px-1.html"}


def test_awkward_numbers_have_distinct_plain_paths(tmp_path: Path) -> None:
    numbers = ("A/B", "A-B", "a b", "Größe-1", "50%", "index", "Ω", "..", "../../x", "A&B", "10k?#", "con trail.")
    paths = paths_of(tmp_path, *numbers)
    assert len({path.casefold() for path in paths.values()}) == len(numbers)
    assert all(re.fullmatch(r"parts/pellworm/[a-z0-9][a-z0-9.-]*\.html", path) for path in paths.values()), paths
    assert "parts/pellworm/index.html" not in paths.values()


def test_a_path_depends_on_no_record_that_does_not_share_it(tmp_path: Path) -> None:
    alone = paths_of(tmp_path, "A/B", "A-B")
    assert alone.items() < paths_of(tmp_path, "A/B", "A-B", "C").items()


def test_one_number_of_two_makers_is_two_pages(tmp_path: Path) -> None:
    context = read(tmp_path, {"maker": "Pellworm"}, {"maker": "Pell-Worm"}, {"maker": "pell worm"})
    assert len({context.paths.part(record) for record in context.catalog.parts}) == 3
    assert len({context.paths.maker(record.part.maker) for record in context.catalog.parts}) == 3


def test_a_csv_stands_beside_its_page(tmp_path: Path) -> None:
    context = read(tmp_path)
    assert context.paths.part_csv(context.catalog.parts[0]) == "parts/pellworm/px-1.csv"


def test_positions_that_differ_in_a_slash_are_two_pages(tmp_path: Path) -> None:
    context = read(tmp_path, positions=({"position": "a/RT1"}, {"position": "a-RT1"}, {"position": "index"}))
    paths = [context.paths.position(place) for place in context.catalog.positions]
    assert len(set(paths)) == 3 and "positions/index.html" not in paths


def test_the_way_from_one_page_to_another() -> None:
    assert relative("parts/b/x.html", "parts/a/y.html") == "../b/x.html"
    assert relative("parts/a/x.csv", "parts/a/x.html") == "x.csv"
    assert relative("index.html", "index.html") == "index.html"
