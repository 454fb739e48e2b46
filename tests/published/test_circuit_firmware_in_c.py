"""The firmware's table against a C program that makes it and reads it, compiled here: every code of two converters."""

import subprocess

import numpy as np
import pytest
from circuit_records import plain_thermistor, position
from outside_tool import needed

from builder.circuit import Chain

PROGRAM = r"""
#include <math.h>
#include <stdio.h>

/* Resistances from the coldest row on; thermistor low side. */
static const double ROW_C[] = {%(rows_c)s};
static const double ROW_OHM[] = {%(rows_ohm)s};
enum { ROWS = sizeof ROW_C / sizeof ROW_C[0] };

int main(void) {
    long table[ROWS];
    for (int i = 0; i < ROWS; i++)
        table[i] = lround(%(full_scale)d * %(share)s);
    for (long code = 0; code < %(codes)d; code++) {
        int i = 0;
        while (i < ROWS - 2 && %(beyond)s)
            i++;
        double slope = (ROW_C[i + 1] - ROW_C[i]) / (table[i + 1] - table[i]);
        printf("%%.17g\n", ROW_C[i] + (code - table[i]) * slope);
    }
    return 0;
}
"""
# From cold to hot the code falls with the thermistor on the low side, and rises on the high side.
SIDES = {
    "low side": ("ROW_OHM[i] / (ROW_OHM[i] + 22000.0)", "code <= table[i + 1]"),
    "high side": ("22000.0 / (ROW_OHM[i] + 22000.0)", "code >= table[i + 1]"),
}


def by_c(folder, side, bits, full_scale, rows_c, rows_ohm):
    """What the program reads at every code."""
    share, beyond = SIDES[side]
    text = PROGRAM % {
        "rows_c": ", ".join(map(repr, rows_c)),
        "rows_ohm": ", ".join(map(repr, rows_ohm)),
        "full_scale": full_scale,
        "codes": 2**bits,
        "share": share,
        "beyond": beyond,
    }
    (folder / "table.c").write_text(text)
    subprocess.run([needed("gcc"), "-O1", "-Wall", "-Werror", "table.c", "-o", "table", "-lm"], cwd=folder, check=True)
    return np.loadtxt(subprocess.run([folder / "table"], capture_output=True, text=True, check=True).stdout.split())


@pytest.mark.parametrize("step_k", [5, 7])
@pytest.mark.parametrize("less", [0, 1], ids=["full scale 2^n", "full scale 2^n - 1"])
@pytest.mark.parametrize("bits", [10, 12])
@pytest.mark.parametrize("side", SIDES)
def test_every_code_reads_as_in_c(tmp_path, side, bits, less, step_k):
    fitted = plain_thermistor(b_k=3435)
    place = position(
        range_c=[-30, 60],
        circuit={"thermistor": side},
        fixed={"resistance_ohm": 22e3},
        adc={"bits": bits, "full_scale": 2**bits - less},
        firmware={"method": "table", "step_k": step_k},
    )
    rows_c = [*np.arange(-30.0, 60.0, step_k).tolist(), 60.0]
    rows_ohm = fitted.made.curve.resistance_ohm(rows_c).tolist()
    expected_c = by_c(tmp_path, side, bits, place.adc.full_scale, rows_c, rows_ohm)
    reading_c = Chain(place, fitted, fitted.made.curve, 22e3).conversion.reading_c(np.arange(2.0**bits))
    assert len(expected_c) == 2**bits
    np.testing.assert_allclose(reading_c, expected_c, atol=1e-9, rtol=0)
