"""A thermistor's circuit: the signal chain of a position, and what it adds to the error of a reading."""

from builder.circuit.budget import DEFAULT_STEP_K, Budget, TripBudget, budget
from builder.circuit.chain import NOMINAL, Chain, Signal
from builder.circuit.firmware import firmware_part
from builder.circuit.rows import Rows
from builder.circuit.thermistor import Thermistor, thermistor

__all__ = [
    "DEFAULT_STEP_K",
    "NOMINAL",
    "Budget",
    "Chain",
    "Rows",
    "Signal",
    "Thermistor",
    "TripBudget",
    "budget",
    "firmware_part",
    "thermistor",
]
