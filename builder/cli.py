"""The `beadroll` command: reads arguments, calls, prints."""

from __future__ import annotations

import datetime
import io
import math
import sys
from collections.abc import Callable, Iterable
from pathlib import Path
from typing import Any, BinaryIO, NoReturn, TypeVar

import click

from builder.circuit import budget, firmware_part, thermistor
from builder.comparisons import Comparison, NoCommonRange, common_range_c, compared, families, sentence
from builder.comparisons.families import DEFAULT_RANGE_C, DEFAULT_WITHIN_K
from builder.crosschecks import checked_catalog
from builder.crosschecks.checked import findings
from builder.crosschecks.subject import Subject
from builder.exports import budget_rows, comparison_rows, curve_rows, fit_rows, rows
from builder.exports.rows import Column
from builder.fits import EQUATIONS
from builder.intake import Unreadable, record_text
from builder.part_curve import part_curve, steps_from_c, whole_steps_c
from builder.part_fit import fitted
from builder.problems import Problem, count_text, errors, nearest, warnings
from builder.records import Catalog, LooseTable, PartRecord, Position, UnknownPart, read_catalog
from builder.units import Array, number_text, ohms_from_text, range_text

_MOST_ROWS = 100_000
_Command = TypeVar("_Command", bound=Callable[..., Any])

_RECORDS = click.option(
    "--records",
    default="parts",
    show_default=True,
    type=click.Path(exists=True, file_okay=False, path_type=Path),
    metavar="DIR",
    help="Folder of the records.",
)
_FORMAT = click.option(
    "--format",
    "form",
    type=click.Choice(["table", "json", "csv"]),
    default="table",
    show_default=True,
    help="How to answer.",
)
_TODAY = click.option(
    "--today",
    type=click.DateTime(["%Y-%m-%d"]),
    metavar="DATE",
    help="The day to judge by, for output that does not change; default today.",
)


def _common(command: _Command) -> _Command:
    return _RECORDS(_FORMAT(command))


class Degrees(click.ParamType):  # type: ignore[type-arg]  # generic from click 8.3 on
    """A temperature on the command line, [°C]; a typographic minus is taken for a minus."""

    name = "C"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> float:
        """The number, or a usage error."""
        try:
            number = float(str(value).replace("−", "-"))
        except ValueError:
            self.fail(f"{value} is not a temperature. Write a number in °C, such as -40.", param, ctx)
        if not -273.15 < number <= 1000:
            self.fail(f"{value} °C is outside −273.15 to 1000 °C. Check the unit.", param, ctx)
        return number


class Step(click.ParamType):  # type: ignore[type-arg]
    """A difference of temperatures on the command line, [K]."""

    name = "K"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> float:
        """The number, or a usage error."""
        try:
            number = float(value)
        except ValueError:
            number = math.nan
        if not 0 < number <= 1000:
            self.fail(f"{value} is not a step. Write a number of kelvin above 0, at most 1000.", param, ctx)
        return number


class Resistance(click.ParamType):  # type: ignore[type-arg]
    """A resistance on the command line, [Ω]: a number or an R-K-M code."""

    name = "OHM"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> float:
        """The number, or a usage error."""
        try:
            return ohms_from_text(str(value))
        except ValueError as wrong:
            self.fail(f"{wrong}.", param, ctx)


_FROM = click.option(
    "--from",
    "from_c",
    type=Degrees(),
    metavar="C",
    help="First temperature, °C; default the operating range, of several parts the common one.",
)
_TO = click.option("--to", "to_c", type=Degrees(), metavar="C", help="Last temperature, °C.")
_STEP = click.option(
    "--step",
    "step_k",
    type=Step(),
    default=5.0,
    show_default=True,
    metavar="K",
    help="Distance of the rows, K: from --from on, or at whole steps and both ends of the range.",
)


@click.group(context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 110})
@click.version_option(package_name="beadroll")
def main() -> None:
    """Check records of NTC thermistors, turn them into curves, compare them in kelvin."""
    # A pipe on Windows has a code page without Ω, and JSON is UTF-8 everywhere.
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(encoding="utf-8")


@main.command()
@click.argument("paths", nargs=-1, type=click.Path(path_type=Path), metavar="[PATH]...")
@_common
@_TODAY
def check(paths: tuple[Path, ...], records: Path, form: str, today: datetime.datetime | None) -> None:
    """Check the records, all of them or those at PATH.

    Every problem of every record in one run. Exit 0 if there is no error, 1 if there is one.
    """
    wanted = [_inside(path, records) for path in paths]
    catalog = checked_catalog(records, today=today.date() if today else datetime.date.today()).catalog
    # A record's own CSV belongs to it.
    with_tables: list[PartRecord | LooseTable] = [*catalog.parts, *catalog.curveless, *catalog.loose_tables]
    for record in with_tables:
        if record.table is not None and wanted and _below(record.source.file, wanted):
            wanted.append(Path(record.table.file).resolve())
    found = [problem for problem in catalog.problems if not wanted or _below(problem.file, wanted)]
    {"table": _print_problems, "json": _print_json_problems, "csv": _print_csv_problems}[form](found, catalog)
    sys.exit(1 if errors(found) else 0)


def _inside(path: Path, records: Path) -> Path:
    if not path.exists():
        raise click.UsageError(f"there is no {path}. Name a record or a folder of records.")
    if not path.resolve().is_relative_to(records.resolve()):
        raise click.UsageError(f"{path} is not below {records}. Name the folder of the records with --records.")
    if path.is_file() and path.suffix not in (".yaml", ".csv"):
        raise click.UsageError(f"{path} is no record. Name a .yaml file, or a folder.")
    return path.resolve()


def _below(file: str, wanted: Iterable[Path]) -> bool:
    here = Path(file).absolute()
    return any(here.is_relative_to(path) or here.resolve().is_relative_to(path) for path in wanted)


def _print_problems(found: list[Problem], catalog: Catalog) -> None:
    for problem in found:
        click.echo(f"{problem} [{problem.severity}: {problem.rule}]")
    counts = f"{count_text(len(catalog.parts), 'part')}, {count_text(len(catalog.positions), 'position')}"
    wrong, doubtful = count_text(len(errors(found)), "error"), count_text(len(warnings(found)), "warning")
    click.echo(f"{counts}: {wrong}, {doubtful}.")


def _print_json_problems(found: list[Problem], catalog: Catalog) -> None:
    answer = {
        "problems": [p.as_json() for p in found],
        "parts": len(catalog.parts),
        "positions": len(catalog.positions),
    }
    click.echo(rows.json_text(answer), nl=False)


def _print_csv_problems(found: list[Problem], _: Catalog) -> None:
    names = ("file", "line", "field", "severity", "rule", "message", "row", "expected")
    click.echo(rows.csv_text(names, [p.as_json() for p in found]), nl=False)


@main.command()
@click.argument("part")
@_FROM
@_TO
@_STEP
@_common
def curve(part: str, from_c: float | None, to_c: float | None, step_k: float, records: Path, form: str) -> None:
    """Resistance of PART over temperature, with its tolerance in ohm and in kelvin.

    PART is the maker's number, "maker number", or the team's own number.
    """
    record = _part(records, part)
    made = part_curve(record)
    t_c = _temperatures_c(from_c, to_c, step_k, made.operating_c)
    table = curve_rows.curve_rows(made.sample(t_c))
    if made.band.incomplete(t_c).any():
        click.echo("The tolerance band is incomplete: a tolerance that it needs is not stated.", err=True)
    head = {"part": record.part.part, "basis": made.curve.basis, "span_c": list(made.curve.span_c)}
    if form == "table":
        click.echo(f"{record.name}: from {_BASIS_WORDS[made.curve.basis]}, {range_text(made.curve.span_c)}")
    _print_rows(form, head, curve_rows.COLUMNS, table)


_BASIS_WORDS = {
    "table": "its R–T table",
    "steinhart-hart": "its Steinhart–Hart coefficients",
    "b-values": "its B-values",
    "b-value": "a single B-value, estimated away from its two temperatures",
}


def _temperatures_c(from_c: float | None, to_c: float | None, step_k: float, range_c: tuple[float, float]) -> Array:
    if from_c is not None and to_c is not None:
        _refuse_falling(from_c, to_c)
    low_c, high_c = range_c
    low_c = from_c if from_c is not None else low_c if to_c is None else min(low_c, to_c)
    high_c = to_c if to_c is not None else max(low_c, high_c)
    if (high_c - low_c) / step_k >= _MOST_ROWS:
        raise click.UsageError(f"that is more than {_MOST_ROWS} rows. Choose a larger --step.")
    steps_c = whole_steps_c if from_c is None else steps_from_c
    return steps_c((low_c, high_c), step_k)


@main.command()
@click.argument("part")
@click.argument("ohm", nargs=-1, required=True, type=Resistance())
@_common
def temperature(part: str, ohm: tuple[float, ...], records: Path, form: str) -> None:
    """Temperature at which PART has each resistance OHM: numbers in Ω, or R-K-M codes."""
    record = _part(records, part)
    table = curve_rows.temperature_rows(part_curve(record).curve, ohm)
    _print_rows(form, {"part": record.part.part}, curve_rows.TEMPERATURE_COLUMNS, table)


@main.command()
@click.argument("part")
@click.option("--equation", required=True, type=click.Choice(tuple(EQUATIONS)), help="Which equation.")
@_FROM
@_TO
@click.option(
    "--minimise",
    type=click.Choice(["kelvin", "ohm"]),
    default="kelvin",
    show_default=True,
    help="What the least squares are taken of; ohm for offset-exponential only.",
)
@_common
def fit(
    part: str, equation: str, from_c: float | None, to_c: float | None, minimise: str, records: Path, form: str
) -> None:
    """Coefficients of an equation fitted to PART, with their largest error in kelvin."""
    record = _part(records, part)
    made = part_curve(record)
    low_c, high_c = made.operating_c
    span_c = (low_c if from_c is None else from_c, high_c if to_c is None else to_c)
    _refuse_falling(*span_c)
    try:
        found = fitted(record, made, equation, span_c, minimise=minimise)
    except ValueError as wrong:
        raise click.UsageError(f"{wrong}.") from None
    if form == "json":
        click.echo(rows.json_text(fit_rows.fit_json(found)), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text(fit_rows.NAMES, fit_rows.fit_rows(found)), nl=False)
    else:
        click.echo(fit_rows.fit_text(found, record.name))


@main.command()
@click.argument("file", type=click.File("rb"))
@click.option("--part", metavar="NUMBER", help="The maker's part number, to stand in the record.")
@click.option("--maker", metavar="NAME", help="The maker, to stand in the record.")
@click.option("--unit", metavar="UNIT", help="Unit of the resistances where the file does not say: ohm, kohm or Mohm.")
@click.option(
    "--temperature-unit", metavar="UNIT", help="Unit of the temperatures where the file does not say: C, F or K."
)
@click.option("--decimal", metavar="SIGN", help="The decimal sign where the file leaves it open: point or comma.")
@click.option(
    "--column",
    metavar="HEADING",
    help="Which resistances to read where the file has several: heading, or number from 1.",
)
def intake(file: BinaryIO, **options: str | None) -> None:
    """A record from the R–T table in FILE: CSV, or text pasted from a data sheet; - is standard input.

    Prints a whole record to be filled in. What was recognised and what was assumed stands in it as comments.
    """
    name = "standard input" if file.name in ("-", "<stdin>") else Path(file.name).name
    try:
        click.echo(record_text(file.read(), name=name, **options), nl=False)
    except Unreadable as refused:
        _stop(f"{name}:{refused.line or 1}: {refused.message}", 1)


@main.command()
@click.argument("reference", metavar="A")
@click.argument("others", nargs=-1, required=True, metavar="B...")
@_FROM
@_TO
@_STEP
@_common
def compare(
    reference: str,
    others: tuple[str, ...],
    from_c: float | None,
    to_c: float | None,
    step_k: float,
    records: Path,
    form: str,
) -> None:
    """What an instrument made for part A reads with each part B fitted, in kelvin.

    Positive where it shows too much; low and high for parts at the limits of their tolerance. Without --from and --to
    over the range that A and B are both made for.
    """
    own, *named = _parts(read_catalog(records), (reference, *others))
    found = [(other, _comparison(own, other, from_c, to_c, step_k)) for other in named]
    if form == "json":
        answer = comparison_rows.comparison_answer(own.part.part, [(other.part.part, c) for other, c in found])
        click.echo(rows.json_text(answer), nl=False)
    elif form == "csv":
        table = [{"part": o.part.part} | row for o, c in found for row in comparison_rows.comparison_rows(c)]
        click.echo(rows.csv_text(("part", *comparison_rows.NAMES), table), nl=False)
    else:
        texts = [rows.table_text(comparison_rows.COLUMNS, comparison_rows.comparison_rows(c)) for _, c in found]
        told = [sentence(own.name, other.name, c) for other, c in found]
        click.echo("\n\n".join(f"{said}\n\n{text}" for said, text in zip(told, texts, strict=True)))


def _comparison(
    own: PartRecord, other: PartRecord, from_c: float | None, to_c: float | None, step_k: float
) -> Comparison:
    parts = part_curve(own), part_curve(other)
    try:
        range_c = common_range_c(*parts) if from_c is None or to_c is None else (from_c, to_c)
    except NoCommonRange as apart:
        raise click.UsageError(f"{own.name} and {other.name}: {apart} Use --from and --to.") from None
    return compared(*parts, _temperatures_c(from_c, to_c, step_k, range_c))


@main.command("families")
@click.option(
    "--within",
    "within_k",
    type=Step(),
    default=DEFAULT_WITHIN_K,
    show_default=True,
    metavar="K",
    help="Largest difference of any two parts of a family, K.",
)
@click.option(
    "--from", "from_c", type=Degrees(), default=DEFAULT_RANGE_C[0], show_default=True, metavar="C", help="°C."
)
@click.option("--to", "to_c", type=Degrees(), default=DEFAULT_RANGE_C[1], show_default=True, metavar="C", help="°C.")
@_common
def families_(within_k: float, from_c: float, to_c: float, records: Path, form: str) -> None:
    """Parts whose nominal curves read the same over a range, each through each other's.

    Parts whose curve does not hold over the whole range are left out and named.
    """
    _refuse_falling(from_c, to_c)
    parts = read_catalog(records).parts
    found = families([part_curve(record) for record in parts], within_k, (from_c, to_c))
    numbers = [[parts[i].part.part for i in group] for group in found.groups]
    left_out = [parts[i] for i in found.left_out]
    if form == "json":
        answer = {"within_k": within_k, "families": numbers, "left_out": [record.part.part for record in left_out]}
        click.echo(rows.json_text(answer), nl=False)
        return
    if left_out:
        names = ", ".join(record.name for record in left_out)
        click.echo(f"Left out, no curve over the whole of {range_text((from_c, to_c))}: {names}.", err=True)
    named = [[parts[i].name for i in group] for group in found.groups]
    _print_rows(form, {}, comparison_rows.FAMILY_COLUMNS, comparison_rows.family_rows(named))


@main.command("budget")
@click.argument("position")
@_STEP
@_common
def budget_(position: str, step_k: float, records: Path, form: str) -> None:
    """Error budget of the part fitted at POSITION: bias, a band for each source, worst case, trips.

    POSITION is its name, such as coolbox-main/RT1. The worst case is looked for between the rows too.
    """
    catalog = read_catalog(records)
    place = _position(catalog, position)
    fitted, made_for = _parts(catalog, (place.fitted, firmware_part(place)))
    low_c, high_c = place.range_c
    if (high_c - low_c) / step_k >= _MOST_ROWS:
        raise click.UsageError(f"that is more than {_MOST_ROWS} rows. Choose a larger --step.")
    found = budget(place, thermistor(fitted), part_curve(made_for), step_k)
    if form == "json":
        click.echo(rows.json_text(budget_rows.budget_answer(found, fitted.part.part)), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text(budget_rows.csv_names(found), budget_rows.csv_rows(found)), nl=False)
    else:
        click.echo(f"{place.position}, {place.purpose}: {fitted.name}")
        click.echo(rows.table_text(budget_rows.columns(found), budget_rows.shown_rows(found)))
    for line in budget_rows.budget_sentences(found):
        click.echo(line, err=form != "table")


def _position(catalog: Catalog, name: str) -> Position:
    """The position a command names; that it is unknown ends the command."""
    places = {record.position.position: record.position for record in catalog.positions}
    known = {number.casefold(): place for number, place in places.items()}
    if name.strip().casefold() not in known:
        raise click.UsageError(f"{name} is not a position of the catalog.{nearest(name, places) or ' Check its name.'}")
    return known[name.strip().casefold()]


def _print_rows(form: str, head: dict[str, Any], columns: tuple[Column, ...], table: list[rows.Row]) -> None:
    if form == "json":
        click.echo(rows.json_text(head | {"rows": table}), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text([c.name for c in columns], table), nl=False)
    else:
        click.echo(rows.table_text(columns, table))


def _refuse_falling(from_c: float, to_c: float) -> None:
    if from_c > to_c:
        raise click.UsageError(f"--from {number_text(from_c)} lies above --to {number_text(to_c)}. Exchange them.")


def _part(records: Path, name: str) -> PartRecord:
    """The part a command names; its problems, or that it is unknown, end the command."""
    (record,) = _parts(read_catalog(records), (name,))
    return record


def _parts(catalog: Catalog, names: tuple[str, ...]) -> list[PartRecord]:
    """The parts a command names; their problems, or that one is unknown, end the command."""
    faulty = errors(catalog.problems)
    found = [_named(catalog, name, faulty) for name in names]
    files = {record.source.file for record in found}
    own = [problem for problem in faulty if problem.file in files]
    for record in found:
        own += errors(findings(Subject(record, part_curve(record), datetime.date.today())))
    for problem in own:
        click.echo(str(problem), err=True)
    if own:
        sys.exit(1)
    if faulty:
        click.echo(f"Other records have {count_text(len(faulty), 'error')}; beadroll check shows them.", err=True)
    return found


def _named(catalog: Catalog, name: str, faulty: tuple[Problem, ...]) -> PartRecord:
    try:
        return catalog.part(name)
    except UnknownPart as unknown:
        if not faulty:
            raise click.UsageError(str(unknown)) from None
        for problem in faulty:
            click.echo(str(problem), err=True)
        _stop(
            f"{unknown} The records have {count_text(len(faulty), 'error')}, shown above; the part may be among them.",
            1,
        )


def _stop(message: str, code: int) -> NoReturn:
    click.echo(message, err=True)
    sys.exit(code)
