"""What belongs together in a catalog."""

from __future__ import annotations

from pathlib import Path

from small_site import TODAY, read


def test_a_part_knows_the_positions_where_it_is_fitted_or_an_alternate(tmp_path: Path) -> None:
    places = ({"position": "a"}, {"position": "b", "fitted": "PX-2", "alternates": [{"part": "PX-1"}]})
    context = read(tmp_path, {}, {"part": "PX-2"}, {"part": "PX-3"}, positions=places)
    found = {
        record.part.part: [(place.position.position, role) for place, role in context.positions_of(record)]
        for record in context.catalog.parts
    }
    assert found == {"PX-1": [("a", "fitted"), ("b", "alternate")], "PX-2": [("b", "fitted")], "PX-3": []}


def test_a_record_s_doubts_include_those_of_its_table_s_file(tmp_path: Path) -> None:
    ohm = [97000, 72910, 55300, 42320, 32650, 25390, 19900, 15710, 12490, 10000, 8056, 6830, 5325, 4367, 3601]
    lines = [f"{5 * i - 20},{r_ohm}" for i, r_ohm in enumerate(ohm)]
    (tmp_path / "t.csv").write_text("\n".join(["t_c,r_ohm", *lines]), "utf-8")
    context = read(tmp_path, {"r_t_table": {"file": "t.csv"}, "b_values": []}, {"part": "PX-2"})
    doubts = {
        record.part.part: {problem.rule for problem in context.problems(record)} for record in context.catalog.parts
    }
    assert "row-out-of-line" in doubts["PX-1"] and "row-out-of-line" not in doubts["PX-2"]
    assert {"document-missing"} <= doubts["PX-2"]


def test_the_day_is_the_day_of_the_check(tmp_path: Path) -> None:
    assert read(tmp_path).today == TODAY
