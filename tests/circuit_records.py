"""Positions and thermistors for tests of circuits, and the whole chain once more: written anew, in scalars' terms."""

from dataclasses import dataclass, field

import numpy as np

from builder.circuit import Thermistor, thermistor
from builder.records import Part, PartRecord, Position, Source

ADC = {"bits": 12, "full_scale": 4096, "offset_lsb": 0, "gain_pct": 0, "nonlinearity_lsb": 0, "leakage_na": 0}
FIXED = {"resistance_ohm": "10k", "tolerance_pct": 0, "tempco_ppm_per_k": 0}
# As a whole board: every source has a limit.
REAL_ADC = {"bits": 12, "offset_lsb": 2, "gain_pct": 0.1, "nonlinearity_lsb": 1.5, "leakage_na": 50}
REAL_FIXED = {"resistance_ohm": "10k", "tolerance_pct": 0.5, "tempco_ppm_per_k": 50}


def position(*, circuit=None, fixed=None, adc=None, **fields) -> Position:
    """A position whose sources are all stated as nothing, with some fields changed."""
    plain = {
        "position": "board/RT1",
        "board": "Board",
        "purpose": "air",
        "range_c": [-40, 125],
        "limit_k": 1.0,
        "circuit": {
            "thermistor": "low side",
            "fixed": FIXED | (fixed or {}),
            "supply_v": 3.3,
            "supply_tolerance_pct": 0,
        }
        | (circuit or {}),
        "adc": ADC | (adc or {}),
        "firmware": {"method": "curve"},
        "fitted": "X1",
    }
    return Position.model_validate(plain | fields)


def real_position(**fields) -> Position:
    """A position where every source has a limit."""
    circuit = {"supply_tolerance_pct": 2} | fields.pop("circuit", {})
    return position(
        circuit=circuit, fixed=REAL_FIXED | fields.pop("fixed", {}), adc=REAL_ADC | fields.pop("adc", {}), **fields
    )


def plain_thermistor(
    r_ohm=10e3, b_k=3950, tolerance_pct=0, b_tolerance_pct=0, dissipation_mw_per_k=1e4, **fields
) -> Thermistor:
    """A thermistor of the plain law; as it stands without tolerance, and warmed by nothing worth speaking of."""
    limits = {"operating_c": [-55, 155]} | ({"dissipation_mw_per_k": dissipation_mw_per_k} if dissipation_mw_per_k else {})  # fmt: skip
    stated = {
        "part": "X1",
        "maker": "Maker",
        "body": {"form": "bead"},
        "rated": {"resistance_ohm": r_ohm, "tolerance_pct": tolerance_pct},
        "b_values": [{"between_c": [25, 85], "b_k": b_k, "tolerance_pct": b_tolerance_pct}],
        "shape": "plain",
        "limits": limits,
    }
    return thermistor(PartRecord(Part.model_validate(stated | fields), Source("X1.yaml", "X1.yaml", {})))


@dataclass
class Board:
    """One board, or arrays of them: currents and voltages by Kirchhoff's laws, warmth by patient repetition."""

    r25_ohm: float = 10e3
    b_k: float = 3950.0
    mw_per_k: float = 1e4
    fixed_ohm: float = 10e3
    parallel_ohm: float = 1e30
    wire_ohm: float = 0.0
    supply_v: float = 3.3
    reference_v: float | None = None
    leakage_a: float = 0.0
    gain: float = 0.0
    more_lsb: float = 0.0
    high_side: bool = False
    full_scale: int = 4096
    made_for: "Board | None" = field(default=None, repr=False)

    def r_ohm(self, body_c):
        return self.r25_ohm * np.exp(self.b_k * (1 / (body_c + 273.15) - 1 / 298.15))

    def junction_v(self, r_ohm):
        branch_ohm = (r_ohm + self.wire_ohm) * self.parallel_ohm / (r_ohm + self.wire_ohm + self.parallel_ohm)
        upper_ohm, lower_ohm = (branch_ohm, self.fixed_ohm) if self.high_side else (self.fixed_ohm, branch_ohm)
        # What flows in from the supply and the leak flows out to ground.
        return (self.supply_v / upper_ohm + self.leakage_a) * upper_ohm * lower_ohm / (upper_ohm + lower_ohm)

    def body_c(self, t_c):
        body_c, before_c = t_c + 0 * self.r_ohm(t_c), t_c - 1
        while np.abs(body_c - before_c).max() > 1e-10:
            r_ohm, before_c = self.r_ohm(body_c), body_c
            junction_v = self.junction_v(r_ohm)
            over_v = self.supply_v - junction_v if self.high_side else junction_v
            body_c = t_c + (over_v / (r_ohm + self.wire_ohm)) ** 2 * r_ohm * 1000 / self.mw_per_k
        return body_c

    def code(self, t_c):
        reference_v = self.supply_v if self.reference_v is None else self.reference_v
        junction_v = self.junction_v(self.r_ohm(self.body_c(t_c)))
        return junction_v / reference_v * self.full_scale * (1 + self.gain) + self.more_lsb

    def reading_c(self, t_c):
        """Through the ideal inverse of the board that the firmware was made for, step by step as one would by hand."""
        ideal = self.made_for or Board()
        reference_v = ideal.supply_v if ideal.reference_v is None else ideal.reference_v
        junction_v = self.code(t_c) * reference_v / self.full_scale
        fixed_a = (junction_v if ideal.high_side else ideal.supply_v - junction_v) / ideal.fixed_ohm
        over_v = ideal.supply_v - junction_v if ideal.high_side else junction_v
        r_ohm = over_v / (fixed_a - over_v / ideal.parallel_ohm) - ideal.wire_ohm
        return 1 / (1 / 298.15 + np.log(r_ohm / ideal.r25_ohm) / ideal.b_k) - 273.15


# What a share −1 to 1 of each limit of `real_position` and of this thermistor does to a board.
REAL_SOURCES = (
    "r25",
    "b",
    "fixed",
    "drift",
    "parallel",
    "supply",
    "reference",
    "leakage",
    "offset",
    "gain",
    "nonlinearity",
    "quantisation",
)
SIDES = {
    "low side": {"circuit": {"thermistor": "low side"}},
    "high side": {"circuit": {"thermistor": "high side"}},
    "parallel and wire": {
        "circuit": {
            "thermistor": "low side",
            "parallel": {"resistance_ohm": 47e3, "tolerance_pct": 1},
            "wire_ohm": 5.0,
        }
    },
    "own reference": {
        "circuit": {"thermistor": "low side", "supply_tolerance_pct": 1},
        "reference": {"volts": 3.3, "tolerance_pct": 0.4},
    },
}


def real_thermistor() -> Thermistor:
    """A thermistor with both tolerances, and warmed by some tenths of a kelvin."""
    return plain_thermistor(tolerance_pct=1, b_tolerance_pct=1, dissipation_mw_per_k=1.5)


def real_board(place: Position, off) -> Board:
    """The board of a `real_position` whose sources are off by these shares of their limits."""
    circuit, own = place.circuit, place.reference != "ratiometric"
    parallel_ohm = circuit.parallel.resistance_ohm if circuit.parallel else 1e30
    same = {
        "wire_ohm": circuit.wire_ohm or 0.0,
        "high_side": circuit.thermistor == "high side",
        "mw_per_k": 1.5,
    }
    drift_k = max(abs(t_c - 25) for t_c in place.range_c)
    return Board(
        r25_ohm=10e3 * (1 + 0.01 * off["r25"]),
        b_k=3950 * (1 + 0.01 * off["b"]),
        fixed_ohm=10e3 * (1 + 0.005 * off["fixed"]) * (1 + 50e-6 * drift_k * off["drift"]),
        parallel_ohm=parallel_ohm * (1 + 0.01 * off["parallel"]),
        supply_v=3.3 * (1 + circuit.supply_tolerance_pct / 100 * off["supply"]),
        reference_v=3.3 * (1 + 0.004 * off["reference"]) if own else None,
        leakage_a=50e-9 * off["leakage"],
        gain=0.001 * off["gain"],
        more_lsb=2 * off["offset"] + 1.5 * off["nonlinearity"] + 0.5 * off["quantisation"],
        made_for=Board(parallel_ohm=parallel_ohm, reference_v=3.3 if own else None, **same),
        **same,
    )
