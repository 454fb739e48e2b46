"""The ten nearest parts, against trying every pair."""

import numpy as np
import pytest
from drawn_parts import ceramic_ohm, drawn, plain, tabled

from builder.comparisons import NearestParts, Neighbour


def tried(parts, place):
    """Every other part's largest |reads| through this part's curve, with whether it was read over the whole range."""
    own, (low, high) = parts[place], parts[place].operating_c
    t_c = np.arange(np.ceil(low / 5) * 5, high + 1e-9, 5)
    found = []
    for i, other in enumerate(parts):
        held = ~other.curve.extrapolated(t_c)
        if i != place and 2 * held.sum() > len(t_c):
            reads_k = own.curve.extended_temperature_c(other.curve.resistance_ohm(t_c[held])) - t_c[held]
            found.append((np.abs(reads_k).max(), bool(held.all()), i))
    return sorted(found)


@pytest.mark.parametrize(
    ("seed", "count", "spread"), [(1, 300, 1), (2, 300, 0.01), (3, 300, 20), (4, 12, 1), (5, 3, 1)]
)
def test_ten_nearest_are_those_that_trying_all_finds(seed, count, spread):
    parts = drawn(seed, count, spread)
    nearest = NearestParts(parts)
    for place in range(0, count, 1 + count // 40):
        expected = tried(parts, place)
        measure = {i: (worst_k, whole) for worst_k, whole, i in expected}
        found = nearest.of(place)
        assert len({neighbour.place for neighbour in found}) == len(found) == min(10, len(expected))
        for neighbour, (worst_k, _, _) in zip(found, expected, strict=False):
            assert abs(neighbour.worst_k) == pytest.approx(worst_k, abs=2e-6)
            assert (abs(neighbour.worst_k), neighbour.whole_range) == pytest.approx(measure[neighbour.place], abs=2e-6)


def test_difference_has_its_sign_and_its_temperature():
    # B 3380 for 3435 with equal resistance at 25 °C: low when hot, high when cold, farthest at the hot end.
    (found,) = NearestParts([plain(b_k=3435), plain(b_k=3380)]).of(0)
    assert (found.place, found.at_c, found.whole_range) == (1, 125.0, True)
    assert found.worst_k == pytest.approx(-2.13, abs=0.005)


def test_difference_is_judged_over_the_parts_own_range():
    nearest = NearestParts([plain(b_k=3435, operating_c=(0, 50)), plain(b_k=3380)])
    (here,), (there,) = nearest.of(0), nearest.of(1)
    assert (here.at_c, here.whole_range) == (50.0, True)
    # The curve from a B-value holds over the operating range and to both temperatures of the pair, 25 and 85 °C.
    assert (there.at_c, there.whole_range) == (85.0, False)


@pytest.mark.parametrize(
    ("end_c", "rows_c", "found"),
    [
        (100, (0, 45), False),
        (100, (0, 50), True),
        (100, (50, 100), True),
        (100, (55, 100), False),
        (95, (0, 45), False),
        (95, (0, 50), True),
        (95, (45, 95), True),
        (95, (50, 95), False),
    ],
)
def test_part_counts_if_its_curve_holds_at_more_than_half_of_the_steps(end_c, rows_c, found):
    t_c = np.arange(rows_c[0], rows_c[1] + 1, 5)
    short = tabled(t_c, ceramic_ohm(t_c, 10e3, 3435, 0), digits=9)
    nearest = NearestParts([plain(operating_c=(0, end_c)), short])
    assert [(n.place, n.whole_range) for n in nearest.of(0)] == ([(1, False)] if found else [])


def test_ten_nearest_are_found_among_hundreds_that_agree_at_the_middle_of_the_range():
    random = np.random.default_rng(9)
    b_k = 3435 + random.uniform(-40, 40, 600)
    # Equal at 25 °C but for a millionth: what the middle step tells is no guide.
    parts = [plain(10e3 * (1 + random.uniform(-1e-6, 1e-6)), b, operating_c=(-25, 75)) for b in b_k]
    nearest = NearestParts(parts)
    for place in range(0, 600, 60):
        found = [neighbour.place for neighbour in nearest.of(place)]
        assert found == [i for _, _, i in tried(parts, place)][:10]


def test_equal_parts_are_ten_others_at_no_difference():
    nearest = NearestParts([plain() for _ in range(200)])
    for place in (0, 100, 199):
        found = nearest.of(place)
        assert [neighbour.worst_k for neighbour in found] == [0.0] * 10
        assert place not in {neighbour.place for neighbour in found}


def test_as_many_are_named_as_wanted():
    parts = drawn(8, 30)
    assert [len(NearestParts(parts).of(0, count)) for count in (1, 5, 29, 40)] == [1, 5, 29, 29]


def test_part_with_no_whole_step_in_its_range_has_no_neighbours():
    assert NearestParts([plain(operating_c=(26, 29)), plain()]).of(0) == ()


def test_resistance_that_no_temperature_has_is_infinitely_far():
    # 50 mΩ through the law of a 470 kΩ part lies beyond any temperature: 1/T would be below zero.
    nearest = NearestParts([plain(470e3, 3000), plain(0.05, 3000)])
    assert [abs(neighbour.worst_k) for neighbour in nearest.of(0)] == [np.inf]


def test_neighbour_says_its_place_its_difference_and_where():
    assert NearestParts([plain(), plain()]).of(1) == (Neighbour(0, 0.0, -40.0, True),)
