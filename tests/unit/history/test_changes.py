"""What changed between a revision and now: which records, which fields, and by how many kelvin."""

from pathlib import Path

import numpy as np
import pytest
from git_records import appended, other_part, part, position
from scipy.optimize import brentq

from builder.comparisons import compared
from builder.history import Repository, changes, present_state, state_at
from builder.part_curve import part_curve, whole_steps_c
from builder.records import read_catalog

TABLE = "t_c,r_ohm\n-40,320000\n0,32000\n24.5,10200\n25,10000\n25.5,9800\n50,4000\n105,800\n"


def found(revision="HEAD"):
    repository, now = Repository(Path("parts")), present_state(Path("parts"))
    return changes(state_at(repository, repository.commit(revision), now), now)


def told(result):
    """Each changed part: what it was, what it is, how it changed."""
    return [
        (change.pair.before and change.pair.before.name, change.pair.now and change.pair.now.name, change.pair.change)
        for change in result.parts
    ]


def fields(change):
    return [(field.field, field.before, field.now) for field in change.fields]


def test_nothing_edited_is_nothing_changed(kept):
    kept.commit("one", x=part(), place=position(), y=other_part())
    result = found()
    assert (result.parts, result.positions, result.unread) == ((), (), ())


def test_remarks_and_the_order_of_fields_are_no_change(kept):
    kept.commit("one", x=part())
    kept.write(x="# a remark\n" + part(("maker: Maker\n", ""), ("documents:", "maker: Maker\ndocuments:")))
    assert found().parts == ()


def test_parts_that_came_and_went(kept):
    kept.commit("one", x=part())
    z = "part: Z-5\nmaker: Other\nbody: {form: probe}\nrated: {resistance_ohm: 5k}\nsteinhart_hart: {a: 1.1e-3, b: 2.3e-4, c: 8.7e-8, span_c: [0, 70]}\n"
    kept.write(x=None, z=z)
    assert told(found()) == [("Maker X-103", None, "removed"), (None, "Other Z-5", "added")]
    assert [change.shift for change in found().parts] == [None, None]


def test_a_number_edited_in_its_file_is_a_rename(kept):
    kept.commit("one", x=part())
    kept.write(x=part(("X-103", "X-103B")))
    (change,) = found().parts
    assert told(found()) == [("Maker X-103", "Maker X-103B", "renamed")]
    assert fields(change.pair) == [("part", "X-103", "X-103B")]
    assert (change.shift.worst_k, change.shift.at_c) == (0.0, None)


def test_a_number_edited_in_a_file_that_was_moved_is_a_rename(kept):
    kept.commit("one", x=part(), y=other_part())
    kept.write(**{"x": None, "y": None, "moved/q": part(("X-103", "Q-9"), ("3950", "3900"))})
    assert told(found()) == [("Maker X-103", "Maker Q-9", "renamed"), ("Maker Y-103", None, "removed")]


def test_a_file_that_was_moved_is_said_as_that(kept):
    kept.commit("one", x=part(), place=position(), y=other_part())
    kept.write(**{"x": None, "moved/x": part()})
    assert told(found()) == [("Maker X-103", "Maker X-103", "file moved")]
    assert found().positions == ()


def test_two_parts_that_exchange_files_are_moved_not_renamed(kept):
    kept.commit("one", x=part(), y=other_part())
    kept.write(x=other_part(), y=part())
    assert {change for _, _, change in told(found())} == {"file moved"}


def test_edited_fields_are_named_with_both_values(kept):
    kept.commit("one", x=part())
    text = part(("3950", "3900"), ("bead", "probe"), ("dissipation_mw_per_k: 1.0", "max_power_mw: 20"))
    kept.write(x=appended(text, "state: approved, on: 2026-02-01, by: sensors, because: tested"))
    (change,) = found().parts
    assert fields(change.pair) == [
        ("body.form", "bead", "probe"),
        ("b_values[0].b_k", 3950.0, 3900.0),
        ("limits.dissipation_mw_per_k", 1.0, None),
        ("limits.max_power_mw", None, 20.0),
        ("standing[1]", None, {"state": "approved", "on": "2026-02-01", "by": "sensors", "because": "tested"}),
    ]


def test_rows_of_a_table_are_named_by_their_temperature(kept):
    with_table = part(("shape: plain", "r_t_table: {file: table.csv}\nshape: plain"))
    (kept.records / "table.csv").write_text(TABLE)
    kept.commit("one", x=with_table)
    (kept.records / "table.csv").write_text(TABLE.replace("50,4000", "50,4020").replace("24.5,10200\n", ""))
    (change,) = found().parts
    assert fields(change.pair) == [
        ("r_t_table r_ohm at 24.5 °C", 10200.0, None),
        ("r_t_table r_ohm at 50 °C", 4000.0, 4020.0),
    ]


def test_many_rows_are_told_by_their_number(kept):
    with_table = part(("shape: plain", "r_t_table: {file: table.csv}\nshape: plain"))
    (kept.records / "table.csv").write_text(TABLE)
    kept.commit("one", x=with_table)
    (kept.records / "table.csv").write_text(TABLE.replace("00\n", "01\n"))
    (change,) = found().parts
    assert fields(change.pair) == [("r_t_table", "7 rows", "7 rows, 7 differ")]


@pytest.mark.parametrize(
    "edit", [("3950", "3900"), ("10k", "10.1k"), ("shape: plain", "shape: typical"), ("[-40, 105]", "[-55, 85]")]
)
def test_the_shift_is_what_compare_says_of_the_two_states(kept, edit):
    kept.commit("one", x=part())
    edit = ("10k", "10k1") if edit[0] == "10k" else edit
    kept.write(x=part(edit))
    shift = found().parts[0].shift
    # Both states in one catalog, under two numbers.
    kept.write(x=part(), z=part(("X-103", "Z-103"), edit))
    before, now = (part_curve(record) for record in read_catalog(Path("parts")).parts)
    both_c = (-40, 85) if edit[0] == "[-40, 105]" else (-40, 105)
    comparison = compared(before, now, whole_steps_c(both_c, 1.0))
    assert shift.worst_k == pytest.approx(comparison.worst_k, abs=1e-9)
    assert abs(shift.worst_k) < 1e-6 or shift.at_c == comparison.worst_at_c
    edges_k = [comparison.reads_min_k - comparison.reference_min_k, comparison.reads_max_k - comparison.reference_max_k]
    assert abs(shift.band_worst_k) == pytest.approx(np.abs(edges_k).max(), abs=1e-9)


def test_the_shift_of_a_b_value_is_that_of_the_exponential_law(kept):
    """Against the definition of the B-value in IEC 60539-1, solved by scipy's brentq."""
    kept.commit("one", x=part())
    kept.write(x=part(("3950", "3900")))

    def ohm(t_c, b_k, r_ohm=10e3):
        return r_ohm * np.exp(b_k * (1 / (t_c + 273.15) - 1 / 298.15))

    def reads_c(r_ohm):
        return brentq(lambda t_c: ohm(t_c, 3950) - r_ohm, -100, 200, xtol=1e-12)

    shift = found().parts[0].shift
    grid_c = range(-40, 106)
    nominal_k = [reads_c(ohm(t_c, 3900)) - t_c for t_c in grid_c]
    at = int(np.abs(nominal_k).argmax())
    assert (shift.worst_k, shift.at_c) == (pytest.approx(nominal_k[at], abs=1e-6), grid_c[at])
    spread = {b_k: [0.01 * b_k * abs(1 / (t_c + 273.15) - 1 / 298.15) for t_c in grid_c] for b_k in (3950, 3900)}
    edges_k = [
        reads_c(ohm(t_c, 3900) * (1 + sign * 0.01) * np.exp(sign * spread[3900][i]))
        - reads_c(ohm(t_c, 3950) * (1 + sign * 0.01) * np.exp(sign * spread[3950][i]))
        for sign in (1, -1)
        for i, t_c in enumerate(grid_c)
    ]
    worst = int(np.abs(edges_k).argmax())
    assert shift.band_worst_k == pytest.approx(edges_k[worst], abs=1e-6)
    assert shift.band_at_c == grid_c[worst % len(grid_c)]


def test_a_row_between_whole_degrees_moves_the_curve(kept):
    with_table = part(("shape: plain", "r_t_table: {file: table.csv}\nshape: plain"))
    rows = TABLE.replace("24.5,", "23,10900\n24,10440\n24.5,").replace("50,", "26,9580\n27,9200\n50,")
    (kept.records / "table.csv").write_text(rows)
    kept.commit("one", x=with_table)
    (kept.records / "table.csv").write_text(rows.replace("24.5,10200", "24.5,10180"))
    shift = found().parts[0].shift
    assert (shift.at_c, shift.band_at_c) == (24.5, 24.5)
    assert 0.02 < shift.worst_k < 0.08


def test_ranges_that_do_not_meet_give_no_shift(kept):
    kept.commit("one", x=part())
    kept.write(x=part(("[-40, 105]", "[110, 150]")))
    shift = found().parts[0].shift
    assert np.isnan(shift.worst_k) and shift.moved


def test_positions_are_listed_with_what_their_parts_do(kept):
    kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(y=other_part("Y-103", ("3960", "3700")))
    (change,) = found().positions
    assert (change.pair.change, change.parts, change.pair.fields) == ("its parts", ("Maker Y-103",), ())
    assert change.reading_before.verdicts == {"Y-103": "fits"}
    assert change.reading_now.verdicts == {"Y-103": "fits with new firmware"}
    assert change.reading_before.budget.worst_k == change.reading_now.budget.worst_k


def test_the_part_that_the_firmware_was_made_for_is_looked_at_too(kept):
    made_for = position(("method: curve", "method: table, part: F-103, step_k: 5"), ("within_k: 1.5", "within_k: 1"))
    kept.commit("one", x=part(), y=other_part(), f=other_part("F-103"), place=made_for)
    kept.write(f=other_part("F-103", ("3960", "3800")))
    (change,) = found().positions
    assert change.parts == ("Maker F-103",)
    before, now = (read.budget for read in (change.reading_before, change.reading_now))
    assert (before.meets_limit, now.meets_limit) == (True, False)
    assert [trip.ok for trip in (*before.trips, *now.trips)] == [True, False]


def test_what_a_part_says_without_effect_lists_no_position(kept):
    kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(x=part(("standing:", "notes: a word\nstanding:")))
    assert found().positions == ()


def test_edited_positions_are_listed_with_their_fields(kept):
    kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(place=position(("limit_k: 1.5", "limit_k: 0.2")))
    (change,) = found().positions
    assert (change.pair.change, fields(change.pair)) == ("edited", [("limit_k", 1.5, 0.2)])
    assert [r.budget.meets_limit for r in (change.reading_before, change.reading_now)] == [True, False]


def test_positions_that_came_went_and_were_renamed(kept):
    kept.commit(
        "one", x=part(), y=other_part(), a=position(), b=position(("RT1", "RT2"), ("purpose: air", "purpose: oil"))
    )
    kept.write(a=position(("board/RT1", "board/RT7")), b=None, c=position(("board/RT1", "other/T3"), ("firmware: {method: curve}", "firmware: {method: b-value, resistance_ohm: 10k, b_k: 3950}"), ("3.3", "5"), ("10k, t", "22k, t"), ("board: Board", "board: Quite another"), ("alternates:\n  - part: Y-103\n    standing:\n      - {state: proposed, on: 2026-01-13, by: purchasing, because: second source}\n", ""), ("purpose: air", "purpose: heat sink of the output stage"), ("[-20, 60]", "[0, 100]")))  # fmt: skip
    assert [(change.pair.change, change.pair.record.position.position) for change in found().positions] == [
        ("renamed", "board/RT7"),
        ("added", "other/T3"),
        ("removed", "board/RT2"),
    ]


def test_a_record_that_could_not_be_read_before_is_no_new_one(kept):
    kept.commit("one", x=part(("b_k: 3950", "b_k: 39500")))
    kept.write(x=part())
    assert told(found()) == [(None, "Maker X-103", "not readable before")]
    assert len(found().unread) == 1


def test_a_table_that_could_not_be_read_before_makes_no_new_part(kept):
    (kept.records / "table.csv").write_text(TABLE.replace("50,4000", "50,x"))
    kept.commit("one", x=part(("shape: plain", "r_t_table: {file: table.csv}\nshape: plain")))
    (kept.records / "table.csv").write_text(TABLE)
    assert told(found()) == [(None, "Maker X-103", "not readable before")]


def test_a_record_that_cannot_be_read_now_is_not_removed(kept):
    kept.commit("one", x=part())
    kept.write(x=part(("b_k: 3950", "b_k: 39500")))
    assert told(found()) == [("Maker X-103", None, "not readable now")]


def test_two_revisions_are_compared_as_the_work_tree_is(kept):
    kept.commit("one", x=part(), place=position(), y=other_part())
    kept.commit("two", x=part(("3950", "3900")))
    kept.write(x=None)
    repository, now = Repository(Path("parts")), present_state(Path("parts"))
    newer = state_at(repository, repository.commit("HEAD"), now)
    older = state_at(repository, repository.commit("HEAD~1"), newer)
    result = changes(older, newer)
    assert told(result) == [("Maker X-103", "Maker X-103", "edited")]
    assert result.parts[0].shift.worst_k == pytest.approx(-0.0, abs=2) and result.parts[0].shift.worst_k != 0
