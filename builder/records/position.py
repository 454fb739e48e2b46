"""A position: one place on one board where a thermistor is fitted, with its circuit, converter and firmware."""

from __future__ import annotations

from typing import Annotated, Any, Literal

from pydantic import BeforeValidator, Discriminator, Field, Tag, model_validator

from builder.problems import quoted
from builder.records.part import Standing
from builder.records.quantities import (
    BKelvin,
    Celsius,
    DifferenceK,
    Lsb,
    NanoAmpere,
    Ohm,
    Percent,
    PpmPerK,
    RecordModel,
    Second,
    Several,
    SpanC,
    Text,
    Volt,
    WireOhm,
    Within,
    refusal,
)
from builder.units import number_text


class FixedResistor(RecordModel):
    """The resistor that makes the divider with the thermistor."""

    resistance_ohm: Ohm = Field(description="Resistance: a number in Ω, or an R-K-M code.", examples=["10k"])
    tolerance_pct: Percent | None = Field(None, description="Tolerance, ± %.", examples=[0.1])
    tempco_ppm_per_k: PpmPerK | None = Field(None, description="Temperature coefficient, ± ppm/K.", examples=[25])


class ParallelResistor(RecordModel):
    """A resistor across the thermistor."""

    resistance_ohm: Ohm = Field(description="Resistance: a number in Ω, or an R-K-M code.", examples=["47k"])
    tolerance_pct: Percent | None = Field(None, description="Tolerance, ± %.", examples=[1])


class Circuit(RecordModel):
    """The divider that the thermistor stands in."""

    thermistor: Literal["low side", "high side"] = Field(
        description="Where the thermistor stands: to ground, or to the supply."
    )
    fixed: FixedResistor = Field(description="The fixed resistor.")
    parallel: ParallelResistor | None = Field(None, description="A resistor across the thermistor, if there is one.")
    wire_ohm: WireOhm | None = Field(None, description="Resistance in series with the thermistor, Ω.", examples=[0.2])
    supply_v: Volt = Field(description="Supply of the divider, V.", examples=[3.3])
    supply_tolerance_pct: Percent | None = Field(None, description="Tolerance of the supply, ± %.", examples=[2])


class VoltageReference(RecordModel):
    """A reference of its own for the converter."""

    volts: Volt = Field(description="Reference voltage, V.", examples=[2.5])
    tolerance_pct: Percent | None = Field(None, description="Tolerance, ± %.", examples=[0.5])


def _ratiometric(value: Any) -> Any:
    if value == "ratiometric":
        return value
    advice = "Write ratiometric, or the reference's own volts, such as {volts: 2.5, tolerance_pct: 0.5}."
    raise refusal("wrong-choice", f"{quoted(value)} stands where a reference must stand. {advice}")


def _own_or_ratiometric(value: Any) -> str:
    return "own" if isinstance(value, dict | VoltageReference) else "ratiometric"


Reference = Annotated[
    Annotated[Literal["ratiometric"], BeforeValidator(_ratiometric), Tag("ratiometric")]
    | Annotated[VoltageReference, Tag("own")],
    Discriminator(_own_or_ratiometric),
]


class Adc(RecordModel):
    """The converter that reads the junction."""

    bits: Annotated[int, Within(4, 32, "bits", "Check the converter's data sheet.")] = Field(
        description="Resolution, bits.", examples=[12]
    )
    full_scale: int | None = Field(
        None, description="Counts that the reference stands for: 2^bits (default) or 2^bits − 1.", examples=[4096]
    )
    offset_lsb: Lsb | None = Field(None, description="Offset error, ± LSB.", examples=[2])
    gain_pct: Percent | None = Field(None, description="Gain error, ± %.", examples=[0.1])
    nonlinearity_lsb: Lsb | None = Field(None, description="Integral non-linearity, ± LSB.", examples=[1.5])
    leakage_na: NanoAmpere | None = Field(None, description="Input leakage, ± nA.", examples=[50])

    @model_validator(mode="after")
    def _full_scale_fits(self) -> Adc:
        if self.full_scale is not None and self.full_scale not in (2**self.bits, 2**self.bits - 1):
            allowed = f"{2**self.bits} or {2**self.bits - 1}"
            message = f"{number_text(self.full_scale, 10)} does not fit {self.bits} bits. Write {allowed}."
            raise refusal("out-of-bounds", message, "full_scale")
        return self


class TableFirmware(RecordModel):
    """A table made from a part's curve, linear interpolation between its rows."""

    method: Literal["table"] = Field(description="How codes become degrees.")
    part: Text | None = Field(None, description="Whose curve the table was made from; default the fitted part.")
    step_k: DifferenceK = Field(description="Distance of the table's rows, K.", examples=[5])


class CurveFirmware(RecordModel):
    """The ideal inverse of a part's own curve."""

    method: Literal["curve"] = Field(description="How codes become degrees.")
    part: Text | None = Field(None, description="Whose curve; default the fitted part.")


class BValueFirmware(RecordModel):
    """One B-value in the code."""

    method: Literal["b-value"] = Field(description="How codes become degrees.")
    resistance_ohm: Ohm = Field(description="Resistance in the code, Ω or R-K-M code.", examples=["10k"])
    at_c: Celsius = Field(25.0, description="Temperature it belongs to, °C.", examples=[25])
    b_k: BKelvin = Field(description="B-value in the code, K.", examples=[3435])


class SteinhartHartFirmware(RecordModel):
    """Steinhart–Hart coefficients in the code, R in ohm, T in kelvin."""

    method: Literal["steinhart-hart"] = Field(description="How codes become degrees.")
    a: float = Field(description="a, 1/K.", examples=[1.129e-3])
    b: float = Field(description="b, 1/K.", examples=[2.341e-4])
    c: float = Field(description="c, 1/K.", examples=[8.775e-8])


Firmware = Annotated[
    TableFirmware | CurveFirmware | BValueFirmware | SteinhartHartFirmware, Field(discriminator="method")
]


class Trip(RecordModel):
    """A threshold that the firmware acts on."""

    name: Text = Field(description="What acts.", examples=["freezer alarm"])
    at_c: Celsius = Field(description="Reading at which it acts, °C.", examples=[-15])
    when: Literal["rising", "falling"] = Field(description="Which way the temperature passes it.")
    within_k: DifferenceK | None = Field(None, description="How far off it may act, ± K.", examples=[1.5])


class Requirements(RecordModel):
    """What a part must have to be fitted here."""

    qualification: Several[Text] = Field((), description="Qualifications asked for.", examples=[["AEC-Q200 grade 1"]])
    size_code: Text | None = Field(
        None, description='Size code of the footprint, in quotes: "0603".', examples=["0603"]
    )
    time_constant_max_s: Second | None = Field(None, description="Slowest time constant, s.", examples=[10])


class Alternate(RecordModel):
    """A part proposed or approved to replace the fitted one here, firmware unchanged."""

    part: Text = Field(description="Its part number.", examples=["NV10-3435"])
    standing: Several[Standing] = Field((), description="Its ledger at this position.")


class Position(RecordModel):
    """One place on one board where a thermistor is fitted."""

    position: Text = Field(description="Board and reference designator.", examples=["coolbox-main/RT1"])
    board: Text = Field(description="The board's name.", examples=["Coolbox logger, main board"])
    purpose: Text = Field(description="What is measured, and what for.", examples=["air temperature in the box"])
    range_c: SpanC = Field(description="Range over which the reading matters, °C.", examples=[[-30, 60]])
    limit_k: DifferenceK = Field(
        description="The whole reading error must stay within this over the range, ± K.", examples=[1.0]
    )
    ambient_c: SpanC | None = Field(
        None, description="Temperature of the electronics, °C; default the range.", examples=[[-30, 60]]
    )
    circuit: Circuit = Field(description="The divider.")
    reference: Reference = Field(
        "ratiometric", description="The converter's reference: the divider's supply (ratiometric), or its own."
    )
    adc: Adc = Field(description="The converter.")
    firmware: Firmware = Field(description="How codes become degrees.")
    trips: Several[Trip] = Field((), description="Thresholds that the firmware acts on.")
    requires: Requirements = Field(Requirements(), description="What a part must have to be fitted here.")
    fitted: Text = Field(description="Number of the part that is fitted.", examples=["TB3A-103F38"])
    alternates: Several[Alternate] = Field((), description="Parts proposed or approved to replace it.")
    notes: Text | None = Field(None, description="Anything else worth knowing.")

    def named_parts(self) -> dict[tuple[str | int, ...], str]:
        """Every part number the position names, by where it stands in the record."""
        named: dict[tuple[str | int, ...], str] = {("fitted",): self.fitted}
        if isinstance(self.firmware, TableFirmware | CurveFirmware) and self.firmware.part:
            named["firmware", "part"] = self.firmware.part
        return named | {("alternates", i, "part"): a.part for i, a in enumerate(self.alternates)}
