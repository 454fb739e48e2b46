"""The commands about several parts: `compare` and `families`."""

from __future__ import annotations

from pathlib import Path

import click

from builder.commands import reading
from builder.commands.answer import print_rows
from builder.commands.named import named_parts
from builder.commands.options import FROM, STEP, TO, Degrees, Step, common, refuse_falling, temperatures_c
from builder.comparisons import Comparison, NoCommonRange, common_range_c, compared, families, sentence
from builder.comparisons.families import DEFAULT_RANGE_C, DEFAULT_WITHIN_K
from builder.exports import comparison_rows, rows
from builder.part_curve import part_curve
from builder.records import PartRecord
from builder.units import range_text


@click.command("compare")
@click.argument("reference", metavar="A")
@click.argument("others", nargs=-1, required=True, metavar="B...")
@FROM
@TO
@STEP
@common
def compare_command(
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
    own, *named = named_parts(reading.catalog(records), (reference, *others))
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
    return compared(*parts, temperatures_c(from_c, to_c, step_k, range_c))


@click.command("families")
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
@common
def families_command(within_k: float, from_c: float, to_c: float, records: Path, form: str) -> None:
    """Parts whose nominal curves read the same over a range, each through each other's.

    Parts whose curve does not hold over the whole range are left out and named.
    """
    refuse_falling(from_c, to_c)
    parts = reading.catalog(records).parts
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
    print_rows(form, {}, comparison_rows.FAMILY_COLUMNS, comparison_rows.family_rows(named))
