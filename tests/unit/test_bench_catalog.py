"""What the bench measures with: catalogs that pass the checker and come out the same again, and pages as described."""

from __future__ import annotations

import datetime
import importlib.util
import re
import sys
from pathlib import Path
from types import ModuleType

import pytest

from builder.crosschecks import checked_catalog

BENCH = Path(__file__).resolve().parents[1] / "bench"
TODAY = datetime.date(2100, 1, 1)


def maker(name: str) -> ModuleType:
    spec = importlib.util.spec_from_file_location(name, BENCH / f"{name}.py")
    assert spec and spec.loader
    module = importlib.util.module_from_spec(spec)
    # Its dataclasses look their module up by name.
    with pytest.MonkeyPatch.context() as patch:
        patch.setitem(sys.modules, name, module)
        spec.loader.exec_module(module)
    return module


CATALOGS = maker("make_catalog")
REFERENCES = maker("make_reference")


def files(folder: Path) -> dict[str, bytes]:
    return {str(path.relative_to(folder)): path.read_bytes() for path in folder.rglob("*") if path.is_file()}


@pytest.mark.parametrize("curve", CATALOGS.CURVES)
def test_a_made_catalog_has_no_problem_on_any_day(curve: str, tmp_path: Path) -> None:
    CATALOGS.make_catalog(tmp_path, parts=16, seed=1, curves=(curve,), positions=6)
    catalog = checked_catalog(tmp_path, today=TODAY).catalog
    assert [str(problem) for problem in catalog.problems] == []
    assert (len(catalog.parts), len(catalog.positions)) == (16, 6)


@pytest.mark.parametrize(
    ("curve", "basis", "rows"),
    [
        ("csv", "table", 166),
        ("inline", "table", 166),
        ("short", "table", 34),
        ("steinhart-hart", "steinhart-hart", 0),
        ("b-values", "b-values", 0),
        ("b-value", "b-value", 0),
    ],
)
def test_a_made_part_states_its_curve_as_asked(curve: str, basis: str, rows: int, tmp_path: Path) -> None:
    CATALOGS.make_catalog(tmp_path, parts=1, seed=1, curves=(curve,))
    checked = checked_catalog(tmp_path, today=TODAY)
    (record,) = checked.catalog.parts
    (made,) = checked.curves.values()
    assert made.curve.basis == basis
    assert (len(record.table.t_c) if record.table else 0) == rows


def test_the_same_seed_gives_the_same_bytes_and_another_seed_others(tmp_path: Path) -> None:
    for name, seed in (("once", 3), ("again", 3), ("other", 4)):
        CATALOGS.make_catalog(tmp_path / name, parts=12, seed=seed, curves=CATALOGS.CURVES, positions=4)
    assert files(tmp_path / "once") == files(tmp_path / "again") != files(tmp_path / "other")


def test_a_small_catalog_is_the_beginning_of_a_large_one(tmp_path: Path) -> None:
    for name, parts in (("small", 6), ("large", 18)):
        CATALOGS.make_catalog(tmp_path / name, parts=parts, seed=1, curves=CATALOGS.CURVES)
    assert files(tmp_path / "small").items() < files(tmp_path / "large").items()


def test_alternates_have_the_rated_resistance_of_the_fitted_part(tmp_path: Path) -> None:
    CATALOGS.make_catalog(tmp_path, parts=60, seed=1, positions=5)
    catalog = checked_catalog(tmp_path, today=TODAY).catalog
    for record in catalog.positions:
        place = record.position
        numbers = (place.fitted, *(alternate.part for alternate in place.alternates))
        assert len(numbers) > 1
        assert len({catalog.part(number).part.rated.resistance_ohm for number in numbers}) == 1


def test_a_reference_page_has_two_tables_three_images_and_150_words(tmp_path: Path) -> None:
    REFERENCES.make_reference(tmp_path, pages=2, seed=1)
    pages = sorted((tmp_path / "docs" / "parts").iterdir())
    assert len(pages) == 2
    for page in pages:
        title, summary, words, *images, curve = re.split(r"\n\n+", page.read_text("utf-8").strip())
        assert title.startswith("# ")
        assert [len(table.splitlines()) - 2 for table in (summary, curve)] == [20, 165]
        assert {line.count("|") for line in curve.splitlines()} == {6}
        assert len(words.split()) == 150
        assert len(images) == 3
