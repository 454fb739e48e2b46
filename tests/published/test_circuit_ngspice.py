"""Junction voltage and self-heating against ngspice, which solves circuit and warmth together.

The thermistor is a behavioural resistor; its power flows as a current into the thermal resistance.
"""

import subprocess

import numpy as np
import pytest
from circuit_records import plain_thermistor, position
from outside_tool import needed

from builder.circuit import NOMINAL, Chain

T_C = np.arange(-40.0, 126.0, 5.0)
NETLIST = """thermistor in a divider
.options reltol=1e-10 vntol=1e-12 abstol=1e-15 gmin=1e-15 numdgt=15
Vamb amb 0 25
Vs sup 0 {supply_v}
RF {fixed_nodes} {fixed_ohm}
Rth {near} {far} R='{r25_ohm}*exp({b_k}*(1/(V(tc)+273.15)-1/298.15))'
{wire}
{parallel}
Bwarm amb tc I=(V({near})-V({far}))*(V({near})-V({far}))/({r25_ohm}*exp({b_k}*(1/(V(tc)+273.15)-1/298.15)))
Rwarm amb tc {k_per_w}
.control
set numdgt=15
set wr_singlescale
dc Vamb -40 125 5
wrdata swept.txt v(mid) v(tc)
.endc
.end
"""


def by_ngspice(folder, *, side, r25_ohm, b_k, mw_per_k, supply_v, fixed_ohm, parallel_ohm, wire_ohm):
    """Junction voltages and body temperatures.

    With the usual reltol of 1e-3 ngspice is off by 0.9 mV, with 1e-6 by 60 µK.
    """
    ends = ("mid", "0") if side == "low side" else ("sup", "mid")
    text = NETLIST.format(
        supply_v=supply_v,
        fixed_nodes="sup mid" if side == "low side" else "mid 0",
        fixed_ohm=fixed_ohm,
        near=ends[0],
        far="inner" if wire_ohm else ends[1],
        wire=f"Rw inner {ends[1]} {wire_ohm}" if wire_ohm else "",
        parallel=f"Rp {ends[0]} {ends[1]} {parallel_ohm}" if parallel_ohm else "",
        r25_ohm=r25_ohm,
        b_k=b_k,
        k_per_w=1000 / mw_per_k,
    )
    (folder / "divider.cir").write_text(text)
    done = subprocess.run(
        [needed("ngspice"), "-b", "divider.cir"], cwd=folder, capture_output=True, text=True, check=False
    )
    assert (folder / "swept.txt").exists(), done.stdout + done.stderr
    t_c, junction_v, body_c = np.loadtxt(folder / "swept.txt").T
    assert t_c == pytest.approx(T_C)
    return junction_v, body_c


CIRCUITS = {
    "low side": {},
    "high side": {"side": "high side"},
    "low side with parallel and wire": {"parallel_ohm": 22e3, "wire_ohm": 47.0},
    "high side with parallel and wire": {"side": "high side", "parallel_ohm": 22e3, "wire_ohm": 47.0},
    "much warmth": {"supply_v": 5.0, "fixed_ohm": 1e3, "mw_per_k": 1.0},
    "large resistances": {"r25_ohm": 470e3, "b_k": 4500.0, "fixed_ohm": 330e3, "wire_ohm": 10.0},
}
PLAIN = {
    "side": "low side",
    "r25_ohm": 10e3,
    "b_k": 3950.0,
    "mw_per_k": 2.0,
    "supply_v": 3.3,
    "fixed_ohm": 10e3,
    "parallel_ohm": None,
    "wire_ohm": 0.0,
}


@pytest.mark.parametrize("changes", CIRCUITS.values(), ids=CIRCUITS)
def test_junction_and_body_are_ngspices(tmp_path, changes):
    stated = PLAIN | changes
    junction_v, body_c = by_ngspice(tmp_path, **stated)
    circuit = {"thermistor": stated["side"], "supply_v": stated["supply_v"], "wire_ohm": stated["wire_ohm"]}
    if stated["parallel_ohm"]:
        circuit["parallel"] = {"resistance_ohm": stated["parallel_ohm"], "tolerance_pct": 0}
    place = position(circuit=circuit, fixed={"resistance_ohm": stated["fixed_ohm"]})
    fitted = plain_thermistor(stated["r25_ohm"], stated["b_k"], dissipation_mw_per_k=stated["mw_per_k"])
    signal = Chain(place, fitted, fitted.made.curve, stated["fixed_ohm"]).signal(T_C, NOMINAL)
    assert np.abs(signal.body_c - body_c).max() < 1e-6
    assert np.abs(signal.junction_v - junction_v).max() < 1e-7
