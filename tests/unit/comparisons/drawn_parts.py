"""Parts for tests of comparisons: made from records, as users' parts are."""

import numpy as np

from builder.part_curve import PartCurve, part_curve
from builder.records import Part, PartRecord, Source
from builder.records.table import TableData


def made(table: TableData | None = None, **fields) -> PartCurve:
    """The curve of a record with these fields."""
    head = {"part": "X1", "maker": "Maker", "body": {"form": "bead"}}
    return part_curve(PartRecord(Part.model_validate(head | fields), Source("X1.yaml", "X1.yaml", {}), table))


def plain(r_ohm=10e3, b_k=3435.0, pct=1.0, b_pct=1.0, operating_c=(-40, 125), **fields) -> PartCurve:
    """R = r·exp(B·(1/T − 1/298.15 K)), with tolerances of both."""
    return made(
        rated={"resistance_ohm": r_ohm, "tolerance_pct": pct},
        b_values=[{"between_c": [25, 85], "b_k": b_k, "tolerance_pct": b_pct}],
        shape="plain",
        limits={"operating_c": operating_c},
        **fields,
    )


def coefficients(a=1.129241e-3, b=2.341077e-4, c=8.775468e-8, span_c=(-40, 125), operating_c=(-40, 125)) -> PartCurve:
    """A part with stated Steinhart–Hart coefficients."""
    return made(
        rated={"resistance_ohm": 10e3, "tolerance_pct": 1},
        steinhart_hart={"a": a, "b": b, "c": c, "span_c": span_c},
        limits={"operating_c": operating_c},
    )


def ceramic_ohm(t_c, r_ohm, b_k, bend_k2):
    """ln R = ln r + B·d + c·d² with d = 1/T − 1/298.15 K: bent as real ceramics are."""
    d = 1 / (np.asarray(t_c) + 273.15) - 1 / 298.15
    return r_ohm * np.exp(b_k * d + bend_k2 * d**2)


def tabled(t_c, r_ohm, digits=5, operating_c=None, **rated) -> PartCurve:
    """A part with an R–T table printed to some digits."""
    t_c, r_ohm = np.array(t_c, dtype=float), np.array([float(f"{r:.{digits}g}") for r in r_ohm])
    table = TableData("X1.yaml", tuple(range(len(t_c))), t_c, r_ohm)
    limits = {} if operating_c is None else {"operating_c": operating_c}
    columns = {"columns": ["t_c", "r_ohm"], "rows": np.stack([t_c, r_ohm], axis=1).tolist()}
    return made(table, rated={"resistance_ohm": 10e3} | rated, r_t_table=columns, limits=limits)


def drawn(seed: int, count: int, spread: float = 1.0) -> list[PartCurve]:
    """Parts of three rated values and every kind of curve; the spread of 1 makes families of a few parts at 0.5 K."""
    random = np.random.default_rng(seed)
    return [_drawn(random, spread) for _ in range(count)]


def _drawn(random: np.random.Generator, spread: float) -> PartCurve:
    r_ohm = random.choice([10e3, 10.5e3, 47e3]) * np.exp(spread * random.normal(0, 0.01))
    b_k, bend_k2 = 3700 + spread * random.uniform(-60, 60), random.uniform(-2.5e5, -1.2e5)
    low, high = (int(end) for end in random.choice([(-40, 125), (-55, 150), (-20, 85), (-12, 97)]))
    kind = random.integers(3)
    if kind == 0:
        return plain(r_ohm, b_k, operating_c=(low, high))
    step_k = int(random.choice([1, 5, 7]))
    t_c = np.unique([*range(low, high, step_k), high])
    if kind == 1:
        return tabled(t_c, ceramic_ohm(t_c, r_ohm, b_k, bend_k2), digits=6)
    y = np.log(ceramic_ohm([low, 25, high], r_ohm, b_k, bend_k2))
    a, b, c = np.linalg.solve(np.stack([y**0, y, y**3], axis=1), 1 / (np.array([low, 25, high]) + 273.15))
    return coefficients(a, b, c, (low, high), (low, high))
