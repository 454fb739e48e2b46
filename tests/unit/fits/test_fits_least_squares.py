"""Gauss–Newton with step halving."""

import numpy as np
import pytest

from builder.fits.least_squares import minimum

X = np.linspace(0.0, 1.0, 11)


def exponential(parameters):
    values = np.exp(parameters[0] + parameters[1] * X)
    return values, values[:, None] * np.column_stack([np.ones_like(X), X])


def test_a_far_start_leads_to_the_same_minimum_as_a_near_one():
    observed = np.exp(1 - 2 * X) + 0.1 * np.cos(9 * X)
    near, far = (minimum(exponential, np.array(start), observed) for start in ([1.0, -2.0], [6.0, 4.0]))
    np.testing.assert_allclose(far, near, rtol=1e-12)
    values, slopes = exponential(near)
    np.testing.assert_allclose(slopes.T @ (observed - values), 0, atol=1e-12)


def test_steps_into_the_impossible_are_shortened():
    def root_of(parameters):
        values = np.sqrt(np.where(parameters > 0, parameters, np.nan))
        return values, 0.5 / values[:, None]

    np.testing.assert_allclose(minimum(root_of, np.array([400.0]), np.array([0.5])), [0.25], rtol=1e-12)


def uphill(parameters):
    return parameters, -np.eye(1)


def nowhere(parameters):
    return np.full_like(parameters, np.nan), np.full((1, 1), np.nan)


@pytest.mark.parametrize("model", [uphill, nowhere])
def test_no_minimum_is_said(model):
    with pytest.raises(ValueError) as caught:
        minimum(model, np.zeros(1), np.ones(1))
    assert str(caught.value) == "the least squares found no minimum for these points"
