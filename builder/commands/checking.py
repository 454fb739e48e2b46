"""The command `check`."""

from __future__ import annotations

import datetime
import sys
from collections.abc import Iterable
from pathlib import Path

import click

from builder.commands import reading
from builder.commands.options import TODAY, common
from builder.exports import rows
from builder.problems import Problem, count_text, errors, in_order, warnings
from builder.records import Catalog, LooseTable, PartRecord


@click.command("check")
@click.argument("paths", nargs=-1, type=click.Path(path_type=Path), metavar="[PATH]...")
@common
@TODAY
@click.option(
    "--since", metavar="REVISION", help="Check too that the ledger was kept since this revision of the git repository."
)
def check_command(
    paths: tuple[Path, ...], records: Path, form: str, today: datetime.datetime | None, since: str | None
) -> None:
    """Check the records, all of them or those at PATH.

    Every problem of every record in one run. Exit 0 if there is no error, 1 if there is one.
    """
    wanted = [_inside(path, records) for path in paths]
    catalog = reading.checked(records, today.date() if today else datetime.date.today()).catalog
    # A record's own CSV belongs to it.
    with_tables: list[PartRecord | LooseTable] = [*catalog.parts, *catalog.curveless, *catalog.loose_tables]
    for record in with_tables:
        if record.table is not None and wanted and _below(record.source.file, wanted):
            wanted.append(Path(record.table.file).resolve())
    problems = catalog.problems if since is None else (*catalog.problems, *_not_kept(records, since, catalog))
    found = [problem for problem in in_order(problems) if not wanted or _below(problem.file, wanted)]
    {"table": print_problems, "json": _print_json_problems, "csv": _print_csv_problems}[form](found, catalog)
    sys.exit(1 if errors(found) else 0)


def _not_kept(records: Path, since: str, catalog: Catalog) -> tuple[Problem, ...]:
    # Read only when it is asked for: it needs circuits and swaps, which the rest of check does not.
    from builder.commands.since import slips_since

    return slips_since(records, since, catalog)


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


def print_problems(found: list[Problem], catalog: Catalog) -> None:
    """The problems, a line each, and how many there are of what."""
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
