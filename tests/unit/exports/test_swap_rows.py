"""A swap as JSON's answer and as sentences."""

import pytest
from circuit_records import real_position

from builder.decisions import swap
from builder.exports.budget_rows import budget_answer
from builder.exports.swap_rows import swap_answer, swap_sentences
from builder.records import Catalog, Part, PartRecord, PositionRecord, Source

STATED = {
    "maker": "Maker",
    "body": {"form": "chip", "size_code": "0603"},
    "rated": {"resistance_ohm": "10k", "tolerance_pct": 1},
    "shape": "plain",
    "limits": {"dissipation_mw_per_k": 2.0},
    "lifecycle": "last time buy",
}


def part(number: str, b_k: float) -> PartRecord:
    b_values = [{"between_c": [25, 85], "b_k": b_k, "tolerance_pct": 1}]
    record = Part.model_validate(STATED | {"part": number, "b_values": b_values})
    return PartRecord(record, Source(f"{number}.yaml", f"{number}.yaml", {}))


@pytest.fixture
def found():
    fitted, alternate = part("X1", 3950), part("X2", 3700)
    position = real_position(range_c=[0, 60], limit_k=2.0)
    return swap(PositionRecord(position, Source("p.yaml", "p.yaml", {})), alternate, Catalog((fitted, alternate)))


def test_answer_is_the_alternates_budget_with_verdict_and_reasons(found):
    answer = swap_answer(found)
    assert budget_answer(found.after, "X2").items() <= answer.items()
    assert {name: answer[name] for name in answer.keys() - budget_answer(found.after, "X2").keys()} == {
        "fitted": "X1",
        "worst_before_k": pytest.approx(found.before.worst_k),
        "worst_new_firmware_k": pytest.approx(found.new_firmware.worst_k),
        "verdict": "undecided",
        "reasons": [
            {"about": "error", "message": "worst case 3.39 K at 60 °C exceeds ±2 K", "against": True},
            {
                "about": "error",
                "message": "with new firmware: worst case 1.21 K at 60 °C is within ±2 K",
                "against": False,
            },
            {
                "about": "range",
                "message": "the part's operating range is not stated (limits.operating_c)",
                "against": None,
            },
            {"about": "standing", "message": "the part has no entry in its ledger", "against": False},
            {"about": "lifecycle", "message": "the part is last time buy", "against": False},
            {"about": "standing", "message": "board/RT1 does not name it as an alternate", "against": False},
        ],
    }


def test_sentences_tell_what_speaks_against_first_and_what_is_only_to_know_last(found):
    assert list(swap_sentences(found)) == [
        "Maker X2 in place of Maker X1 at board/RT1: undecided.",
        "against  error: worst case 3.39 K at 60 °C exceeds ±2 K",
        "open     range: the part's operating range is not stated (limits.operating_c)",
        "to know  error: with new firmware: worst case 1.21 K at 60 °C is within ±2 K",
        "to know  standing: the part has no entry in its ledger",
        "to know  lifecycle: the part is last time buy",
        "to know  standing: board/RT1 does not name it as an alternate",
    ]
