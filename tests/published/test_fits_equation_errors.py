"""What each equation leaves over a span, against bands found over public R–T tables."""

import json
from pathlib import Path

import pytest

from builder.fits import fit

DATA = json.loads((Path(__file__).parent / "data" / "equation_errors.json").read_text(encoding="utf-8"))


# Four spans lie inside both tables: two equations over four spans of two tables. The points are the tables' rows, every
# 10 K, so that a span's ends need not be among them; B-value, whose worst is at the ends, has therefore no band here.
@pytest.mark.parametrize("table", [0, 1], ids=["table 2", "table 3"])
@pytest.mark.parametrize("band", DATA["bands"], ids=lambda band: f"{band['equation']} {band['between_c']}")
def test_largest_error_lies_in_the_band_of_public_tables(table, band):
    fitted = fit(band["equation"], *zip(*DATA["tables"][table], strict=True), between_c=band["between_c"])
    assert band["from_k"] <= fitted.worst_k <= band["to_k"]
