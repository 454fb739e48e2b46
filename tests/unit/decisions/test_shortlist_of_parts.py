"""Every part of a catalog at a position: ranked by worst case, or out with every reason."""

import pytest
from places import APPROVED, WITHDRAWN, catalog, part, place

from builder.circuit import thermistor
from builder.decisions import Shortlist, best_resistor, shortlist


def listed(*parts, series="E96", **fields) -> Shortlist:
    return shortlist(place(**fields), catalog(*parts), series)


def names(found: Shortlist) -> list[str]:
    return [one.part.part.part for one in found.ranked]


def test_parts_are_ranked_by_worst_case_and_each_has_its_best_resistor():
    rough = part("A", rated={"resistance_ohm": "10k", "tolerance_pct": 5})
    fine = part("B", rated={"resistance_ohm": "47k", "tolerance_pct": 0.5})
    found = listed(rough, fine)
    assert (names(found), found.excluded) == (["B", "A"], ())
    for one in found.ranked:
        fitted = thermistor(one.part)
        best = best_resistor(found.position.position, fitted, fitted.made)
        assert (one.fixed_ohm, one.worst_k) == (best.fixed_ohm, pytest.approx(best.worst_k, abs=1e-9))
        assert one.margin_k == pytest.approx(2.0 - best.worst_k, abs=1e-9)
    assert [one.meets for one in found.ranked] == [True, False]


def test_series_asked_for_is_the_one_that_is_used():
    coarse, fine = (listed(part(), series=series) for series in ("E24", "E96"))
    assert (coarse.series, fine.series) == ("E24", "E96")
    assert fine.ranked[0].worst_k < coarse.ranked[0].worst_k
    assert [found.ranked[0].fixed_ohm for found in (coarse, fine)] == [11000, 11300]


def test_every_part_is_in_one_list():
    parts = [part("A"), part("B", lifecycle="obsolete"), part("C", limits={"operating_c": None})]
    found = listed(*parts)
    assert sorted([*names(found), *(one.part.part.part for one in found.excluded)]) == ["A", "B", "C"]


def test_part_that_is_out_tells_every_reason():
    out = part("A", body={"form": "lug"}, lifecycle="obsolete", standing=[WITHDRAWN])
    (excluded,) = listed(out, requires={"size_code": "0603", "time_constant_max_s": 1}).excluded
    assert excluded.because == (
        "lug does not stand on the footprint 0603",
        "time constant 4 s, at most 1 s is required",
        "the part is withdrawn since 2026-03-30 (quality: It cracks)",
        "the part is obsolete",
    )


def test_part_kept_to_other_positions_is_out():
    (excluded,) = listed(part(standing=[APPROVED | {"only_for": ["elsewhere/RT1"]}])).excluded
    assert excluded.because == ("the part may be fitted only at elsewhere/RT1",)


def test_body_of_the_fitted_part_plays_no_part():
    assert names(listed(part("A", body={"form": "bead"}))) == ["A"]


def test_part_without_a_reading_is_out():
    (excluded,) = listed(part(), adc={"bits": 4, "full_scale": 16, "offset_lsb": 8}).excluded
    assert excluded.because == ("with no resistor of E96 every board has a reading over 0 to 60 °C",)


def test_part_whose_curve_does_not_reach_is_out():
    bent = {"a": 1.2e-3, "b": 2.2e-4, "c": -4e-8, "span_c": [20, 90]}
    (excluded,) = listed(part(steinhart_hart=bent)).excluded
    assert excluded.because == ("the curve does not reach over 0 to 60 °C",)


def test_part_that_no_equation_fits_is_out():
    bent = {"a": 1.2e-3, "b": 2.2e-4, "c": -4e-8, "span_c": [70, 90]}
    firmware = {"method": "b-value", "resistance_ohm": "10k", "b_k": 3950}
    (excluded,) = listed(part(steinhart_hart=bent), firmware=firmware).excluded
    assert excluded.because == ("b-value needs 2 different points or more, not 0",)


def test_missing_figures_leave_it_open_and_are_named():
    lacking = part("A", rated={"resistance_ohm": "10k"}, limits={"operating_c": None, "time_constant_s": None})
    (ranked,) = listed(lacking, requires={"time_constant_max_s": 10}).ranked
    assert ranked.meets is None
    assert ranked.missing == ("rated.tolerance_pct", "limits.operating_c", "limits.time_constant_s")


@pytest.mark.parametrize("field", ["operating_c", "time_constant_s"])
def test_requirement_that_cannot_be_judged_leaves_a_met_limit_open(field):
    (ranked,) = listed(part("A", limits={field: None}), requires={"time_constant_max_s": 10}).ranked
    assert (ranked.meets, ranked.missing, ranked.margin_k > 0) == (None, (f"limits.{field}",), True)


def test_limit_that_is_missed_already_is_missed_whatever_else_is_not_stated():
    (ranked,) = listed(part("A", limits={"operating_c": None}), limit_k=0.1).ranked
    assert (ranked.meets, ranked.missing) == (False, ("limits.operating_c",))


def test_limit_that_no_part_can_meet_ranks_them_all_the_same():
    found = listed(part("A"), part("B", b_k=4200), limit_k=0.001)
    assert [(one.meets, one.margin_k < 0) for one in found.ranked] == [(False, True)] * 2


def test_empty_catalog_gives_an_empty_list():
    found = listed()
    assert (found.ranked, found.excluded) == ((), ())


def test_part_whose_own_missing_figure_decides_stands_behind_all_others():
    rated = {"resistance_ohm": "10k"}
    rough_b = [{"between_c": [25, 85], "b_k": 3950, "tolerance_pct": 2}]
    lacking = part("C", rated=rated, b_values=rough_b), part("D", rated=rated)
    rough = part("A", rated={"resistance_ohm": "10k", "tolerance_pct": 5})
    found = listed(*lacking, rough, part("B"))
    assert names(found) == ["B", "A", "D", "C"]
    assert [one.meets for one in found.ranked] == [True, False, None, None]
    assert found.ranked[2].worst_k < found.ranked[0].worst_k


def test_requirement_that_cannot_be_judged_stands_behind_too():
    found = listed(
        part("A", limits={"operating_c": None}), part("B", rated={"resistance_ohm": "10k", "tolerance_pct": 2})
    )
    assert names(found) == ["B", "A"]


def test_figure_that_the_position_lacks_puts_no_part_behind():
    fine, rough = part("A"), part("B", rated={"resistance_ohm": "10k", "tolerance_pct": 5})
    found = listed(rough, fine, adc={"leakage_na": None})
    assert [(one.part.part.part, one.meets) for one in found.ranked] == [("A", None), ("B", False)]


def test_supply_that_decides_of_a_warmed_part_puts_it_behind():
    warm = part("A", limits={"dissipation_mw_per_k": 0.5})
    cool = part("B", rated={"resistance_ohm": "10k", "tolerance_pct": 3}, limits={"dissipation_mw_per_k": 20})
    unstated = {"supply_v": 5, "supply_tolerance_pct": None}
    found = listed(warm, cool, circuit=unstated)
    assert [(one.part.part.part, one.meets) for one in found.ranked] == [("B", True), ("A", None)]
    assert found.ranked[1].worst_k < found.ranked[0].worst_k
