"""Every record has a path of its own that works on every file system."""

from __future__ import annotations

import hashlib
import re
from pathlib import Path

import pytest
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


def test_long_names_are_cut_and_stay_distinct(tmp_path: Path) -> None:
    # 255 bytes is the longest name of a file on the usual file systems; the limit leaves room for what is added.
    long = "Q" * 260
    context = read(
        tmp_path,
        *({"part": number, "maker": long} for number in (f"{long}1", f"{long}2", "P" * 80)),
        positions=({"position": f"{long}1", "fitted": "P" * 80}, {"position": f"{long}2", "fitted": "P" * 80}),
    )
    parts = [context.paths.part(record) for record in context.catalog.parts]
    places = [context.paths.position(place) for place in context.catalog.positions]
    assert len({*parts, *places}) == 5
    names = [name for path in (*parts, *places) for name in path.removesuffix(".html").split("/")]
    assert max(map(len, names)) == 80
    assert f"parts/{context.paths.maker(long).split('/')[1]}/{'p' * 80}.html" in parts
    digest = hashlib.sha256(f"{long}1".encode()).hexdigest()
    assert f"positions/{'q' * 73}-{digest[:6]}.html" in places


@pytest.mark.parametrize("maker", ["index.html", "parts-data.js"])
def test_no_maker_takes_the_place_of_a_file(tmp_path: Path, maker: str) -> None:
    assert paths_of(tmp_path, "PX-1", maker=maker) == {"PX-1": f"parts/{maker.replace('.', '-')}/px-1.html"}


@pytest.mark.parametrize("name", ["CON", "nul", "Prn", "AUX", "COM1", "lpt9"])
def test_no_name_is_a_device_of_windows(tmp_path: Path, name: str) -> None:
    own = name.casefold()
    numbers = (name, f"{name}.5", f"{name}-5")
    files = (f"{own}-part", f"{own}-part.5", f"{own}-5")
    assert paths_of(tmp_path, *numbers, maker=name) == {
        number: f"parts/{own}-part/{file}.html" for number, file in zip(numbers, files, strict=True)
    }


def test_a_name_that_looks_like_another_s_hashed_name_has_a_page_of_its_own(tmp_path: Path) -> None:
    hashed = [Path(path).stem for path in paths_of(tmp_path, "a b", "a-b").values()]
    paths = paths_of(tmp_path, "a b", "a-b", *hashed)
    assert len(set(paths.values())) == len(paths) == 4
