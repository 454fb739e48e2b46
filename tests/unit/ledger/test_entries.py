"""The entries of a catalog: all of them, in the order of their days, each with its place in its record."""

import dataclasses

import pytest
from ledger_records import catalog, entry, part, place

from builder.ledger import entries
from builder.records import Catalog


def test_entries_of_parts_and_of_alternates_come_in_the_order_of_their_days():
    parts = part("PX-1", entry("proposed", "2026-01-05"), entry("approved", "2026-04-01")), part("PX-2")
    at = place(PX_2=[entry("proposed", "2026-02-01"), entry("withdrawn", "2026-05-01")])
    found = [
        (e.standing.on.isoformat(), e.part.part.part, e.position is at, e.standing.state, e.index, e.holds)
        for e in entries(catalog(*parts, at))
    ]
    assert found == [
        ("2026-01-05", "PX-1", False, "proposed", 0, False),
        ("2026-02-01", "PX-2", True, "proposed", 0, False),
        ("2026-04-01", "PX-1", False, "approved", 1, True),
        ("2026-05-01", "PX-2", True, "withdrawn", 1, True),
    ]


def test_entries_of_one_day_keep_the_order_of_the_records():
    two = [entry("proposed"), entry("approved")]
    parts = part("PX-1", *two), part("PX-2", *two)
    at = place(PX_2=two)
    found = [(e.part.part.part, e.position is at, e.standing.state) for e in entries(catalog(*parts, at))]
    assert found == [
        (number, here, state)
        for number, here in (("PX-1", False), ("PX-2", False), ("PX-2", True))
        for state in ("proposed", "approved")
    ]


def test_an_entry_knows_where_it_stands_in_its_record():
    lines = {("alternates", 1, "standing", 0): 31, ("alternates", 1, "standing", 0, "because"): 34}
    at = place(PX_1=[], PX_2=[entry("proposed")], lines=lines, fitted="PX-3")
    (found,) = entries(catalog(part("PX-1"), part("PX-2"), at))
    assert (found.line, found.path, found.source) == (31, ("alternates", 1, "standing", 0), at.source)
    problem = found.problem(("because",), "a-rule", "is wrong. Mend it.", "warning")
    assert str(problem) == "parts/box/RT1.yaml:34: alternates[1].standing[0].because: is wrong. Mend it."
    assert (problem.rule, problem.severity) == ("a-rule", "warning")


def test_an_entry_of_a_part_stands_in_the_part_s_record():
    own = part("PX-1", entry("proposed"), lines={("standing", 0): 12})
    (found,) = entries(catalog(own))
    assert (found.line, found.position, found.source) == (12, None, own.source)


def test_an_alternate_that_is_no_part_of_the_catalog_has_no_entries():
    assert entries(catalog(part("PX-1"), place(PX_9=[entry("approved")]))) == ()


def test_a_catalog_without_decisions_has_no_entries():
    assert entries(Catalog()) == () == entries(catalog(part(), place(PX_1=[])))


def test_an_entry_cannot_be_changed():
    (found,) = entries(catalog(part("PX-1", entry("proposed"))))
    with pytest.raises(dataclasses.FrozenInstanceError):
        found.index = 3
