"""What the Shortlist page is told of a catalog beside the list of parts: all curves at once, and places to start from."""

from __future__ import annotations

from collections.abc import Hashable, Iterable, Mapping, Sequence
from typing import Any, TypeVar

from builder.exports.curve_script import script_json
from builder.exports.packed_curves import packed_curve
from builder.part_curve import PartCurve
from builder.records import Part, PartRecord

_Value = TypeVar("_Value", bound=Hashable)


def shortlist_script(
    parts: Sequence[PartRecord], curves: Mapping[str, PartCurve], starts: Sequence[Mapping[str, Any]]
) -> str:
    """The script: it sets `beadroll.shortlist`.

    Parameters
    ----------
    parts : sequence of PartRecord
        In the order of the list of parts; no unit.
    curves : mapping of str to PartCurve
        Each part's curve, by the file of its record; no unit.
    starts : sequence of mappings
        Positions as the page's form holds them; no unit.

    Returns
    -------
    str
        JavaScript, ASCII only; the same for the same records; no unit.
    """
    qualifications = _places(record.part.qualification for record in parts)
    only_for = _places(_only_for(record.part) for record in parts)
    rows = [
        [
            packed_curve(curves[record.source.file]),
            int(curves[record.source.file].curve.extends),
            record.part.limits.dissipation_mw_per_k,
            record.part.limits.time_constant_s,
            qualifications[record.part.qualification],
            only_for[_only_for(record.part)],
            _withdrawn(record.part),
            *_untold(curves[record.source.file]),
        ]
        for record in parts
    ]
    lists = {"qualifications": list(qualifications), "only_for": list(only_for), "starts": list(starts)}
    lines = ",\n".join(map(script_json, rows))
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
