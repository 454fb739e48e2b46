"""Whether a part may be fitted: by its own standing, by its standing as an alternate, by only_for of both."""

import pytest
from ledger_records import entry, part, place

from builder.ledger import is_for, may_stand, standing_at, standing_of

STATES = ("proposed", "approved", "restricted", "withdrawn")


def verdict(own, at=None):
    found = may_stand(own, at)
    return found.verdict, found.given


@pytest.mark.parametrize("state", STATES)
def test_anywhere_a_part_s_own_standing_decides(state):
    may = state in ("approved", "restricted")
    assert verdict(part("PX-1", entry("approved"), entry(state))) == (state, may)
    assert verdict(part("PX-1", entry(state)), place(fitted="PX-1")) == (state, may)


def test_where_nobody_decided_no_part_may_be_fitted():
    assert verdict(part()) == ("undecided", False) == verdict(part(), place())
    assert verdict(part("PX-2", entry("approved")), place(PX_2=[])) == ("undecided", False)


@pytest.mark.parametrize("own", ["proposed", "approved", "restricted", None])
@pytest.mark.parametrize("here", STATES)
def test_an_alternate_s_standing_at_the_position_decides_there(own, here):
    standing = [entry(own)] if own else []
    found = may_stand(part("PX-2", *standing), place(PX_2=[entry("proposed"), entry(here)]))
    assert (found.verdict, found.standing.state) == (here, here)


def test_a_withdrawn_part_may_be_fitted_nowhere():
    gone = part("PX-2", entry("approved"), entry("withdrawn", because="no longer made"))
    found = may_stand(gone, place(PX_2=[entry("approved")]))
    assert (found.verdict, found.given, found.standing.because) == ("withdrawn", False, "no longer made")
    assert verdict(gone, place(fitted="PX-2")) == ("withdrawn", False)


def test_a_part_that_the_position_does_not_name_may_not_be_fitted_there():
    assert verdict(part("PX-9", entry("approved")), place(PX_2=[])) == ("not named here", False)


def test_a_part_that_is_for_other_places_may_not_be_fitted_here():
    own = part("PX-1", entry("restricted", only_for=["can/RT1"]))
    assert verdict(own) == ("restricted", True)
    assert verdict(own, place()) == ("not for here", False)
    assert verdict(own, place("can/RT1")) == ("restricted", True)
    other = part("PX-2", entry("restricted", only_for=["can/RT1"]))
    assert verdict(other, place(PX_2=[entry("approved")])) == ("not for here", False)


def test_an_alternate_s_own_entry_may_be_for_other_places_too():
    here = place(PX_2=[entry("approved", only_for=["can/RT1"])])
    assert verdict(part("PX-2", entry("approved")), here) == ("not for here", False)


def test_a_withdrawal_here_says_more_than_that_the_part_is_for_other_places():
    own = part("PX-2", entry("restricted", only_for=["can/RT1"]))
    found = may_stand(own, place(PX_2=[entry("withdrawn", because="reads 2 K low")]))
    assert (found.verdict, found.standing.because) == ("withdrawn", "reads 2 K low")


@pytest.mark.parametrize("name", ["PX-2", "px-2", "Pellworm PX-2", "HS-7"])
def test_a_position_names_a_part_by_any_of_its_names(name):
    own = part("PX-2", entry("approved"), own_number="HS-7")
    assert verdict(own, place(fitted=name)) == ("approved", True)
    assert standing_at(own, place(**{name.replace("-", "_"): [entry("proposed")]})).state == "proposed"


@pytest.mark.parametrize(
    ("names", "for_here"),
    [
        ([], True),
        (["box/RT1"], True),
        (["BOX/rt1"], True),
        (["BOX"], True),
        (["can/RT1", "box"], True),
        (["box/RT"], False),
        (["box/"], False),
        (["can/RT1"], False),
    ],
)
def test_only_for_names_a_position_or_its_board_whole_in_any_case(names, for_here):
    standing = standing_of(part("PX-1", entry("approved", only_for=names)))
    assert is_for(standing, place().position) is for_here


def test_the_last_entry_holds():
    own = part("PX-2", entry("approved", "2026-03-02"), entry("withdrawn", "2026-01-05"))
    at = place(PX_2=[entry("withdrawn"), entry("approved")])
    assert standing_of(own).state == "withdrawn"
    assert standing_at(own, at).state == "approved"
    assert standing_of(part()) is None
    assert standing_at(part("PX-9"), at) is None is standing_at(part("PX-2"), place(PX_2=[]))
