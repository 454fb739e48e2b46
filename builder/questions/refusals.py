"""What the catalog has against an answer: a number that is taken, a part that is unknown, a file that is there."""

from __future__ import annotations

import os.path
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from builder.problems import clipped
from builder.questions.interview import Refusal
from builder.questions.new_files import record_path
from builder.records import Catalog, UnknownPart, yaml_text

_LAST_OF_NAME = ("maker", "position")  # once it is answered, the record's file is known


def refusals(catalog: Catalog, records: Path, out: Path | None) -> Refusal:
    """What an interview asks beside the model's own checks."""
    taken = {record.part.part.casefold(): record.source.file for record in (*catalog.parts, *catalog.curveless)}
    buys = {n.casefold(): r.name for r in catalog.parts for n in (r.number, r.own_number) if n}
    places = {record.position.position.casefold(): record.source.file for record in catalog.positions}

    def refused(path: yaml_text.Path, held: Mapping[str, Any], value: Any) -> str:
        name, file = str(path[-1]), ""
        if path in (("part",), ("position",)):
            file = (taken if name == "part" else places).get(value.casefold(), "")
        elif path == ("own_number",):
            return _bought(buys.get(value.casefold()), value)
        elif name == "fitted" or path == ("firmware", "part"):
            return _unknown(catalog, value)
        if file:
            return f"{clipped(value)} has a record already, {file}. Change that one."
        target = record_path(records, held) if name in _LAST_OF_NAME and out is None else None
        if target and os.path.lexists(target):
            return f"{target.as_posix()} is there already. Stop here and change that file, or name another with --out."
        return ""

    return refused


def _bought(other: str | None, own: str) -> str:
    if other is None:
        return ""
    return (
        f"{clipped(own)} is a number of {other} already. Give another, or leave it out; add by hand what buys either."
    )


def _unknown(catalog: Catalog, name: str) -> str:
    try:
        catalog.part(name)
    except UnknownPart as unknown:
        return str(unknown)
    return ""
