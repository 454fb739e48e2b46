"""The verdict on every alternate of the demo records, and what it rests on."""

from pathlib import Path

import pytest

from builder.decisions import swap
from builder.records import read_catalog

DEMO = read_catalog(Path(__file__).parents[3] / "parts")
# Verdict, and what speaks against the alternate or is open.
EXPECTED = {
    ("charger-dc/RT1", "YC6-222L"): ("fits", []),
    ("charger-dc/RT1", "NV2-3540"): ("does not fit", ["error", "trips", "body", "standing"]),
    ("charger-dc/RT2", "NV5-3470"): ("does not fit", ["body"]),
    ("charger-power/RT1", "TB3A-103F38"): ("fits", []),
    ("charger-power/RT1", "TB3A-103J38"): ("does not fit", ["error", "trips"]),
    ("charger-power/RT1", "TB3H-103F38"): ("fits with new firmware", ["error"]),
    ("charger-power/RT2", "YC3-104M"): ("fits", []),
    ("charger-power/RT4", "TB3H-103F38"): ("does not fit", ["error", "trips", "body", "qualification"]),
    ("coolbox-main/RT1", "YC3-103H"): ("fits", []),
    ("coolbox-main/RT1", "NV10-3435"): ("does not fit", ["error", "trips", "standing"]),
    ("coolbox-main/RT1", "NV10-3435P"): (
        "does not fit",
        ["error", "trips", "body", "qualification", "time constant", "standing"],
    ),
    ("coolbox-main/RT1", "YC3-103H0"): ("undecided", ["error", "trips", "time constant"]),
    ("coolbox-main/RT2", "YC2-103H"): ("fits", []),
    ("coolbox-probe/RT1", "OSP4-103W"): ("fits", []),
    ("coolbox-probe/RT1", "QG1-1039"): ("does not fit", ["error", "trips", "body", "standing"]),
    ("dock-pack/RT1", "NV5-3470"): ("does not fit", ["body"]),
    ("vial-carrier/RT1", "OSP4-103V"): ("does not fit", ["error", "standing"]),
    ("vial-carrier/RT2", "YC5-473M"): ("does not fit", ["error", "trips"]),
}


def test_every_demo_alternate_has_its_expectation():
    named = {(p.position.position, a.part) for p in DEMO.positions for a in p.position.alternates}
    assert named == set(EXPECTED)


@pytest.mark.parametrize(("place", "alternate"), EXPECTED)
def test_demo_alternate_has_its_verdict(place, alternate):
    record = next(p for p in DEMO.positions if p.position.position == place)
    found = swap(record, DEMO.part(alternate), DEMO)
    decisive = [reason.about for reason in found.reasons if reason.against is not False]
    assert (found.verdict, list(dict.fromkeys(decisive))) == EXPECTED[place, alternate]


def test_demo_shows_each_of_the_four_verdicts():
    assert {verdict for verdict, _ in EXPECTED.values()} == {
        "fits",
        "fits with new firmware",
        "does not fit",
        "undecided",
    }
