"""The command `bom`."""

from __future__ import annotations

import datetime
import sys
from pathlib import Path
from typing import BinaryIO

import click

from builder.bills import (
    Bill,
    Board,
    Role,
    UnknownBoard,
    Unreadable,
    boards,
    guessed_board,
    judgement,
    named_board,
    read_bill,
)
from builder.bills.bill import LARGEST_BYTES
from builder.commands import reading
from builder.commands.named import stop
from builder.commands.options import common, file_name
from builder.exports import bill_rows, rows
from builder.problems import count_text, errors
from builder.records import Catalog

_NAME_IT = "Name the board with --board, or say --no-board where it has no positions on record."


@click.command("bom")
@click.argument("file", type=click.File("rb"))
@click.option("--board", metavar="NAME", help="The board that the bill is of; default the one that has its references.")
@click.option("--no-board", is_flag=True, help="The board has no positions on record: look at the parts alone.")
@click.option("--sheet", metavar="NAME", help="The sheet of a workbook, where several have headings.")
@click.option("--reference", metavar="HEADING", help="The column of the reference designators.")
@click.option("--number", metavar="HEADING", help="The column of the makers' part numbers.")
@click.option("--maker", metavar="HEADING", help="The column of the makers.")
@click.option("--own-number", metavar="HEADING", help="The column of the own numbers.")
@click.option("--quantity", metavar="HEADING", help="The column of the quantities.")
@common
def bom_command(
    file: BinaryIO,
    board: str | None,
    no_board: bool,
    sheet: str | None,
    reference: str | None,
    number: str | None,
    maker: str | None,
    own_number: str | None,
    quantity: str | None,
    records: Path,
    form: str,
) -> None:
    """Hold the bill of materials in FILE against the ledger: CSV, other divided text, or XLSX; - is standard input.

    Exit 0 if nothing blocks, 1 if something does, 2 if the file cannot be read.
    """
    if board and no_board:
        raise click.UsageError("--board and --no-board exclude each other. Leave one out.")
    headings: dict[Role, str | None] = {
        "reference": reference,
        "number": number,
        "maker": maker,
        "own-number": own_number,
        "quantity": quantity,
    }
    bill = _bill(file, sheet, {role: heading for role, heading in headings.items() if heading is not None})
    catalog = _sound_catalog(records)
    judged = judgement(bill, catalog, None if no_board else _board(bill, catalog, board))
    if form == "json":
        click.echo(rows.json_text(bill_rows.bill_answer(judged)), nl=False)
    elif form == "csv":
        click.echo(rows.csv_text(bill_rows.NAMES, bill_rows.bill_rows(judged)), nl=False)
    else:
        click.echo(rows.table_text(bill_rows.COLUMNS, bill_rows.bill_rows(judged)))
    click.echo(bill_rows.bill_sentence(judged), err=form != "table")
    sys.exit(1 if judged.count("blocks") else 0)


def _bill(file: BinaryIO, sheet: str | None, chosen: dict[Role, str]) -> Bill:
    name = file_name(file)
    try:
        return read_bill(file.read(LARGEST_BYTES + 1), name=name, sheet=sheet, chosen=chosen)
    except Unreadable as refused:
        where = name if refused.line is None else f"{name}:{refused.line}"
        stop(f"{where}: {refused.message}", 2)


def _sound_catalog(records: Path) -> Catalog:
    """The catalog; any error in it ends the command, since an approval in it may be the one that does not hold."""
    catalog = reading.checked(records, datetime.date.today()).catalog
    faulty = errors(catalog.problems)
    for problem in faulty:
        click.echo(str(problem), err=True)
    if faulty:
        stop(f"The records have {count_text(len(faulty), 'error')}, shown above. Correct them first.", 1)
    return catalog


def _board(bill: Bill, catalog: Catalog, name: str | None) -> Board | None:
    """The board that a bill is of; that it must be named, or is unknown, ends the command."""
    known = boards(catalog)
    try:
        if name is None:
            found = guessed_board(known, (reference for line in bill.lines for reference in line.references))
        else:
            found = named_board(known, name)
    except UnknownBoard as unknown:
        raise click.UsageError(str(unknown) if name else f"{unknown} {_NAME_IT}") from None
    if found is not None and not bill.has_references:
        raise click.UsageError("no column of the bill is headed as references. Name it with --reference HEADING.")
    return found
