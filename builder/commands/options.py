"""Arguments and options that several commands share, and what is refused of them."""

from __future__ import annotations

import math
from collections.abc import Callable
from pathlib import Path
from typing import Any, BinaryIO, TypeVar

import click

from builder.part_curve import steps_from_c, whole_steps_c
from builder.units import Array, number_text, ohms_from_text

MOST_ROWS = 100_000
_Command = TypeVar("_Command", bound=Callable[..., Any])

RECORDS = click.option(
    "--records",
    default="parts",
    show_default=True,
    type=click.Path(exists=True, file_okay=False, path_type=Path),
    metavar="DIR",
    help="Folder of the records.",
)
FORMAT = click.option(
    "--format",
    "form",
    type=click.Choice(["table", "json", "csv"]),
    default="table",
    show_default=True,
    help="How to answer.",
)
TODAY = click.option(
    "--today",
    type=click.DateTime(["%Y-%m-%d"]),
    metavar="DATE",
    help="The day to judge by, for output that does not change; default today.",
)
_TABLE_OPTIONS = (
    click.option(
        "--unit", metavar="UNIT", help="Unit of the resistances where the file does not say: ohm, kohm or Mohm."
    ),
    click.option(
        "--temperature-unit", metavar="UNIT", help="Unit of the temperatures where the file does not say: C, F or K."
    ),
    click.option("--decimal", metavar="SIGN", help="The decimal sign where the file leaves it open: point or comma."),
    click.option(
        "--column",
        metavar="HEADING",
        help="Which resistances to read where the file has several: heading, or number from 1.",
    ),
)


def table_options(command: _Command) -> _Command:
    """The options that settle what a file's R–T table leaves open."""
    for option in reversed(_TABLE_OPTIONS):
        command = option(command)
    return command


REFUSES_CACHE = "builder.commands.refuses_cache"


def _refuse_cache(context: click.Context, _: click.Parameter, refused: bool) -> None:
    context.meta[REFUSES_CACHE] = refused


NO_CACHE = click.option(
    "--no-cache",
    is_flag=True,
    expose_value=False,
    callback=_refuse_cache,
    help="Read and check every record anew, and keep nothing for the next run.",
)


def common(command: _Command) -> _Command:
    """The options that every command about the records takes."""
    return RECORDS(FORMAT(NO_CACHE(command)))


def file_name(file: BinaryIO) -> str:
    """What messages call a file argument."""
    return "standard input" if file.name in ("-", "<stdin>") else Path(file.name).name


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


FROM = click.option(
    "--from",
    "from_c",
    type=Degrees(),
    metavar="C",
    help="First temperature, °C; default the operating range, of several parts the common one.",
)
TO = click.option("--to", "to_c", type=Degrees(), metavar="C", help="Last temperature, °C.")
STEP = click.option(
    "--step",
    "step_k",
    type=Step(),
    default=5.0,
    show_default=True,
    metavar="K",
    help="Distance of the rows, K: from --from on, or at whole steps and both ends of the range.",
)


def temperatures_c(from_c: float | None, to_c: float | None, step_k: float, range_c: tuple[float, float]) -> Array:
    """The temperatures of a command's rows: whole steps and both ends, or from --from on. [°C]"""
    if from_c is not None and to_c is not None:
        refuse_falling(from_c, to_c)
    low_c, high_c = range_c
    low_c = from_c if from_c is not None else low_c if to_c is None else min(low_c, to_c)
    high_c = to_c if to_c is not None else max(low_c, high_c)
    if (high_c - low_c) / step_k >= MOST_ROWS:
        raise click.UsageError(f"that is more than {MOST_ROWS} rows. Choose a larger --step.")
    steps_c = whole_steps_c if from_c is None else steps_from_c
    return steps_c((low_c, high_c), step_k)


def refuse_falling(from_c: float, to_c: float) -> None:
    """Refuse a range whose ends are exchanged."""
    if from_c > to_c:
        raise click.UsageError(f"--from {number_text(from_c)} lies above --to {number_text(to_c)}. Exchange them.")
