"""The curves of a checked catalog: only some are held, all are there."""

from pathlib import Path

from builder.crosschecks import checked
from builder.part_curve import part_curve
from builder.records import read_catalog

PARTS = read_catalog(Path(__file__).parents[3] / "parts").parts[:5]


def test_every_curve_is_there_however_few_are_held(monkeypatch):
    monkeypatch.setattr(checked, "_MOST_CURVES", 2)
    curves = checked._Curves(PARTS)
    for record in (*PARTS, *PARTS):
        assert curves[record.source.file].curve.span_c == part_curve(record).curve.span_c
        assert len(curves._made) <= 2
