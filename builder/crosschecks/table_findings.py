"""What the examination of an R–T table found, as problems of the record."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import replace

from builder import misprints
from builder.crosschecks.subject import Check, Subject
from builder.misprints import Finding, Table
from builder.problems import Problem, Severity
from builder.records import LooseTable, Source
from builder.records.part import Rated
from builder.records.table import TableData
from builder.units import number_text, temperature_text

_COMPARE = "Compare with the data sheet."
_SLIPS = {
    "one-digit": "One digit differs",
    "two-digits-swapped": "Two digits are swapped",
    "decimal-place": "The decimal point is misplaced",
    "comma-for-point": "A comma between thousands was taken for a decimal point",
    "kilo-missed": "It was typed in kΩ",
    "kilo-typed-twice": "It was multiplied by 1000 twice",
    "repeated-neighbour": "It repeats the row beside it",
    "temperature-mistyped": "The temperature is mistyped",
    "sign-missed": "The temperature's sign is missing",
}
_WHOLE_TABLE = {
    "fahrenheit-for-celsius": "the temperatures make a thermistor only when they are read as °F. Convert them to °C.",
    "kelvin-for-celsius": "the temperatures are in kelvin. Subtract 273.15 from each.",
    "kilo-missed": "the values are a thousandth of what the record states: they were typed in kΩ. Multiply them by 1000.",
    "mega-missed": "the values are a millionth of what the record states: they were typed in MΩ. Multiply them by 1000000.",
    "kilo-typed-twice": "the values are a thousand times what the record states. Divide them by 1000.",
}


def _table_findings(subject: Subject) -> Iterator[Problem]:
    """Every finding in a part's table, worded, on the line of its row."""
    record = subject.record
    if record.table is not None:
        b_values = tuple((*b.between_c, b.b_k) for b in record.part.b_values)
        yield from _problems(record.source, record.table, record.part.rated, b_values)


def loose_table_findings(loose: LooseTable) -> Iterator[Problem]:
    """Every finding in the rows of a table whose record has errors elsewhere."""
    found = _problems(loose.source, loose.table, loose.rated, ())
    return (problem for problem in found if problem.row is not None)


def _problems(
    source: Source, table: TableData, rated: Rated | None, b_values: tuple[tuple[float, float, float], ...]
) -> Iterator[Problem]:
    nominal = table.r_ohm if table.ratio is None else table.ratio
    stated = None
    if rated is not None:
        resistance = rated.resistance_ohm if table.ratio is None else 1.0
        stated = misprints.Rated(resistance, rated.at_c, b_values)
    for finding in misprints.findings(Table(table.t_c, nominal, table.r_min_ohm, table.r_max_ohm), stated):
        # Reading the table has reported each row that is out of order.
        if finding.rule not in ("not-falling", "repeated-temperature"):
            yield _problem(_in_its_column(finding, table), source, table)


def _in_its_column(finding: Finding, table: TableData) -> Finding:
    """The finding under the name that the table's own column has."""
    is_ratio = table.ratio is not None and finding.column == "r_ohm"
    return replace(finding, column="ratio") if is_ratio else finding


def _problem(finding: Finding, source: Source, table: TableData) -> Problem:
    # A table that does not fall makes no curve, one in the wrong unit a useless one; every other finding may be the
    # maker's own figure.
    severity: Severity = "warning" if table.falls and finding.rule != "units-look-wrong" else "error"
    message = _WORDING[finding.rule](finding)
    if finding.row is None:
        return source.problem(("r_t_table",), finding.rule, message, severity)
    expected = None if finding.expected is None else float(f"{_restored_or_expected(finding):.7g}")
    line = table.lines[finding.row]
    return Problem(table.file, line, finding.column, finding.rule, message, severity, finding.t_c, expected)


def _restored_or_expected(finding: Finding) -> float:
    value = finding.expected if finding.restored is None else finding.restored
    assert value is not None
    return value


def _shown(value: float | None, column: str) -> str:
    if value is None:
        return "nothing"
    # In the record's own unit, so that the eye finds it in the row.
    return temperature_text(value) if column == "t_c" else f"{number_text(value, 7)}{_unit(column)}"


def _unit(column: str) -> str:
    return "" if column == "ratio" else " Ω"


def _expected(finding: Finding) -> str:
    """What the smooth curve gives: more digits than these would promise too much."""
    return f"{number_text(finding.expected or 0.0, 5)}{_unit(finding.column)}"


def _out_of_line(finding: Finding) -> str:
    if finding.slip in ("row-left-out", "row-doubled"):
        return _out_of_step(finding)
    if finding.column == "t_c":
        return _wrong_temperature(finding)
    reads_k = finding.reads_k or 0.0
    off = f"{_kelvin(reads_k)} {'above' if reads_k > 0 else 'below'}"
    value = _shown(finding.value, finding.column)
    return f"{value} reads {off} what its neighbours expect, {_expected(finding)}. {_cure(finding)}"


def _wrong_temperature(finding: Finding) -> str:
    typed, fits = _shown(finding.value, "t_c"), temperature_text(round(finding.expected or 0.0, 2))
    return f"the row's resistance belongs to {fits}, not to {typed}. {_cure(finding)}"


def _out_of_step(finding: Finding) -> str:
    what = "a resistance was left out" if finding.slip == "row-left-out" else "a resistance stands twice"
    return (
        f"from this row on every resistance is one row off: {what}. Here {_expected(finding)} is expected, not "
        f"{_shown(finding.value, finding.column)}. {_COMPARE}"
    )


def _cure(finding: Finding) -> str:
    slip = _SLIPS.get(finding.slip or "")
    if slip is None:
        return _COMPARE
    column = "t_c" if finding.slip in ("temperature-mistyped", "sign-missed") else finding.column
    restored = "" if finding.restored is None else f": {_shown(finding.restored, column)}"
    return f"{slip}{restored}. {_COMPARE}"


def _kelvin(difference_k: float) -> str:
    return f"{number_text(abs(difference_k), 2)} K"


def _uneven(finding: Finding) -> str:
    return (
        f"the table goes on at {_shown(finding.value, 't_c')}, where its even steps expect {_shown(finding.expected, 't_c')}. "
        f"Add the row that was left out."
    )


def _rated_differs(finding: Finding) -> str:
    return (
        f"the table has {number_text(finding.value or 0.0, 5)} Ω at {_shown(finding.t_c, 't_c')}, where the record states "
        f"{_shown(finding.expected, 'r_ohm')}: {_kelvin(finding.reads_k or 0.0)} apart. Is it the table of another part?"
    )


def _b_differs(finding: Finding) -> str:
    return (
        f"the table gives B{finding.about} = {number_text(finding.value or 0.0, 5)} K, where the record states "
        f"{number_text(finding.expected or 0.0, 5)} K. Is it the table of another part?"
    )


def _constant_b(finding: Finding) -> str:  # noqa: ARG001
    return (
        "every B-value of the table is the same, which no ceramic's is: the table was computed from one B-value, not measured. "
        "Ask the maker for a measured table, or accept the finding."
    )


def _wrong_unit(finding: Finding) -> str:
    if finding.row is None:
        return _WHOLE_TABLE[finding.slip or ""]
    return (
        f"from this row on the values stand in another unit: {_shown(finding.value, finding.column)} should be "
        f"{_shown(finding.expected, finding.column)}. Give the whole column in Ω."
    )


def _not_held(finding: Finding) -> str:
    end, way = ("minimum", "above") if finding.column == "r_min_ohm" else ("maximum", "below")
    if finding.slip == "columns-swapped":
        return f"in {finding.about} the {end} lies {way} the nominal value. Were the names of two columns exchanged?"
    value, nominal = _shown(finding.value, finding.column), _shown(finding.expected, "r_ohm")
    more = f", and so in {finding.about}" if finding.about else ""
    return f"the {end}, {value}, lies {way} the nominal value, {nominal}{more}. {_COMPARE}"


_WORDING: Mapping[str, Callable[[Finding], str]] = {
    "row-out-of-line": _out_of_line,
    "uneven-step": _uneven,
    "rated-differs": _rated_differs,
    "b-differs": _b_differs,
    "b-order": _constant_b,
    "units-look-wrong": _wrong_unit,
    "band-does-not-hold-nominal": _not_held,
}

CHECKS: tuple[Check, ...] = (_table_findings,)
