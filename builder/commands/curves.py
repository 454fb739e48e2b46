"""The commands about one part: `curve`, `temperature` and `fit`."""

from __future__ import annotations

from pathlib import Path

import click

from builder.commands.answer import print_rows
from builder.commands.named import named_part
from builder.commands.options import FROM, STEP, TO, Resistance, common, refuse_falling, temperatures_c
from builder.exports import curve_rows, fit_rows, rows
from builder.fits import EQUATIONS
from builder.part_curve import part_curve
from builder.part_fit import fitted
from builder.units import range_text


@click.command("curve")
@click.argument("part")
@FROM
@TO
@STEP
@common
def curve_command(part: str, from_c: float | None, to_c: float | None, step_k: float, records: Path, form: str) -> None:
    """Resistance of PART over temperature, with its tolerance in ohm and in kelvin.

    PART is the maker's number, "maker number", or the team's own number.
    """
    record = named_part(records, part)
    made = part_curve(record)
    t_c = temperatures_c(from_c, to_c, step_k, made.operating_c)
    table = curve_rows.curve_rows(made.sample(t_c))
    if made.band.incomplete(t_c).any():
        click.echo("The tolerance band is incomplete: a tolerance that it needs is not stated.", err=True)
    head = {"part": record.part.part, "basis": made.curve.basis, "span_c": list(made.curve.span_c)}
    if form == "table":
        click.echo(f"{record.name}: from {_BASIS_WORDS[made.curve.basis]}, {range_text(made.curve.span_c)}")
    print_rows(form, head, curve_rows.COLUMNS, table)


_BASIS_WORDS = {
    "table": "its R–T table",
    "steinhart-hart": "its Steinhart–Hart coefficients",
    "b-values": "its B-values",
    "b-value": "a single B-value, estimated away from its two temperatures",
}


@click.command("temperature")
@click.argument("part")
@click.argument("ohm", nargs=-1, required=True, type=Resistance())
@common
def temperature_command(part: str, ohm: tuple[float, ...], records: Path, form: str) -> None:
    """Temperature at which PART has each resistance OHM: numbers in Ω, or R-K-M codes."""
    record = named_part(records, part)
    table = curve_rows.temperature_rows(part_curve(record).curve, ohm)
    print_rows(form, {"part": record.part.part}, curve_rows.TEMPERATURE_COLUMNS, table)


@click.command("fit")
@click.argument("part")
@click.option("--equation", required=True, type=click.Choice(tuple(EQUATIONS)), help="Which equation.")
@FROM
@TO
@click.option(
    "--minimise",
    type=click.Choice(["kelvin", "ohm"]),
    default="kelvin",
    show_default=True,
    help="What the least squares are taken of; ohm for offset-exponential only.",
)
@common
def fit_command(
    part: str, equation: str, from_c: float | None, to_c: float | None, minimise: str, records: Path, form: str
) -> None:
    """Coefficients of an equation fitted to PART, with their largest error in kelvin."""
    record = named_part(records, part)
    made = part_curve(record)
    low_c, high_c = made.operating_c
    span_c = (low_c if from_c is None else from_c, high_c if to_c is None else to_c)
    refuse_falling(*span_c)
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
