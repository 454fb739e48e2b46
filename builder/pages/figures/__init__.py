"""Static figures: SVG with the look of matplotlib, filled in as text.

Every figure is a `<figure class="bd-figure">` to be put into a page as it stands. It carries no ids, takes its
colours from the page and says its title and description to a screen reader. Texts are plain; they are
escaped here.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from html import escape

import numpy as np

from builder.pages.figures.axes import axis
from builder.pages.figures.marks import Band, BoolArray, Dots, Layer, Limit, Line, Mark, Plot
from builder.pages.figures.scales import (
    HEIGHT,
    LEFT,
    PLOT_HEIGHT,
    PLOT_WIDTH,
    TOP,
    WIDTH,
    FloatArray,
    Scale,
    kelvin_scale,
    resistance_scale,
    temperature_scale,
    width_scale,
)

__all__ = [
    "Band",
    "Dots",
    "Limit",
    "Line",
    "Mark",
    "reads_figure",
    "residual_figure",
    "resistance_figure",
    "stack_figure",
    "tolerance_figure",
]

MOST_DOTS = 39
LABEL_DISTANCE = 18


def resistance_figure(
    title: str,
    description: str,
    t_c: FloatArray,
    r_ohm: FloatArray,
    *,
    r_min_ohm: FloatArray | None = None,
    r_max_ohm: FloatArray | None = None,
    dashed: BoolArray | None = None,
    dashed_name: str = "extrapolated",
    data: Dots | None = None,
    rated: tuple[float, float] | None = None,
) -> str:
    """Resistance over temperature on a logarithmic axis.

    `dashed` marks extrapolated or estimated points and `dashed_name` says which; `data` are the record's own
    points, drawn when they are few; `rated` is the rated temperature [°C] and resistance [Ω].
    """
    marks: list[Mark] = [Line("nominal", t_c, r_ohm, dashed)]
    if r_min_ohm is not None and r_max_ohm is not None:
        marks.insert(0, Band("minimum to maximum", t_c, r_min_ohm, r_max_ohm, dashed))
    if data is not None and len(data.t_c) <= MOST_DOTS:
        marks.append(data)
    if rated is not None:
        marks.append(Dots("rated", np.array(rated[:1]), np.array(rated[1:]), rings=True))
    scale = resistance_scale(np.concatenate([mark.extent for mark in marks]))
    return _figure(title, description, scale, marks, dashed_name)


def tolerance_figure(
    title: str,
    description: str,
    t_c: FloatArray,
    reads_min_k: FloatArray,
    reads_max_k: FloatArray,
    *,
    dashed: BoolArray | None = None,
    dashed_name: str = "extrapolated",
) -> str:
    """What the tolerance means in kelvin over temperature."""
    band = Band("within tolerance", t_c, reads_min_k, reads_max_k, dashed)
    return reads_figure(title, description, [band], dashed_name=dashed_name)


def residual_figure(title: str, description: str, t_c: FloatArray, residuals_k: Mapping[str, FloatArray]) -> str:
    """What up to four fitted equations, by name, read beside the curve they were fitted to."""
    lines = [
        Line(name, t_c, values_k, series=number) for number, (name, values_k) in enumerate(residuals_k.items(), start=1)
    ]
    return reads_figure(title, description, lines, label="Residual (K)")


def reads_figure(
    title: str,
    description: str,
    marks: Sequence[Mark],
    *,
    label: str = "Reads (K)",
    dashed_name: str = "extrapolated",
) -> str:
    """Any lines, bands, dots and limits in kelvin over temperature, drawn in the order given."""
    scale = kelvin_scale(np.concatenate([mark.extent for mark in marks]), label)
    return _figure(title, description, scale, marks, dashed_name)


def stack_figure(
    title: str, description: str, t_c: FloatArray, widths_k: Mapping[str, FloatArray], *, label: str
) -> str:
    """Up to six widths, by name, stacked over temperature from the first one up."""
    tops_k = np.cumsum(list(widths_k.values()), axis=0)
    layers = [
        Layer(name, t_c, top_k - width_k, top_k, series)
        for series, ((name, width_k), top_k) in enumerate(zip(widths_k.items(), tops_k, strict=True), start=1)
    ]
    return _figure(title, description, width_scale(tops_k[-1], label), layers, "")


def _figure(title: str, description: str, y: Scale, marks: Sequence[Mark], dashed_name: str) -> str:
    over_t = [mark for mark in marks if not isinstance(mark, Limit)]
    plot = Plot(temperature_scale(np.concatenate([mark.t_c for mark in over_t])), y)
    drawn = [(mark, svg) for mark in marks if (svg := mark.svg(plot))]
    return (
        f'<figure class="bd-figure"><svg viewBox="0 0 {WIDTH} {HEIGHT}" role="img">'
        f"<title>{escape(title)}</title><desc>{escape(description)}</desc>"
        f"{_frame(plot)}{_clipped(drawn)}{_unclipped(drawn)}{_numbers(marks, plot)}</svg>"
        f"<figcaption>{_key(drawn, dashed_name)}</figcaption></figure>"
    )


def _frame(plot: Plot) -> str:
    return axis(plot.x) + axis(plot.y)


def _clipped(drawn: Sequence[tuple[Mark, str]]) -> str:
    """Lines and bands in a picture of their own, which cuts off what lies outside without a clip path's id."""
    inner = "".join(svg for mark, svg in drawn if not isinstance(mark, Dots))
    place = f'x="{LEFT}" y="{TOP}" width="{PLOT_WIDTH}" height="{PLOT_HEIGHT}"'
    return f'<svg {place} viewBox="0 0 {10 * PLOT_WIDTH} {10 * PLOT_HEIGHT}">{inner}</svg>'


def _unclipped(drawn: Sequence[tuple[Mark, str]]) -> str:
    """Dots, whole even on the border."""
    inner = "".join(svg for mark, svg in drawn if isinstance(mark, Dots))
    return f'<g transform="translate({LEFT} {TOP}) scale(.1)">{inner}</g>' if inner else ""


def _numbered(marks: Sequence[Mark]) -> list[Line | Layer]:
    return [mark for mark in marks if isinstance(mark, Line | Layer)]


def _numbers(marks: Sequence[Mark], plot: Plot) -> str:
    """The number of each of several lines or layers beside its right end, kept apart, for eyes that see no colour."""
    ends = []
    for line in _numbered(marks):
        down = plot.points(line.t_c, line.values)[:, 1] / 10
        ends += [(y, line.series) for y in down[np.isfinite(down)][-1:].clip(0, PLOT_HEIGHT).tolist()]
    if len(ends) < 2:
        return ""
    texts, lowest = [], 0.0
    for place, (y, number) in enumerate(sorted(ends)):
        room = PLOT_HEIGHT - LABEL_DISTANCE * (len(ends) - 1 - place)
        y = min(max(y, lowest), room)
        lowest = y + LABEL_DISTANCE
        texts.append(f'<text x="{WIDTH - 20}" y="{TOP + y:.0f}" dy=".35em">{number}</text>')
    return "".join(texts)


def _key(drawn: Sequence[tuple[Mark, str]], dashed_name: str) -> str:
    numbered = len(_numbered([mark for mark, _ in drawn])) > 1
    entries = [_entry(mark.swatch(), _key_text(mark, numbered)) for mark, _ in drawn]
    if any("bdf-far" in svg for _, svg in drawn):
        entries.append(_entry('<path class="bdf-line bdf-far" d="M0 60h300"/>', dashed_name))
    return "".join(entries)


def _key_text(mark: Mark, numbered: bool) -> str:
    return f"{mark.series} {mark.name}" if numbered and isinstance(mark, Line | Layer) else mark.name


def _entry(swatch: str, text: str) -> str:
    return f'<span><svg viewBox="0 0 300 120" aria-hidden="true">{swatch}</svg>{escape(text)}</span>'
