"""Reference designators: lists and ranges in one cell."""

import pytest

from builder.bills.references import references


@pytest.mark.parametrize(
    ("cell", "found"),
    [
        ("RT1", "RT1"),
        ("RT1, RT2", "RT1 RT2"),
        ("RT1 RT2", "RT1 RT2"),
        ("RT1,RT2;RT3/RT4|RT5", "RT1 RT2 RT3 RT4 RT5"),
        ("RT1-RT4", "RT1 RT2 RT3 RT4"),
        ("RT1 – RT3, RT7", "RT1 RT2 RT3 RT7"),
        ("RT1..RT3 RT5…RT6", "RT1 RT2 RT3 RT5 RT6"),
        ("RT1 to RT3", "RT1 RT2 RT3"),
        ("RT1 bis RT3", "RT1 RT2 RT3"),
        ("RT1-4", "RT1 RT2 RT3 RT4"),
        ("rt1-RT2", "rt1 rt2"),
        ("RT08-RT10", "RT08 RT09 RT10"),
        ("R1-RT4", "R1-RT4"),
        ("RT4-RT1", "RT4-RT1"),
        ("RT1-RT99999", "RT1-RT99999"),
        ("RT1-A", "RT1-A"),
        ("coolbox-main/RT1", "coolbox-main RT1"),
        ("12", ""),
        ("", ""),
    ],
)
def test_a_cell_names_these_references(cell, found):
    assert references(cell) == tuple(found.split())
