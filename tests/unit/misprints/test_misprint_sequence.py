from __future__ import annotations

import numpy as np
import pytest

from builder.misprints.sequence import Sequence, holes, repeated, sequence


def of(*t_c: float) -> Sequence:
    return sequence(np.array(t_c, dtype=float), np.ones(len(t_c), dtype=bool))


def test_a_table_from_hot_to_cold_is_taken_from_cold_to_hot() -> None:
    assert of(20, 10, 0, -10, -20).rows.tolist() == [4, 3, 2, 1, 0]


def test_rows_without_order_are_sorted() -> None:
    assert of(20, -10, 30, 0, 10).t_c.tolist() == [-10, 0, 10, 20, 30]


@pytest.mark.parametrize(
    ("t_c", "row"),
    [
        ((0, 5, 10, 51, 20, 25), 3),
        ((40, -35, -30, -25, -20, -15), 0),
        ((0, 5, 10, 15, 20, 250), 5),
        ((-10, 5, 0, 5, 10, 15), 1),
    ],
)
def test_a_temperature_out_of_order_is_told(t_c: tuple[float, ...], row: int) -> None:
    assert np.flatnonzero(~of(*t_c).in_order).tolist() == [row]


def test_an_uneven_axis_is_in_order() -> None:
    assert of(-40, -20, 0, 10, 15, 20, 25, 37, 60, 100).in_order.all()


def test_even_steps_leave_a_place_for_every_row() -> None:
    assert of(0, 5, 10, 64, 20, 25, 30).even_c[3] == 15
    assert of(0, 5, 10, 15, 20, 25, 64).even_c[6] == 30
    assert np.isnan(of(0, 3, 10, 14, 25, 31, 50).even_c).all()


def test_a_hole_in_an_even_axis_is_found_with_the_temperature_that_is_missing() -> None:
    seq = of(0, 5, 10, 15, 25, 30, 35, 40)
    (hole,) = holes(seq, seq.t_c)
    assert (hole.rule, hole.row, hole.expected, hole.slip) == ("uneven-step", 4, 20.0, "row-left-out")


@pytest.mark.parametrize(
    ("t_c", "row", "missing_c"), [((0, 5, 10, 15, 20, 25, 35), 6, 30.0), ((0, 10, 15, 20, 25, 30, 35), 1, 5.0)]
)
def test_a_hole_beside_an_end_of_an_even_axis_is_found(t_c: tuple[float, ...], row: int, missing_c: float) -> None:
    seq = of(*t_c)
    assert [(hole.row, hole.expected) for hole in holes(seq, seq.t_c)] == [(row, missing_c)]


@pytest.mark.parametrize(
    "t_c",
    [
        (0, 5, 10, 15, 20, 30),
        (0, 10, 15, 20, 25, 30),
        (0, 5, 10, 15, 20, 25, 30, 42),
        (0, 5, 10, 15, 20, 30, 40, 50, 60),
        (0, 10, 20, 25, 30, 40, 50, 60),
        (-40, -20, 0, 10, 20, 30, 60, 85),
    ],
)
def test_steps_that_change_are_no_hole(t_c: tuple[float, ...]) -> None:
    seq = of(*t_c)
    assert holes(seq, seq.t_c) == []


def test_a_repeated_temperature_is_found_at_its_second_row() -> None:
    seq = of(0, 5, 10, 10, 15, 20)
    assert [(one.rule, one.row) for one in repeated(seq, seq.t_c)] == [("repeated-temperature", 3)]
