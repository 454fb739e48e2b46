"""Findings on one table: ln R = ln R25 + B·d + c·(d² − d·d2), B25/85 3950 K, c −1.7e5 K², printed to five digits."""

from __future__ import annotations

import numpy as np
import pytest

from builder.misprints import Finding, Rated, Table, findings

T_C = np.arange(-40.0, 126.0, 5.0)
RATED = Rated(10e3, 25.0, ((25.0, 85.0, 3950.0),))
LEFT_OUT, ROW_25 = 20, 13


def five_digits(values: np.ndarray) -> np.ndarray:
    return np.array([float(f"{value:.4e}") for value in values])


def r_ohm(t_c: np.ndarray = T_C, b_k: float = 3950, c_k2: float = -1.7e5) -> np.ndarray:
    d, d2 = 1 / (t_c + 273.15) - 1 / 298.15, 1 / 358.15 - 1 / 298.15
    return five_digits(10e3 * np.exp(b_k * d + c_k2 * (d**2 - d * d2)))


def spoilt(row: int, value: float) -> np.ndarray:
    values = r_ohm()
    values[row] = value
    return values


def only(table: Table, rated: Rated | None = RATED) -> Finding:
    (found,) = findings(table, rated)
    return found


def test_a_clean_table_has_no_findings() -> None:
    assert findings(Table(T_C, r_ohm()), RATED) == ()


def test_a_table_of_five_rows_says_nothing() -> None:
    assert findings(Table(T_C[:5], np.array([5.0, 9.0, 3.0, 2.0, 1.0]))) == ()


def test_a_wrong_digit_is_found_with_the_value_that_was_meant() -> None:
    assert r_ohm()[15] == 6560.3
    found = only(Table(T_C, spoilt(15, 6860.3)))
    assert (found.rule, found.row, found.t_c, found.column, found.value) == (
        "row-out-of-line",
        15,
        35.0,
        "r_ohm",
        6860.3,
    )
    assert (found.slip, found.restored) == ("one-digit", 6560.3)
    assert found.expected == pytest.approx(6560.3, rel=2e-4)
    assert found.reads_k == pytest.approx(-1.07, abs=0.03)  # ln(6860.3/6560.3) over 4.2 % per kelvin at 35 °C


def test_a_value_too_low_reads_high() -> None:
    assert (only(Table(T_C, spoilt(15, 6260.3))).reads_k or 0.0) > 1.0


def test_a_padded_row_is_named() -> None:
    found = only(Table(T_C, spoilt(15, r_ohm()[14])))
    assert (found.row, found.slip) == (15, "repeated-neighbour")


def test_a_table_from_hot_to_cold_keeps_its_own_row_numbers() -> None:
    assert only(Table(T_C[::-1].copy(), spoilt(15, 6860.3)[::-1].copy())).row == T_C.size - 1 - 15


def test_a_resistance_left_out_is_one_finding() -> None:
    found = only(Table(T_C[:-1], np.delete(r_ohm(), LEFT_OUT)))
    assert (found.rule, found.row, found.slip) == ("row-out-of-line", LEFT_OUT, "row-left-out")
    assert found.reads_k == pytest.approx(5.0)


@pytest.mark.parametrize("row", [1, 2, T_C.size - 3])
def test_a_resistance_left_out_beside_an_end_is_one_finding(row: int) -> None:
    found = only(Table(T_C[:-1], np.delete(r_ohm(), row)), None)
    assert (found.row, found.slip) == (row, "row-left-out")


def test_a_resistance_left_out_of_an_uneven_table_is_one_finding() -> None:
    t_c = np.array([-40.0, -33, -20, -11, 0, 4, 13, 25, 31, 44, 50, 63, 70, 85, 91, 100, 112, 125])
    found = only(Table(t_c[:-1], np.delete(r_ohm(t_c), 8)))
    assert (found.row, found.slip) == (8, "row-left-out")


def test_a_resistance_typed_twice_is_one_finding() -> None:
    found = only(Table(T_C, np.insert(r_ohm(), LEFT_OUT, r_ohm()[LEFT_OUT - 1])[:-1]))
    assert (found.row, found.slip) == (LEFT_OUT, "row-doubled")


def test_a_row_missing_altogether_is_one_finding() -> None:
    found = only(Table(np.delete(T_C, LEFT_OUT), np.delete(r_ohm(), LEFT_OUT)))
    assert (found.rule, found.row, found.expected) == ("uneven-step", LEFT_OUT, T_C[LEFT_OUT])


@pytest.mark.parametrize("typed_c", [64.0, 56.0, -65.0, -650.0, 650.0, 60.0])
def test_a_mistyped_temperature_is_restored(typed_c: float) -> None:
    t_c = T_C.copy()
    t_c[21] = typed_c
    found = only(Table(t_c, r_ohm()))
    assert (found.row, found.column, found.value, found.slip) == (21, "t_c", typed_c, "temperature-mistyped")
    assert found.restored == 65.0


def test_a_repeated_row_is_found() -> None:
    t_c, values = np.insert(T_C, 9, T_C[9]), np.insert(r_ohm(), 9, r_ohm()[9])
    assert [(one.rule, one.row) for one in findings(Table(t_c, values), RATED)] == [("repeated-temperature", 10)]


def test_a_rising_table_is_not_that_of_a_thermistor() -> None:
    assert only(Table(T_C, r_ohm()[::-1].copy())) == Finding("not-falling")


@pytest.mark.parametrize(("factor", "slip"), [(1e-3, "kilo-missed"), (1e-6, "mega-missed"), (1e3, "kilo-typed-twice")])
def test_a_missed_unit_is_named(factor: float, slip: str) -> None:
    found = only(Table(T_C, r_ohm() * factor))
    assert (found.rule, found.slip, found.row) == ("units-look-wrong", slip, None)


def test_rows_in_another_unit_are_one_finding() -> None:
    values = r_ohm()
    values[:10] /= 1000
    found = only(Table(T_C, values))
    assert (found.row, found.slip, found.restored) == (0, "kilo-missed", pytest.approx(r_ohm()[0]))


@pytest.mark.parametrize("rated", [RATED, None])
def test_a_fahrenheit_axis_is_named(rated: Rated | None) -> None:
    found = only(Table(T_C * 1.8 + 32, r_ohm()), rated)
    assert (found.rule, found.column, found.slip) == ("units-look-wrong", "t_c", "fahrenheit-for-celsius")


@pytest.mark.parametrize("rated", [RATED, None])
def test_a_kelvin_axis_is_named(rated: Rated | None) -> None:
    assert only(Table(T_C + 273.15, r_ohm()), rated).slip == "kelvin-for-celsius"


def test_another_rated_resistance_is_no_other_axis() -> None:
    t_c = np.arange(10.0, 61.0, 5.0)
    for rated_ohm in (1e3, 4.7e3, 15e3, 22e3, 100e3):
        assert only(Table(t_c, r_ohm(t_c, 2800, -2.75e5)), Rated(rated_ohm)).rule == "rated-differs"


@pytest.mark.parametrize("factors", [(30.0,), (1 / 30,), (25.0, 40.0), (250.0,), (1 / 250, 1 / 250)])
@pytest.mark.parametrize("row", [0, 15, T_C.size - 2])
def test_rows_that_are_far_off_are_no_other_unit(factors: tuple[float, ...], row: int) -> None:
    values = r_ohm()
    rows = list(range(row, row + len(factors)))
    values[rows] *= factors
    assert [(one.rule, one.row) for one in findings(Table(T_C, values), RATED)] == [
        ("row-out-of-line", row) for row in rows
    ]


@pytest.mark.parametrize("value", [5e-324, 1e-320, 1e300])
def test_a_number_that_is_no_resistance_is_passed_over(value: float) -> None:
    assert only(Table(T_C, spoilt(15, value))).rule == "uneven-step"


def test_a_slip_beside_a_missed_unit_is_found_too() -> None:
    found = findings(Table(T_C, spoilt(15, 6860.3) / 1000), RATED)
    assert [(one.rule, one.row, one.restored) for one in found] == [
        ("units-look-wrong", None, None), ("row-out-of-line", 15, 6.5603),
    ]  # fmt: skip


def test_the_rated_resistance_of_another_part_differs() -> None:
    found = only(Table(T_C, r_ohm()), Rated(12e3))
    assert (found.rule, found.expected, found.slip) == ("rated-differs", 12e3, "another-part")
    assert found.value == pytest.approx(10e3, rel=1e-3)


def test_the_b_value_of_another_part_differs() -> None:
    found = only(Table(T_C, r_ohm()), Rated(10e3, 25.0, ((25.0, 85.0, 3435.0),)))
    assert (found.rule, found.about, found.expected) == ("b-differs", "25/85", 3435.0)
    assert found.value == pytest.approx(3950.0, abs=1.0)


def test_a_wrong_row_at_the_rated_temperature_does_not_accuse_the_ratings() -> None:
    found = only(Table(T_C, spoilt(ROW_25, 10.0)))
    assert (found.row, found.slip, found.restored) == (ROW_25, "kilo-missed", 10e3)


def test_a_table_computed_from_one_b_value_is_named() -> None:
    values = five_digits(10e3 * np.exp(3950 * (1 / (T_C + 273.15) - 1 / 298.15)))
    assert only(Table(T_C, values)).rule == "b-order"


def test_rows_without_a_resistance_are_passed_over() -> None:
    assert only(Table(T_C, spoilt(15, np.nan))).rule == "uneven-step"


class TestBand:
    width = 0.01 + 0.02 * 3950 * np.abs(1 / (T_C + 273.15) - 1 / 298.15)

    def table(self, **columns: np.ndarray) -> Table:
        low, high = five_digits(r_ohm() * np.exp(-self.width)), five_digits(r_ohm() * np.exp(self.width))
        return Table(T_C, r_ohm(), **{"r_min_ohm": low, "r_max_ohm": high} | columns)

    def test_a_band_with_its_kink_at_the_rated_temperature_is_left_alone(self) -> None:
        assert findings(self.table(), RATED) == ()

    @pytest.mark.parametrize("row", [0, 6, ROW_25, 33])
    @pytest.mark.parametrize("name", ["r_min_ohm", "r_max_ohm"])
    def test_a_wrong_row_is_found_in_its_column(self, name: str, row: int) -> None:
        column = self.table().column(name).copy()
        column[row] *= 1.2 if name == "r_max_ohm" else 0.8
        found = only(self.table(**{name: column}))
        assert (found.rule, found.row, found.column) == ("row-out-of-line", row, name)

    def test_columns_that_changed_places_are_named(self) -> None:
        clean = self.table()
        found = findings(self.table(r_min_ohm=clean.r_max_ohm, r_max_ohm=clean.r_min_ohm), RATED)
        assert {(one.rule, one.slip) for one in found} == {("band-does-not-hold-nominal", "columns-swapped")}

    def test_a_nominal_outside_its_band_is_found(self) -> None:
        high = self.table().r_max_ohm.copy()
        high[12:15] = five_digits(r_ohm()[12:15] * 0.9995)
        found = findings(self.table(r_max_ohm=high), RATED)
        assert {one.row for one in found} >= {12, 14}

    def test_a_column_in_another_unit_is_one_finding(self) -> None:
        found = only(self.table(r_min_ohm=self.table().r_min_ohm / 1000))
        assert (found.rule, found.column, found.slip) == ("units-look-wrong", "r_min_ohm", "kilo-missed")

    def test_rows_without_a_minimum_are_passed_over(self) -> None:
        low = self.table().r_min_ohm.copy()
        low[::3] = np.nan
        assert findings(self.table(r_min_ohm=low), RATED) == ()
