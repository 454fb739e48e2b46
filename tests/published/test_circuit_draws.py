"""The worst case against boards drawn at random: 100,000 anywhere within their limits, and as many near the limits.

The boards are computed by Kirchhoff's laws and repetition, not by the program.
"""

import numpy as np
import pytest
from circuit_records import REAL_SOURCES, SIDES, real_board, real_position, real_thermistor

from builder.circuit import budget

DRAWS = 100_000
T_C = (-20.0, 25.0, 80.0)


@pytest.fixture(scope="module", params=SIDES.values(), ids=SIDES)
def place(request):
    return real_position(range_c=[-20, 80], **request.param)


@pytest.fixture(scope="module")
def rows(place):
    fitted = real_thermistor()
    return budget(place, fitted, fitted.made).rows


def errors_k(place, t_c, shares):
    return real_board(place, dict(zip(REAL_SOURCES, shares, strict=True))).reading_c(t_c) - t_c


@pytest.mark.parametrize("t_c", T_C)
def test_no_board_drawn_is_worse_than_the_worst_case(place, rows, t_c):
    shares = np.random.default_rng(1).uniform(-1, 1, (len(REAL_SOURCES), DRAWS))
    drawn_k, row = errors_k(place, t_c, shares), list(rows.t_c).index(t_c)
    assert rows.worst_min_k[row] < drawn_k.min()
    assert drawn_k.max() < rows.worst_max_k[row]


@pytest.mark.parametrize("t_c", T_C)
def test_boards_drawn_near_their_limits_come_near_the_worst_case(place, rows, t_c):
    random = np.random.default_rng(2)
    signs = random.choice([-1.0, 1.0], (len(REAL_SOURCES), DRAWS))
    drawn_k, row = errors_k(place, t_c, signs * random.uniform(0.99, 1, signs.shape)), list(rows.t_c).index(t_c)
    ends_k = np.array([drawn_k.min(), drawn_k.max()])
    worst_k = np.array([rows.worst_min_k[row], rows.worst_max_k[row]])
    assert (np.abs(ends_k) <= np.abs(worst_k)).all()
    assert ends_k == pytest.approx(worst_k, rel=0.02)


def test_draws_spread_as_the_expanded_uncertainty_says(place, rows):
    # R25 and B are one limit in the budget, so one draw here; hotter than 25 °C a larger B lowers the resistance.
    shares = np.random.default_rng(3).uniform(-1, 1, (len(REAL_SOURCES), DRAWS))
    shares[1], row = -shares[0], list(rows.t_c).index(80.0)
    drawn_k = errors_k(place, 80.0, shares)
    assert 2 * drawn_k.std() == pytest.approx(rows.expanded_k[row], rel=0.01)
    middle_k = rows.bias_k[row] + rows.shift_k[row]
    assert drawn_k.mean() == pytest.approx(middle_k, abs=0.03 * rows.expanded_k[row])
