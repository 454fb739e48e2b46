"""Laws of comparing: of a part with itself, of a swap turned round, of bands, and of families that grow."""

import itertools

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from builder.comparisons import NearestParts, compared, families
from builder.part_curve import PartCurve, part_curve
from builder.records import Part, PartRecord, Source

LAWS = settings(derandomize=True, deadline=None, max_examples=60, database=None)
GRID_C = np.arange(0.0, 71.0, 5.0)


def _made(r_ohm, b_k, tolerance_pct, shape, ends_c) -> PartCurve:
    fields = {
        "part": "X1",
        "maker": "Maker",
        "body": {"form": "bead"},
        "rated": {"resistance_ohm": r_ohm, "tolerance_pct": tolerance_pct},
        "b_values": [{"between_c": pair, "b_k": b_k + more, "tolerance_pct": 1} for pair, more in _PAIRS[shape]],
        "shape": "plain" if shape == "plain" else "typical",
        "limits": {"operating_c": ends_c},
    }
    return part_curve(PartRecord(Part.model_validate(fields), Source("X1.yaml", "X1.yaml", {})))


_PAIRS = {
    "plain": [((25, 85), 0)],
    "typical": [((25, 85), 0)],
    "several": [((25, 50), -40), ((25, 85), 0), ((25, 100), 12)],
}
ranges_c = st.tuples(st.integers(-60, -10), st.integers(70, 160)).map(list)
shapes = st.sampled_from(sorted(_PAIRS))
parts = st.builds(_made, st.floats(1e2, 1e6), st.floats(3000, 4600), st.floats(0.1, 10), shapes, ranges_c)
# Close enough together that families have members.
near_parts = st.builds(_made, st.floats(9.7e3, 10.3e3), st.floats(3400, 3440), st.floats(0.1, 10), shapes, ranges_c)


@given(parts)
@LAWS
def test_part_against_itself_reads_nothing(part):
    found = compared(part, part)
    assert np.abs(found.reads_k).max() < 1e-6
    assert found.within_reference_band
    assert found.bands_overlap


@given(parts)
@LAWS
def test_own_band_is_the_others_band_of_a_part_against_itself(part):
    found = compared(part, part)
    np.testing.assert_allclose(found.reads_min_k, found.reference_min_k, atol=1e-6)
    np.testing.assert_allclose(found.reads_max_k, found.reference_max_k, atol=1e-6)


@given(near_parts, near_parts)
@LAWS
def test_band_holds_the_nominal_reading(reference, other):
    found = compared(reference, other)
    assert (found.reads_min_k <= found.reads_k).all()
    assert (found.reads_k <= found.reads_max_k).all()
    assert found.worst_with_tolerance_k >= abs(found.worst_k)


@given(near_parts, near_parts)
@LAWS
def test_turning_the_swap_round_turns_the_sign(reference, other):
    there, back = compared(reference, other, GRID_C), compared(other, reference, GRID_C)
    # B's reading of A at what A showed leads back to the true temperature: exact.
    again = compared(other, reference, GRID_C + there.reads_k)
    np.testing.assert_allclose(again.reads_k, -there.reads_k, atol=2e-6)
    # At the same temperature only roughly: between such parts a reading changes by less than 0.1 K a kelvin.
    assert (np.abs(back.reads_k + there.reads_k) <= 0.1 * np.abs(there.reads_k) + 2e-6).all()


@given(st.lists(near_parts, max_size=12), near_parts)
@LAWS
def test_added_part_never_makes_a_pair_of_one_family_exceed_the_limit(catalog, added):
    for group in families([*catalog, added], 0.5).groups:
        members = [[*catalog, added][i] for i in group]
        reads_k = [compared(first, second, GRID_C).reads_k for first in members for second in members]
        assert np.abs(reads_k).max() <= 0.5 + 1e-6


@given(st.lists(near_parts, min_size=1, max_size=12))
@LAWS
def test_two_families_are_never_near_enough_to_be_one(catalog):
    groups = families(catalog, 0.5).groups
    for first, second in itertools.combinations(groups, 2):
        reads_k = [compared(catalog[i], catalog[j], GRID_C).reads_k for i, j in _both_ways(first, second)]
        assert np.abs(reads_k).max() > 0.5 - 1e-6


def _both_ways(first, second):
    return [pair for i in first for j in second for pair in ((i, j), (j, i))]


@given(st.lists(near_parts, min_size=2, max_size=20))
@LAWS
def test_added_part_never_makes_a_neighbour_farther(catalog):
    before, after = (NearestParts(some).of(0, 3) for some in (catalog[:-1], catalog))
    for earlier, later in zip(before, after, strict=False):
        assert abs(later.worst_k) <= abs(earlier.worst_k)
