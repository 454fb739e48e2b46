"""The converter by itself."""

import numpy as np

from builder.circuit.converter import Converter


def test_code_is_a_real_number_of_full_scale():
    assert Converter(12, 4096).code(np.array([0.25])).tolist() == [1024.0]
    assert Converter(12, 4095).code(np.array([0.5])).tolist() == [2047.5]


def test_errors_are_added_to_what_gain_makes_of_the_voltage():
    assert Converter(12, 4096, gain=0.01, error_lsb=-2.5).code(np.array([0.5])).tolist() == [2048 * 1.01 - 2.5]


def test_code_is_held_at_both_ends():
    code = Converter(10, 1024, error_lsb=-2).code(np.array([0.001, 0.5, 1.0, 1.1]))
    assert code.tolist() == [0.0, 510.0, 1022.0, 1023.0]
    assert Converter(10, 1024).at_an_end(code).tolist() == [True, False, False, True]
