"""Families, against scipy's complete linkage over distances from the exact inverse."""

import numpy as np
import pytest
from drawn_parts import ceramic_ohm, drawn, plain, tabled
from scipy.cluster.hierarchy import fcluster, linkage
from scipy.spatial.distance import squareform

from builder.comparisons import Families, compared, families

GRID_C = np.arange(0.0, 71.0, 5.0)


def distance_k(first, second, t_c=GRID_C):
    """The larger of both directions' largest |reads|."""
    there = first.curve.extended_temperature_c(second.curve.extended_resistance_ohm(t_c)) - t_c
    back = second.curve.extended_temperature_c(first.curve.extended_resistance_ohm(t_c)) - t_c
    return max(np.abs(there).max(), np.abs(back).max())


def all_distances_k(parts, t_c=GRID_C):
    distance = np.zeros((len(parts), len(parts)))
    for i, first in enumerate(parts):
        for j in range(i):
            distance[i, j] = distance[j, i] = distance_k(first, parts[j], t_c)
    return distance


def scipys(parts, limit_k, t_c=GRID_C):
    labels = fcluster(linkage(squareform(all_distances_k(parts, t_c)), "complete"), limit_k, "distance")
    return tuple(sorted(tuple(np.flatnonzero(labels == label).tolist()) for label in np.unique(labels)))


@pytest.mark.parametrize(
    ("seed", "count", "limit_k", "spread"),
    [(1, 200, 0.5, 1), (2, 100, 0.2, 1), (3, 100, 2, 3), (4, 100, 0.01, 0.01), (5, 40, 0.5, 0.1), (6, 2, 5, 1)],
)
def test_families_are_scipys_complete_linkage_cut_at_the_limit(seed, count, limit_k, spread):
    parts = drawn(seed, count, spread)
    found = families(parts, limit_k)
    assert found.left_out == ()
    assert found.groups == scipys(parts, limit_k)


def test_another_range_gives_its_own_families():
    parts = [part for part in drawn(7, 150) if part.curve.span_c[1] >= 110]
    assert families(parts, 0.5, (-12.0, 110.0)).groups == scipys(parts, 0.5, np.array([-12, *range(-10, 111, 5)]))


@pytest.mark.parametrize("seed", [11, 12, 13])
def test_no_pair_of_a_family_is_beyond_the_limit(seed):
    parts = drawn(seed, 200, 0.5)
    groups = families(parts, 0.5).groups
    assert max(map(len, groups)) > 10
    for group in groups:
        assert all_distances_k([parts[i] for i in group]).max() <= 0.5 + 1e-6


def test_every_part_is_in_one_family_or_left_out():
    parts = [*drawn(21, 100), *(plain(operating_c=(10, 125)) for _ in range(3))]
    found = families(parts)
    assert sorted([i for group in found.groups for i in group] + list(found.left_out)) == list(range(103))


def test_order_of_the_parts_does_not_change_their_families():
    parts = [*drawn(31, 150), *drawn(31, 20)]
    shuffled = np.random.default_rng(1).permutation(len(parts))
    turned = families([parts[i] for i in shuffled]).groups
    assert {frozenset(shuffled[list(group)].tolist()) for group in turned} == set(
        map(frozenset, families(parts).groups)
    )


def test_parts_whose_curve_ends_within_the_range_are_left_out():
    rows_c = np.arange(0, 66, 5)
    short = tabled(rows_c, ceramic_ohm(rows_c, 10e3, 3435, 0), operating_c=(-40, 125))
    parts = [short, plain(), plain(operating_c=(1, 125)), plain(operating_c=(0, 70))]
    assert families(parts) == Families(((1, 3),), (0, 2))


@pytest.mark.parametrize(("limit_k", "groups"), [(0.5001, ((0, 1),)), (0.4999, ((0,), (1,)))])
def test_limit_decides_to_a_tenth_of_a_millikelvin(limit_k, groups):
    t_c = np.arange(-40.0, 131.0, 1.0)
    here = tabled(t_c, ceramic_ohm(t_c, 10e3, 3700, -1.7e5), digits=12)
    # The same ceramic 0.5 K hotter everywhere: reads exactly that through the first, and −0.5 K the other way.
    moved = tabled(t_c, ceramic_ohm(t_c + 0.5, 10e3, 3700, -1.7e5), digits=12)
    assert np.abs(compared(here, moved, GRID_C).reads_k - 0.5).max() < 2e-5
    assert families([here, moved], limit_k).groups == groups


def test_no_parts_make_no_families():
    assert families([]) == Families((), ())


@pytest.mark.parametrize("within_k", [0.0, -1.0, float("nan")])
def test_limit_that_is_not_above_zero_is_refused(within_k):
    with pytest.raises(ValueError, match=r"^the limit of a family must be above zero$"):
        families([plain()], within_k)
