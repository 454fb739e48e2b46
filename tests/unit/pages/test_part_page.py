"""A part's page says who the part is, whether it may be used, and what its record states beside what its curve gives."""

from __future__ import annotations

import csv
import io
import re
from pathlib import Path

import pytest
from small_site import SHEET, fact, only_page, read, rows, section, text

from builder.pages.context import Context
from builder.pages.page import DataFile, Page
from builder.pages.part_page import part_csv, part_page
from builder.pages.part_texts import rated_text, summary
from builder.records import Part

TABLE = {"r_t_table": {"rows": [[0, 27280], [25, 10000], [50, 4161], [85, 1451]]}}
BENT = {"steinhart_hart": {"a": 5.8e-4, "b": 3.3e-4, "c": -3.404e-7, "span_c": [0, 70]}}
TOLERANCES = {
    "rated": {"resistance_ohm": 1e4, "tolerance_pct": 1},
    "b_values": [{"between_c": [25, 85], "b_k": 3435, "tolerance_pct": 2}],
}


def test_identity_and_standing_stand_before_everything_else(tmp_path: Path) -> None:
    standing = [
        {"state": "proposed", "on": "2026-01-12", "by": "sensors", "because": "x"},
        {
            "state": "restricted",
            "on": "2026-02-10",
            "by": "safety",
            "because": "x",
            "only_for": ["a/RT1", "b"],
            "document": SHEET,
        },
    ]
    body = only_page(
        tmp_path,
        own_number="HS-1",
        description="10 kΩ bead",
        standing=standing,
        qualification=["Q1", "Q2"],
        documents=[SHEET],
    )
    head = body.partition("<h2")[0]
    assert head.startswith("<h1>PX-1</h1>")
    assert "restricted since 2026-02-10, by safety, only for a/RT1, b" in text(head)
    assert "proposed" not in head
    assert [fact(head, name) for name in ("Maker", "Own number", "Rated", "Body", "Qualification", "Lifecycle")] == [
        "Pellworm", "HS-1", "10 kΩ", "leaded", "Q1, Q2", "active"
    ]  # fmt: skip


def test_the_least_possible_record_has_a_whole_page(tmp_path: Path) -> None:
    body = only_page(tmp_path)
    assert "no standing nobody has decided about this part yet" in text(body)
    assert fact(body, "Operating") == "not stated"
    assert text(section(body, "limits")) == "Limits The record states none."
    assert text(section(body, "use")) == "Where it is used No position of the catalog names it."
    assert text(section(body, "documents")) == "Documents The record names none."
    assert text(section(body, "ledger")) == "Ledger No entry yet."


def test_a_record_with_every_field_shows_each(tmp_path: Path) -> None:
    body = only_page(
        tmp_path,
        **TABLE,
        own_number="HS-1",
        description="a bead",
        body={"form": "chip", "size_code": "0603"},
        rated={"resistance_ohm": "10k", "at_c": 25, "tolerance_pct": 1},
        b_values=[{"between_c": [25, 85], "b_k": 3437, "tolerance_pct": 0.5}],
        steinhart_hart={"a": 1.0293241e-3, "b": 2.3926251e-4, "c": 1.5633514e-7, "span_c": [0, 85]},
        accuracy=[{"between_c": [0, 70], "within_k": 0.2}],
        limits={
            "operating_c": [0, 85],
            "max_power_mw": 101,
            "dissipation_mw_per_k": 2.5,
            "time_constant_s": 4.5,
            "medium": "still air",
        },
        qualification=["AEC-Q200 grade 1"],
        lifecycle="last time buy",
        documents=[{"title": "sheet", "revision": "C", "dated": "2025-03-11", "link": "https://example.com/x.pdf"}],
        standing=[
            {
                "state": "approved",
                "on": "2026-01-01",
                "by": "us",
                "because": "good",
                "document": SHEET,
                "review_due": "2027-01-01",
            }
        ],
        accepted=[{"rule": "rated-differs", "because": "the maker confirmed it"}],
        notes="keep dry",
    )
    seen = text(body)
    for said in (
        "HS-1", "a bead", "chip 0603", "10 kΩ ±1 %", "B25/85 3437 K ±0.5 %", "a = 0.0010293241, b = 0.00023926251",
        "c = 1.5633514e-07, 0 to 85 °C", "±0.2 K from 0 to 70 °C", "101 mW", "2.5 mW/K", "4.5 s", "still air",
        "AEC-Q200 grade 1", "last time buy", "sheet C 2025-03-11", "good", "2027-01-01", "the maker confirmed it",
        "keep dry",
    ):  # fmt: skip
        assert said in seen, said
    assert '<a href="https://example.com/x.pdf">sheet</a>' in body


def test_what_is_stated_stands_beside_what_the_curve_gives(tmp_path: Path) -> None:
    body = only_page(tmp_path, **TABLE, rated={"resistance_ohm": 10100, "tolerance_pct": 1})
    # The table has 10000 Ω; B = ln(10000 / 1451) / (1/298.15 − 1/358.15) = 3435.4 K.
    assert rows(body, "What the record states") == [
        ["Resistance at 25 °C", "10.1 kΩ", "±1 %", "10 kΩ", "−0.990 %"],
        ["B25/85", "3435 K", "not stated", "3435.4 K", "+0.012 %"],
    ]


def test_doubts_stand_above_the_figures_with_a_link_to_their_rule(tmp_path: Path) -> None:
    head = only_page(tmp_path).partition("<h2")[0]
    assert "documents: no document is named, so nobody can compare these figures with anything." in text(head)
    assert '<a href="../../checks/document-missing.html">document-missing</a>' in head


def test_a_doubt_about_a_table_s_row_says_which_row(tmp_path: Path) -> None:
    ohm = [97000, 72910, 55300, 42320, 32650, 25390, 19900, 15710, 12490, 10000, 8056, 6830, 5325, 4367, 3601]
    found = only_page(tmp_path, r_t_table={"rows": [[5 * i - 20, r] for i, r in enumerate(ohm)]}, b_values=[])
    assert "r_ohm at 35 °C: 6830 Ω reads 1.1 K below" in text(found)


def test_a_band_that_lacks_a_tolerance_is_said_to_be_incomplete(tmp_path: Path) -> None:
    said = "The band is incomplete: a tolerance that it needs is not stated."
    assert said in section(only_page(tmp_path), "r-t-table")
    assert said not in only_page(tmp_path, **TOLERANCES)


def test_rows_beyond_the_curve_are_marked_as_extrapolated(tmp_path: Path) -> None:
    body = only_page(tmp_path, **TABLE, limits={"operating_c": [-10, 90]})
    marked = [row[0] for row in rows(body, "Every 5 K") if row[-1] == "extrapolated"]
    assert marked == ["−10", "−5", "90"]
    assert body.count('<tr class="bd-far">') == 3


@pytest.mark.parametrize(
    ("fields", "named"),
    [
        ({"limits": {"operating_c": [-40, 125]}}, "estimated"),
        ({"limits": {"operating_c": [-250, 125]}}, "estimated or extrapolated"),
        (TABLE | {"limits": {"operating_c": [-10, 90]}}, "extrapolated"),
    ],
)
def test_the_figures_say_what_their_dashed_lines_are(tmp_path: Path, fields: dict[str, object], named: str) -> None:
    drawn = section(only_page(tmp_path, **TOLERANCES | fields), "curve")
    keys = re.findall("<figcaption>.*?</figcaption>", drawn)
    assert [text(key.rpartition("<span>")[2]) for key in keys] == [named, named]


def test_a_curve_that_must_not_be_extrapolated_ends_where_it_is_known(tmp_path: Path) -> None:
    body = only_page(tmp_path, **BENT, limits={"operating_c": [-40, 125]})
    shown = [row[0] for row in rows(body, "Every 5 K")]
    assert (shown[0], shown[-1]) == ("0", "70")
    assert "known from 0 to 70 °C. Beyond, there is no number." in body
    assert "bends-back" in body


def test_a_curve_that_is_not_known_where_the_part_works_has_a_page(tmp_path: Path) -> None:
    body = only_page(tmp_path, **BENT, limits={"operating_c": [80, 125]})
    assert "<h1>PX-1</h1>" in body and "nan" not in text(body).casefold().split()


@pytest.mark.parametrize(
    ("fields", "said"),
    [
        (TABLE, "The curve is made from the maker's R–T table, known from 0 to 85 °C. Beyond, it is extrapolated."),
        (
            {"steinhart_hart": {"a": 1.03e-3, "b": 2.39e-4, "c": 1.56e-7, "span_c": [-40, 125]}},
            "The curve is made from the maker's Steinhart–Hart coefficients, known from −40 to 125 °C.",
        ),
        (
            {"b_values": [{"between_c": [25, 50], "b_k": 3380}, {"between_c": [25, 85], "b_k": 3435}]},
            "The curve is made from the stated B-values: the record fixes the resistance at 25 °C, 50 °C, 85 °C; "
            "everywhere else it is an estimate.",
        ),
        ({}, "The curve is made from a single B-value: the record fixes the resistance at 25 °C, 85 °C;"),
        ({}, "The band is widened by how differently real ceramics bend."),
    ],
)
def test_what_the_curve_is_made_from_is_said(tmp_path: Path, fields: dict[str, object], said: str) -> None:
    assert said in text(section(only_page(tmp_path, **fields), "curve"))


def test_a_plain_b_value_claims_no_allowance(tmp_path: Path) -> None:
    assert "real ceramics" not in section(only_page(tmp_path, shape="plain"), "curve")


def test_a_rated_temperature_is_said_where_it_is_not_25_c() -> None:
    part = Part.model_validate(
        {
            "part": "PX-1",
            "maker": "Pellworm",
            "body": {"form": "disc"},
            "rated": {"resistance_ohm": "3k3", "at_c": 100, "tolerance_pct": 2},
            "b_values": [{"between_c": [100, 25], "b_k": 3435}],
        }
    )
    assert rated_text(part) == "3.3 kΩ at 100 °C ±2 %"
    assert summary(part) == "3.3 kΩ at 100 °C ±2 % disc thermistor of Pellworm"


def page_and_csv(context: Context) -> tuple[Page, DataFile]:
    record = context.catalog.parts[0]
    return part_page(record, context), part_csv(record, context)


def test_the_csv_holds_the_curve_that_the_page_shows(tmp_path: Path) -> None:
    context = read(tmp_path, TABLE | TOLERANCES | {"limits": {"operating_c": [-10, 90]}})
    page, file = page_and_csv(context)
    assert f'<a href="{Path(file.path).name}" download>' in page.body()
    lines = list(csv.DictReader(io.StringIO(file.content())))
    assert [float(line["t_c"]) for line in lines] == list(range(-10, 91))
    assert [line["extrapolated"] for line in lines] == ["yes"] * 10 + ["no"] * 86 + ["yes"] * 5
    curve = context.curve(context.catalog.parts[0]).curve
    for line in lines:
        assert float(line["r_ohm"]) == pytest.approx(float(curve.resistance_ohm(float(line["t_c"]))), rel=1e-9)
        assert float(line["r_min_ohm"]) < float(line["r_ohm"]) < float(line["r_max_ohm"])


def test_the_csv_goes_through_every_row_of_the_record_s_table(tmp_path: Path) -> None:
    _, file = page_and_csv(read(tmp_path, TABLE))
    found = {float(line["t_c"]): float(line["r_ohm"]) for line in csv.DictReader(io.StringIO(file.content()))}
    for t_c, r_ohm in TABLE["r_t_table"]["rows"]:
        assert found[t_c] == pytest.approx(r_ohm, rel=1e-9)


def test_the_search_knows_the_resistance_as_people_type_it(tmp_path: Path) -> None:
    page, _ = page_and_csv(read(tmp_path, {"own_number": "HS-1", "body": {"form": "chip", "size_code": "0603"}}))
    assert page.search_text == "Pellworm HS-1 10 kΩ 10kΩ 10k 10000 chip 0603"
    assert page.title == "PX-1 · Pellworm"


@pytest.mark.parametrize(
    ("r_ohm", "words"),
    [
        (2200, "2.2 kΩ 2.2kΩ 2.2k 2k2 2200"),
        (470, "470 Ω 470Ω 470 470R"),
        (4.7, "4.7 Ω 4.7Ω 4.7 4R7"),
        (22e6, "22 MΩ 22MΩ 22M 22000000"),
    ],
)
def test_the_search_knows_the_code_and_the_plain_ohms(tmp_path: Path, r_ohm: float, words: str) -> None:
    page, _ = page_and_csv(read(tmp_path, {"rated": {"resistance_ohm": r_ohm}}))
    assert page.search_text == f"Pellworm {words} leaded"


def test_the_page_knows_its_record_for_the_edit_link(tmp_path: Path) -> None:
    page, _ = page_and_csv(read(tmp_path))
    assert page.record == "0.yaml"


def test_each_limit_stands_under_its_name(tmp_path: Path) -> None:
    limits = {"operating_c": [0, 85], "max_power_mw": 101, "dissipation_mw_per_k": 2.5, "time_constant_s": 4.5}
    shown = {
        "Operating range": "0 to 85 °C",
        "Largest power": "101 mW",
        "Dissipation factor": "2.5 mW/K",
        "Time constant": "4.5 s",
    }
    body = section(only_page(tmp_path, limits=limits), "limits")
    assert {name: fact(body, name) for name in shown} == shown


def test_positions_that_name_the_part_are_linked(tmp_path: Path) -> None:
    places = ({"position": "a/RT1"}, {"position": "b/RT1", "fitted": "PX-2", "alternates": [{"part": "PX-1"}]})
    context = read(tmp_path, {}, {"part": "PX-2"}, positions=places)
    body = part_page(context.catalog.part("PX-1"), context).body()
    assert rows(body, "Positions that name this part") == [
        ["a/RT1", "Board", "air", "fitted"],
        ["b/RT1", "Board", "air", "alternate"],
    ]
    assert 'href="../../positions/a-rt1.html"' in body
