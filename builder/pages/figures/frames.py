"""The axes that matplotlib draws: grid, tick labels and name of one scale, as SVG without ids or styles.

Each axis is drawn once per scale and kept. Imported only when the first figure is filled, since importing
matplotlib takes longer than filling hundreds of figures.
"""

from __future__ import annotations

from collections import defaultdict
from functools import cache
from html import escape
from typing import Any

import matplotlib
import numpy as np
from matplotlib.axes import Axes
from matplotlib.axis import Axis
from matplotlib.backend_bases import RendererBase
from matplotlib.figure import Figure
from matplotlib.ticker import EngFormatter, FixedLocator, FuncFormatter, NullLocator

from builder.pages.figures.scales import (
    BOTTOM,
    HEIGHT,
    LEFT,
    PLOT_HEIGHT,
    PLOT_WIDTH,
    WIDTH,
    Quantity,
    Scale,
)

ANCHORS = {"left": "start", "center": "middle", "right": "end"}
# In em, so that a larger font on a small screen stays where it belongs.
SHIFTS = {"top": ' dy=".8em"', "center_baseline": ' dy=".35em"', "baseline": ""}


@cache
def axis_svg(scale: Scale) -> str:
    """Grid lines, tick labels and name of one axis; temperature lies below, all else stands at the left."""
    with matplotlib.rc_context():
        matplotlib.rcdefaults()
        axes = scaled_axes(scale)
        axis = axes.xaxis if scale.quantity == "temperature" else axes.yaxis
        _set_ticks(axis, scale)
        _name_grid(axis, scale)
        _set_label(axis, scale)
        renderer = _AxisRenderer()
        axis.draw(renderer)
    return renderer.svg()


def scaled_axes(scale: Scale) -> Axes:
    """The one set of axes kept for a quantity, limited to the scale: making new ones costs more than drawing."""
    axes = _empty_axes(scale.quantity)
    limit = axes.set_xlim if scale.quantity == "temperature" else axes.set_ylim
    limit(scale.low, scale.high)
    return axes


@cache
def _empty_axes(quantity: Quantity) -> Axes:
    """Axes at the plot's place in the picture, one matplotlib point to a pixel."""
    figure = Figure(figsize=(WIDTH / 72, HEIGHT / 72), dpi=72)
    place = (LEFT / WIDTH, BOTTOM / HEIGHT, PLOT_WIDTH / WIDTH, PLOT_HEIGHT / HEIGHT)
    axes = figure.add_axes(place)
    axes.set_yscale("log" if quantity == "resistance" else "linear")
    return axes


def _set_ticks(axis: Axis, scale: Scale) -> None:
    # The wider distance below keeps the two labels at the lower left corner apart.
    axis.set_tick_params(which="both", length=0, pad=12 if scale.quantity == "temperature" else 6)
    if scale.quantity == "resistance":
        _set_resistance_ticks(axis, scale)
        return
    sign = "+" if scale.quantity == "kelvin" else ""
    steps = np.arange(round(scale.low / scale.step), round(scale.high / scale.step) + 1)
    axis.set_major_locator(FixedLocator((steps * scale.step).tolist()))
    axis.set_major_formatter(FuncFormatter(lambda value, _: _number(value, sign)))


def _set_resistance_ticks(axis: Axis, scale: Scale) -> None:
    first, last = round(np.log10(scale.low)), round(np.log10(scale.high))
    decades = np.arange(first, last + 1, int(scale.step))
    axis.set_major_locator(FixedLocator((10.0**decades).tolist()))
    axis.set_major_formatter(EngFormatter("Ω"))
    between = np.outer(10.0 ** decades[:-1], (2, 5)).ravel().tolist()
    axis.set_minor_locator(FixedLocator(between) if scale.step == 1 else NullLocator())
    if last - first <= 2:
        axis.set_minor_formatter(EngFormatter("Ω"))
    else:
        axis.set_minor_formatter(FuncFormatter(lambda *_: ""))


def _number(value: float, sign: str) -> str:
    return f"{value:{sign}g}".replace("-", "−") if value else "0"


def _name_grid(axis: Axis, scale: Scale) -> None:
    """Give every grid line the class that the style sheet colours; the zero line of kelvin stands out."""
    axis.grid(True, which="both")
    for tick in axis.get_minor_ticks():
        tick.gridline.set_gid("bdf-minor")
    for tick, value in zip(axis.get_major_ticks(), axis.get_majorticklocs(), strict=True):
        zero = scale.quantity == "kelvin" and value == 0
        tick.gridline.set_gid("bdf-zero" if zero else "bdf-grid")


def _set_label(axis: Axis, scale: Scale) -> None:
    """Name the axis: below the middle, or lying above the tick labels, where it is read without turning."""
    axis.set_label_text(scale.label)
    if scale.quantity == "temperature":
        axis.set_label_coords(0.5, -(BOTTOM - 4) / PLOT_HEIGHT)
        axis.label.set(verticalalignment="baseline")
    else:
        axis.set_label_coords(-(LEFT - 2) / PLOT_WIDTH, 1 + 15 / PLOT_HEIGHT)
        axis.label.set(rotation=0, horizontalalignment="left", verticalalignment="baseline")


class _AxisRenderer(RendererBase):
    """Takes what an axis draws: straight lines, one SVG path per class, and texts, one group per anchor."""

    def __init__(self) -> None:
        super().__init__()
        self._class = ""
        self._lines: dict[str, list[str]] = defaultdict(list)
        self._texts: dict[str, list[str]] = defaultdict(list)

    def svg(self) -> str:
        lines = (f'<path class="{name}" d="{"".join(d)}"/>' for name, d in self._lines.items())
        texts = (f'<g text-anchor="{anchor}">{"".join(t)}</g>' for anchor, t in self._texts.items())
        return "".join((*lines, *texts))

    def get_canvas_width_height(self) -> tuple[float, float]:
        return WIDTH, HEIGHT

    def get_text_width_height_descent(self, *_: Any) -> tuple[float, float, float]:
        # The reader's browser chooses the font: texts are placed by their anchors, never by their size.
        return 0.0, 0.0, 0.0

    def open_group(self, s: str, gid: str | None = None) -> None:  # noqa: ARG002
        self._class = gid or ""

    def draw_path(self, gc: Any, path: Any, transform: Any, rgbFace: Any = None) -> None:  # noqa: ARG002, N803
        (x0, y0), (x1, y1) = transform.transform(path.vertices)
        self._lines[self._class].append(f"M{x0:.5g} {HEIGHT - y0:.5g}L{x1:.5g} {HEIGHT - y1:.5g}")

    def draw_text(
        self,
        gc: Any,  # noqa: ARG002
        x: float,
        y: float,
        s: str,
        prop: Any,  # noqa: ARG002
        angle: float,  # noqa: ARG002
        ismath: Any = False,  # noqa: ARG002
        mtext: Any = None,
    ) -> None:
        x, y = mtext.get_transform().transform(mtext.get_position())
        shift = SHIFTS[mtext.get_verticalalignment()]
        text = f'<text x="{x:.5g}" y="{HEIGHT - y:.5g}"{shift}>{escape(s)}</text>'
        self._texts[ANCHORS[mtext.get_horizontalalignment()]].append(text)
