"""Kinds of values in a record: each with its unit, its bounds and what to check when it is outside them."""

from __future__ import annotations

import datetime
import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Annotated, Any, TypeVar, get_args
from unicodedata import category

from pydantic import BaseModel, BeforeValidator, ConfigDict, Field, GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic.json_schema import JsonSchemaValue, WithJsonSchema
from pydantic_core import CoreSchema, PydanticCustomError, core_schema

from builder.problems import quoted
from builder.units import ABSOLUTE_ZERO_C, number_text, resistance_from_code


class RecordModel(BaseModel):
    """What all models of a record share: nothing is changed, nothing unknown is let in, nothing is converted."""

    model_config = ConfigDict(frozen=True, extra="forbid", strict=True, allow_inf_nan=False)


def models_in(annotation: Any) -> list[type[RecordModel]]:
    """The models that a field's annotation names, however deep in lists and unions."""
    if isinstance(annotation, type) and issubclass(annotation, RecordModel):
        return [annotation]
    return [found for inner in get_args(annotation) for found in models_in(inner)]


def refusal(rule: str, message: str, field: str = "") -> PydanticCustomError:
    """The error that a validator raises: its rule, its sentence as it stands, and which field of a model is meant."""
    return PydanticCustomError(rule, "{sentence}", {"sentence": message, "field": field})


HOTTEST_C = 1000.0

_DAY = re.compile("[0-9]{4}-[0-9]{2}-[0-9]{2}")
_WEB_ADDRESS = re.compile(r"""https?://[^\s/"'<>][^\s"'<>]*""")
_UNSEEN = ("Cc", "Cf", "Cs", "Co", "Cn")


@dataclass(frozen=True)
class Within:
    """Bounds of a number, with its unit and what to check when it is outside."""

    low: float
    high: float
    unit: str
    check: str = "Check the decimal point and the unit."

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        """Validate after the number itself."""
        return core_schema.no_info_after_validator_function(self._inside, handler(source))

    def __get_pydantic_json_schema__(self, schema: CoreSchema, handler: GetJsonSchemaHandler) -> JsonSchemaValue:
        """Tell an editor the bounds of a plain number; a code is not a number."""
        shown = handler(schema)
        if "type" in shown:
            shown |= {"minimum": self.low, "maximum": self.high}
        return shown

    def _inside(self, value: float) -> float:
        if self.low <= value <= self.high:
            return value
        bounds = f"{number_text(self.low)} to {number_text(self.high)} {self.unit}"
        raise refusal("out-of-bounds", f"{number_text(value)} {self.unit} is outside {bounds}. {self.check}")


def ohms(value: Any) -> Any:
    """A resistance typed as a number or an R-K-M code, as a number; anything else unchanged, for the type to refuse."""
    if not isinstance(value, str):
        return value
    try:
        return resistance_from_code(value)
    except ValueError:
        advice = "Write ohms as a number with a point as decimal sign, or an R-K-M code such as 4k7, without a unit."
        raise refusal("wrong-type", f"{quoted(value)} is not a resistance. {advice}") from None


def _day(value: Any) -> Any:
    if isinstance(value, datetime.date):
        return value
    if isinstance(value, str) and _DAY.fullmatch(value):
        try:
            return datetime.date.fromisoformat(value)
        except ValueError:
            raise refusal("wrong-type", f"{value} is not in the calendar. Check month and day.") from None
    raise refusal("wrong-type", f"{quoted(value)} is not a date. Write it as year-month-day, such as 2026-02-10.")


def _filled(value: str) -> str:
    if not value.strip():
        raise refusal("wrong-type", "is empty. Write something, or remove the field.")
    # A soft hyphen or a direction mark copied from a PDF hides a part from every search.
    unseen = not value.isprintable() and next((c for c in value if category(c) in _UNSEEN and c not in "\n\t"), "")
    if unseen:
        message = f"{quoted(value)} holds U+{ord(unseen):04X}, which cannot be seen. Type the text anew."
        raise refusal("wrong-type", message)
    return value.strip()


def _web_address(value: str) -> str:
    if _WEB_ADDRESS.fullmatch(value):
        return value
    advice = "Begin it with https:// or http://, without spaces or quotes in it."
    raise refusal("wrong-type", f"{quoted(value)} is not a web address. {advice}")


def _rising(value: tuple[float, float]) -> tuple[float, float]:
    if value[0] < value[1]:
        return value
    low, high = (number_text(v) for v in value)
    raise refusal("out-of-bounds", f"{low} to {high} °C does not rise. Write the lower temperature first.")


class _After:
    """A validator that runs after its type, leaving the JSON Schema of the type alone."""

    def __init__(self, check: Callable[[Any], Any]) -> None:
        self._check = check

    def __get_pydantic_core_schema__(self, source: Any, handler: GetCoreSchemaHandler) -> CoreSchema:
        return core_schema.no_info_after_validator_function(self._check, handler(source))


_RESISTANCE_SCHEMA = {
    "anyOf": [{"type": "number"}, {"type": "string", "pattern": "^([0-9]+[RrKkM][0-9]*|[RrKkM][0-9]+)$"}]
}
_LENIENT = Field(strict=False)  # a YAML list becomes a tuple; the values in it stay strict
_T = TypeVar("_T")

Text = Annotated[str, _After(_filled)]
Day = Annotated[datetime.date, BeforeValidator(_day), WithJsonSchema({"type": "string", "format": "date"})]
WebAddress = Annotated[str, _After(_web_address)]
Ohm = Annotated[
    float,
    Within(0.01, 1e9, "Ω", "Check the decimal point, and k or M."),
    BeforeValidator(ohms),
    WithJsonSchema(_RESISTANCE_SCHEMA),
]
WireOhm = Annotated[float, Within(0, 1e4, "Ω"), BeforeValidator(ohms), WithJsonSchema(_RESISTANCE_SCHEMA)]
Celsius = Annotated[float, Within(ABSOLUTE_ZERO_C + 0.01, HOTTEST_C, "°C")]
BKelvin = Annotated[float, Within(1000, 10000, "K", "Check the decimal point; data sheets print B in kelvin.")]
DifferenceK = Annotated[float, Within(0.001, 100, "K")]
Percent = Annotated[float, Within(0, 50, "%", "Write per cent: 1 for ±1 %.")]
PpmPerK = Annotated[float, Within(0, 10000, "ppm/K")]
MilliWatt = Annotated[float, Within(0.001, 1e5, "mW")]
MilliWattPerK = Annotated[
    float, Within(0.001, 1e4, "mW/K", "Check the decimal point; 1 mW/K is usual for a small chip in still air.")
]
Second = Annotated[float, Within(0.001, 1e4, "s")]
Volt = Annotated[float, Within(0.1, 1000, "V")]
NanoAmpere = Annotated[float, Within(0, 1e6, "nA")]
Lsb = Annotated[float, Within(0, 1e4, "LSB")]
SpanC = Annotated[tuple[Celsius, Celsius], _LENIENT, _After(_rising)]
# A B-value may be stated from the higher temperature to the lower one.
PairC = Annotated[tuple[Celsius, Celsius], _LENIENT]
Several = Annotated[tuple[_T, ...], _LENIENT]
