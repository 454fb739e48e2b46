"""What is drawn over a frame: lines, bands, dots and limits, as SVG in tenths of a pixel.

Whole tenths, each point relative to the one before, keep a line of 166 rows near 1 kB and fast to write.
Missing values (NaN) leave a gap. `dashed` marks the points that are extrapolated or estimated.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from builder.pages.figures.scales import PLOT_HEIGHT, PLOT_WIDTH, FloatArray, Scale

BoolArray = NDArray[np.bool_]
MOST_POINTS = 200
# Far enough outside for a line to leave the plot at its true slope, near enough for a browser's arithmetic.
FARTHEST_TENTHS = 100_000
# Upright strokes across a layer, this far apart; the style sheet breaks them into dashes and dots. Layers of other
# series are plain.
HATCH_TENTHS = {2: 50, 3: 60, 4: 80, 6: 30}


@dataclass(frozen=True)
class Plot:
    """The plot area between a temperature scale and an upright one."""

    x: Scale
    y: Scale

    def points(self, t_c: FloatArray, *columns: FloatArray) -> FloatArray:
        """Places in tenths of a pixel from the plot's upper left: x, then one y for each column given."""
        across = self.x.fraction(t_c) * (10 * PLOT_WIDTH)
        down = [(1 - self.y.fraction(column)) * (10 * PLOT_HEIGHT) for column in columns]
        return np.clip(np.stack([across, *down], axis=1), -FARTHEST_TENTHS, FARTHEST_TENTHS)


@dataclass(frozen=True, eq=False)
class Line:
    """Values over temperature; `series` 1 to 4 chooses colour and dash pattern."""

    name: str
    t_c: FloatArray
    values: FloatArray
    dashed: BoolArray | None = None
    series: int = 1

    @property
    def extent(self) -> FloatArray:
        """The values that the axis must hold."""
        return self.values

    def svg(self, plot: Plot) -> str:
        """What is drawn over the frame; empty where nothing shows."""
        near, far = _near_and_far(plot.points(self.t_c, self.values), self.dashed)
        style = f"bdf-line bdf-s{self.series}"
        return _path(f"{style} bdf-far", _lines(far)) + _path(style, _lines(near))

    def swatch(self) -> str:
        """The sample of it in the key."""
        return _path(f"bdf-line bdf-s{self.series}", "M0 60h300")


@dataclass(frozen=True, eq=False)
class Band:
    """Everything between two edges over temperature; left out where it is thinner than a pixel throughout."""

    name: str
    t_c: FloatArray
    low: FloatArray
    high: FloatArray
    dashed: BoolArray | None = None
    series: int = 1

    @property
    def extent(self) -> FloatArray:
        """The values that the axis must hold."""
        return np.concatenate([self.low, self.high])

    def svg(self, plot: Plot) -> str:
        """What is drawn over the frame; empty where nothing shows."""
        points = plot.points(self.t_c, self.low, self.high)
        if not np.any(points[:, 1] - points[:, 2] > 10):
            return ""
        near, far = _near_and_far(points, self.dashed)
        return self._area(far, " bdf-far") + self._area(near, "")

    def _area(self, points: FloatArray, more: str) -> str:
        edges = [(_thinned(run[:, :2]), _thinned(run[:, ::2])) for run in _runs(points)]
        fill = "".join(_moves(np.concatenate([low, high[::-1]])) + "z" for low, high in edges)
        outline = "".join(_moves(low) + _moves(high) for low, high in edges)
        area = _path(f"bdf-band bdf-b{self.series}{more}", fill)
        return area + _path(f"bdf-edge bdf-s{self.series}{more}", outline)

    def swatch(self) -> str:
        """The sample of it in the key."""
        area = _path(f"bdf-band bdf-b{self.series}", "M0 10h300v100h-300z")
        return area + _path(f"bdf-edge bdf-s{self.series}", "M0 10h300M0 110h300")


@dataclass(frozen=True, eq=False)
class Layer:
    """One layer of a stack over temperature; `series` 1 to 6 chooses colour and hatching."""

    name: str
    t_c: FloatArray
    low: FloatArray
    high: FloatArray
    series: int

    @property
    def extent(self) -> FloatArray:
        """The values that the axis must hold."""
        return self.high

    @property
    def values(self) -> FloatArray:
        """The layer's middle, where its number stands."""
        middle: FloatArray = (self.low + self.high) / 2
        return middle

    def svg(self, plot: Plot) -> str:
        """What is drawn over the frame; empty where there is no number."""
        runs = [_thinned(run) for run in _runs(plot.points(self.t_c, self.low, self.high))]
        fill = "".join(_moves(np.concatenate([run[:, :2], run[::-1, ::2]])) + "z" for run in runs)
        hatching = "".join(_uprights(run, HATCH_TENTHS[self.series]) for run in runs if self.series in HATCH_TENTHS)
        return _path(f"bdf-layer bdf-l{self.series}", fill) + _path(f"bdf-hatch bdf-h{self.series}", hatching)

    def swatch(self) -> str:
        """The sample of it in the key."""
        area = _path(f"bdf-layer bdf-l{self.series}", "M0 0h300v120h-300z")
        box = np.array([[0.0, 120.0, 0.0], [300.0, 120.0, 0.0]])
        hatching = _uprights(box, HATCH_TENTHS[self.series]) if self.series in HATCH_TENTHS else ""
        return area + _path(f"bdf-hatch bdf-h{self.series}", hatching)


@dataclass(frozen=True, eq=False)
class Dots:
    """Single points, as discs or as rings; points outside the plot are left out."""

    name: str
    t_c: FloatArray
    values: FloatArray
    rings: bool = False

    @property
    def extent(self) -> FloatArray:
        """The values that the axis must hold."""
        return self.values

    def svg(self, plot: Plot) -> str:
        """What is drawn over the frame; empty where nothing shows."""
        points = plot.points(self.t_c, self.values)
        inside = np.all((points >= 0) & (points <= (10 * PLOT_WIDTH, 10 * PLOT_HEIGHT)), axis=1)
        places = np.rint(points[inside]).astype(int).tolist()
        if self.rings:
            return "".join(f'<circle class="bdf-ring" cx="{x}" cy="{y}" r="60"/>' for x, y in places)
        # A stroke of no length with round ends is a disc: one path holds them all.
        return _path("bdf-dots", "".join(f"M{x} {y}h0" for x, y in places))

    def swatch(self) -> str:
        """The sample of it in the key."""
        if self.rings:
            return '<circle class="bdf-ring" cx="150" cy="60" r="50"/>'
        return _path("bdf-dots", "M150 60h0")


@dataclass(frozen=True)
class Limit:
    """Horizontal lines at plus and minus a limit."""

    name: str
    limit_k: float

    @property
    def extent(self) -> FloatArray:
        """The values that the axis must hold."""
        return np.array([-self.limit_k, self.limit_k])

    def svg(self, plot: Plot) -> str:
        """What is drawn over the frame; empty where nothing shows."""
        (_, high), (_, low) = plot.points(np.zeros(2), -self.extent).round().astype(int).tolist()
        return _path("bdf-limit", f"M0 {high}h{10 * PLOT_WIDTH}M0 {low}h{10 * PLOT_WIDTH}")

    def swatch(self) -> str:
        """The sample of it in the key."""
        return _path("bdf-limit", "M0 60h300")


Mark = Line | Band | Layer | Dots | Limit


def _near_and_far(points: FloatArray, dashed: BoolArray | None) -> tuple[FloatArray, FloatArray]:
    """The points drawn solid and those drawn dashed, NaN elsewhere; the step between them is dashed."""
    if dashed is None:
        return points, points[:0]
    beside = dashed.copy()
    beside[1:] |= dashed[:-1]
    beside[:-1] |= dashed[1:]
    near, far = points.copy(), points.copy()
    near[dashed] = np.nan
    far[~beside] = np.nan
    return near, far


def _runs(points: FloatArray) -> list[FloatArray]:
    whole = np.zeros(len(points) + 2, dtype=bool)
    whole[1:-1] = np.isfinite(points).all(axis=1)
    ends = np.flatnonzero(whole[1:] != whole[:-1])
    return [points[start:stop] for start, stop in ends.reshape(-1, 2).tolist()]


def _thinned(points: FloatArray) -> FloatArray:
    """At most `MOST_POINTS` of a run, its ends and its extremes among them."""
    if len(points) <= MOST_POINTS:
        return points
    kept = np.zeros(len(points), dtype=bool)
    kept[np.linspace(0, len(points) - 1, MOST_POINTS - 2).round().astype(int)] = True
    kept[[points[:, 1].argmin(), points[:, 1].argmax()]] = True
    return points[kept]


def _lines(points: FloatArray) -> str:
    return "".join(_moves(_thinned(run)) for run in _runs(points))


def _moves(run: FloatArray) -> str:
    places = np.rint(run).astype(int)
    steps = (places[1:] - places[:-1]).ravel().tolist()
    # Writing the whole list at once is three times as fast as joining its numbers. A minus sign parts two
    # numbers as well as a space does.
    text = "l" + str(steps)[1:-1].replace(", ", " ").replace(" -", "-") if steps else "h0"
    return f"M{places[0, 0]} {places[0, 1]}{text}"


def _uprights(run: FloatArray, distance: int) -> str:
    """Strokes from the low to the high edge of a run of points, at whole multiples of a distance."""
    x = np.arange(np.ceil(run[0, 0] / distance), run[-1, 0] / distance) * distance
    low, high = (np.interp(x, run[:, 0], edge) for edge in run.T[1:])
    places = np.rint(np.column_stack([x, low, high])).astype(int).tolist()
    return "".join(f"M{x} {y}V{end}" for x, y, end in places)


def _path(style: str, d: str) -> str:
    return f'<path class="{style}" d="{d}"/>' if d else ""
