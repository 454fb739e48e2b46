"""Complete-linkage groups, against scipy.cluster.hierarchy."""

import numpy as np
import pytest
from scipy.cluster.hierarchy import fcluster, linkage
from scipy.spatial.distance import pdist, squareform

from builder.comparisons.linkage import complete_linkage


def scipys(distance, limit):
    labels = fcluster(linkage(distance, "complete"), limit, "distance")
    return sorted(np.flatnonzero(labels == label).tolist() for label in np.unique(labels))


@pytest.mark.parametrize("seed", range(30))
def test_groups_are_scipys(seed):
    random = np.random.default_rng(seed)
    distance = pdist(random.normal(size=(random.integers(2, 250), random.integers(1, 5))), "chebyshev")
    limit = random.uniform(0.05, 3)
    square = squareform(np.where(distance <= limit, distance, np.inf)).astype(np.float32)
    assert complete_linkage(square) == scipys(distance, limit)


def test_pair_beyond_the_limit_keeps_two_groups_apart_whatever_lies_between():
    line = np.array([0.0, 0.4, 0.7, 0.9], dtype=np.float32)
    apart = np.abs(line[:, None] - line)
    assert complete_linkage(np.where(apart <= 0.6, apart, np.inf).astype(np.float32)) == [[0, 1], [2, 3]]


def test_equal_items_share_a_group():
    assert complete_linkage(np.zeros((5, 5), dtype=np.float32)) == [[0, 1, 2, 3, 4]]


def test_nothing_has_no_groups():
    assert complete_linkage(np.zeros((0, 0), dtype=np.float32)) == []
