"""What the Shortlist page is told of a catalog beside the list of parts: all curves at once, and places to start from."""

from __future__ import annotations

from collections.abc import Hashable, Iterable, Mapping, Sequence
from typing import Any, NamedTuple, TypeVar

from builder.exports.curve_script import script_json
from builder.exports.packed_curves import packed_curve
from builder.part_curve import PartCurve
from builder.records import Part

_Value = TypeVar("_Value", bound=Hashable)


class ShortlistRow(NamedTuple):
    """What the page is told of one part."""

    curve: Any
    extends: int
    dissipation_mw_per_k: float | None
    max_power_mw: float | None
    time_constant_s: float | None
    qualification: tuple[str, ...]
    only_for: tuple[str, ...]
    withdrawn: str
    untold: list[Any]


def shortlist_row(part: Part, curve: PartCurve) -> ShortlistRow:
    """The row of one part, from its record alone."""
    return ShortlistRow(
        packed_curve(curve),
        int(curve.curve.extends),
        part.limits.dissipation_mw_per_k,
        part.limits.max_power_mw,
        part.limits.time_constant_s,
        part.qualification,
        _only_for(part),
        _withdrawn(part),
        _untold(curve),
    )


def shortlist_script(rows: Sequence[ShortlistRow], starts: Sequence[Mapping[str, Any]]) -> str:
    """The script: it sets `beadroll.shortlist`.

    Parameters
    ----------
    rows : sequence of ShortlistRow
        In the order of the list of parts; no unit.
    starts : sequence of mappings
        Positions as the page's form holds them; no unit.

    Returns
    -------
    str
        JavaScript, ASCII only; the same for the same records; no unit.
    """
    qualifications = _places(row.qualification for row in rows)
    only_for = _places(row.only_for for row in rows)
    told = [
        [*row[:5], qualifications[row.qualification], only_for[row.only_for], row.withdrawn, *row.untold]
        for row in rows
    ]
    lists = {"qualifications": list(qualifications), "only_for": list(only_for), "starts": list(starts)}
    lines = ",\n".join(map(script_json, told))
    return (
        "window.beadroll = window.beadroll || {};\n"
        f"beadroll.shortlist = {script_json(lists)};\nbeadroll.shortlist.rows = [\n{lines}\n];\n"
    )


def _places(values: Iterable[_Value]) -> dict[_Value, int]:
    return {value: place for place, value in enumerate(dict.fromkeys(values))}


def _only_for(part: Part) -> tuple[str, ...]:
    return part.standing[-1].only_for if part.standing else ()


def _withdrawn(part: Part) -> str:
    """Since when, by whom and why a part is withdrawn; empty where it is not."""
    if part.state() != "withdrawn":
        return ""
    last = part.standing[-1]
    return f"{last.on.isoformat()} ({last.by}: {last.because.rstrip('.')})"


def _untold(curve: PartCurve) -> list[Any]:
    """The fields that its band lacks, and where the band does without them; nothing where it lacks none."""
    band = curve.band
    if band.columns is not None:
        return []
    lacking = {"rated.tolerance_pct": band.rated_tolerance_pct is None, "b_values.tolerance_pct": not band.b_tolerances}
    fields = [field for field, lacks in lacking.items() if lacks]
    return [fields, [stated.between_c for stated in band.accuracy]] if fields else []
