"""The axes that have been drawn, in this run or in an earlier one: drawing starts matplotlib, which takes its time."""

from __future__ import annotations

from collections.abc import Mapping

from builder.pages.figures.scales import Scale

_known: dict[Scale, str] = {}
_new: dict[Scale, str] = {}


def axis(scale: Scale) -> str:
    """An axis as SVG, drawn once."""
    if scale not in _known:
        from builder.pages.figures.frames import axis_svg

        _known[scale] = _new[scale] = axis_svg(scale)
    return _known[scale]


def recall(drawn: Mapping[Scale, str]) -> None:
    """Take axes that another run, or another process of this one, has drawn."""
    _known.update(drawn)


def newly_drawn() -> dict[Scale, str]:
    """The axes that this process has drawn since it was last asked."""
    drawn = dict(_new)
    _new.clear()
    return drawn
