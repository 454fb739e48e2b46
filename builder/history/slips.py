"""Whether the ledger was kept: nothing of it edited or removed, and no approved curve moved without a new entry."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from difflib import SequenceMatcher
from itertools import count

from builder.history.fields import differing_values
from builder.history.matching import Pair, R, part_pairs, position_pairs
from builder.history.repository import Commit, Repository
from builder.history.revision import State, state_at
from builder.history.shift import MOVED_K, Shift, shift
from builder.ledger import APPROVING
from builder.problems import Problem, clipped, in_order, quoted
from builder.records import Catalog, PartRecord, PositionRecord, Source, UnknownPart
from builder.records.part import Standing
from builder.records.position import Alternate
from builder.records.yaml_text import Path
from builder.units import signed_text, temperature_text

_APPEND = "Restore it, and append what holds now as a new entry."
Standings = tuple[Standing, ...]


@dataclass(frozen=True, eq=False)
class _Ledger:
    """A list of entries as a state had it and as it is now (None: gone), and where what is wrong with it is told.

    `about` is the part's name today, whatever it was called in the state.
    """

    about: str
    what: str
    source: Source
    path: Path
    before: Standings
    now: Standings | None
    revision: str

    @property
    def key(self) -> tuple[str, str]:
        """The same for one ledger in every state."""
        return self.source.file, self.about

    @property
    def is_own(self) -> bool:
        """Whether it is the part's own, not an alternate's."""
        return self.path == ("standing",)

    def problem(self, path: Path, rule: str, message: str) -> Problem:
        """A problem of one of its fields."""
        return self.source.problem((*self.path, *path), rule, message)


def states_since(repository: Repository, since: Commit, now: State) -> tuple[State, ...]:
    """The records at a commit and at all later ones up to HEAD that touched them, the oldest first.

    Raises
    ------
    HistoryUnread
        Git cannot read one of them.
    """
    states = [now]
    for commit in (*repository.commits_since(since), since):
        states.append(state_at(repository, commit, near=states[-1]))
    return tuple(reversed(states[1:]))


def ledger_slips(states: Sequence[State], now: State) -> tuple[Problem, ...]:
    """What of the ledger is not as earlier states had it, and approved curves that moved since they were approved.

    The states are taken one after the other, the oldest first: whatever one of them appends belongs to the ledger from
    then on, so an entry that came and went is missed; what one of them breaks and a later one restores is kept.
    """
    kept: dict[tuple[str, str], _Ledger] = {}
    unsigned: list[Problem] = []
    settled: set[tuple[str, str]] = set()
    for state in states:
        parts = list(_matched(part_pairs(state, now), now.catalog.parts))
        renamed = {before.name: part.name for before, part in parts if part is not None}
        ledgers = [*_of_parts(state, parts), *_of_alternates(state, now, renamed)]
        for ledger in ledgers:
            known = kept.get(ledger.key)
            if known is None or ledger.before[: len(known.before)] == known.before:
                kept[ledger.key] = ledger
        unsigned += _unsigned(parts, ledgers, settled)
    return in_order([*(problem for ledger in kept.values() for problem in _slips(ledger)), *unsigned])


def _matched(pairs: Iterable[Pair[R]], now: Iterable[R]) -> Iterator[tuple[R, R | None]]:
    """Every record of a state with what it is now, None where it is gone; what cannot be read now is left out."""
    paired = {pair.now.source.file for pair in pairs if pair.now is not None}
    for pair in pairs:
        if pair.before is not None and pair.change != "not readable now":
            yield pair.before, pair.now
    yield from ((record, record) for record in now if record.source.file not in paired)


def _of_parts(state: State, matched: Iterable[tuple[PartRecord, PartRecord | None]]) -> Iterator[_Ledger]:
    for before, now in matched:
        record = now or before
        what = f"the record of {record.name}"
        entries = now.part.standing if now else None
        yield _Ledger(record.name, what, record.source, ("standing",), before.part.standing, entries, state.name)


def _of_alternates(state: State, now: State, renamed: Mapping[str, str]) -> Iterator[_Ledger]:
    for before, place in _matched(position_pairs(state, now), now.catalog.positions):
        record = place or before
        found = _alternates(place, now.catalog, {}) if place else {}
        fitted = _name(place.position.fitted, now.catalog, {}) if place else ""
        for part, (_, alternate) in _alternates(before, state.catalog, renamed).items():
            # What is fitted now cannot be its own alternate; its part's ledger decides from then on.
            if part == fitted:
                continue
            # A part that has left the catalog goes by the number typed.
            i, same = found.get(part) or found.get(alternate.part.casefold()) or (None, None)
            path: Path = ("alternates",) if i is None else ("alternates", i, "standing")
            what = f"the alternate {alternate.part} at {record.position.position}"
            entries = same.standing if same else None
            yield _Ledger(part, what, record.source, path, alternate.standing, entries, state.name)


def _alternates(
    place: PositionRecord, catalog: Catalog, renamed: Mapping[str, str]
) -> dict[str, tuple[int, Alternate]]:
    """A position's alternates with their places in its list, by the names that the parts have today."""
    return {_name(a.part, catalog, renamed): (i, a) for i, a in enumerate(place.position.alternates)}


def _name(number: str, catalog: Catalog, renamed: Mapping[str, str]) -> str:
    try:
        name = catalog.part(number).name
    except UnknownPart:
        return number.casefold()
    return renamed.get(name, name)


def _slips(ledger: _Ledger) -> Iterator[Problem]:
    before, now = ledger.before, ledger.now
    if now is None:
        yield from _gone(ledger)
    elif now[: len(before)] == before:
        return
    elif not Counter(before) - Counter(now):
        message = f"the entries do not stand in the order that they had in revision {ledger.revision}. Restore it; a new entry goes to the end."
        yield ledger.problem((), "ledger-edited", message)
    else:
        yield from _edited_or_removed(ledger, now)


def _gone(ledger: _Ledger) -> Iterator[Problem]:
    """A whole ledger that is no longer there; one without entries may go."""
    if ledger.before:
        entries = ", ".join(_entry(entry) for entry in ledger.before)
        is_withdrawn = ledger.before[-1].state == "withdrawn"
        cure = "Put it back." if is_withdrawn else "Put it back, and append an entry that withdraws it."
        message = (
            f"{clipped(ledger.what, 100)} is gone, whose ledger stood in revision {ledger.revision}: {entries}. {cure}"
        )
        yield ledger.problem((), "ledger-removed", message)


def _edited_or_removed(ledger: _Ledger, now: Standings) -> Iterator[Problem]:
    before = ledger.before
    missing = Counter(before) - Counter(now)
    for what, first, end, first_now, end_now in SequenceMatcher(None, before, now, autojunk=False).get_opcodes():
        for i, at in zip(range(first, end), count(first_now)):
            if what == "equal" or not missing[before[i]]:
                continue
            missing[before[i]] -= 1
            if at < end_now:
                message = f"the entry {_entry(before[i])} stood otherwise in revision {ledger.revision}: {_edits(before[i], now[at])}. {_APPEND}"
                yield ledger.problem((at,), "ledger-edited", message)
            else:
                message = f"the entry {_entry(before[i])} stood in revision {ledger.revision} and is gone. {_APPEND}"
                yield ledger.problem((), "ledger-removed", message)


def _edits(before: Standing, now: Standing) -> str:
    edits = differing_values((), before.model_dump(mode="json"), now.model_dump(mode="json"))
    return ", ".join(f"{edit.field} was {quoted(edit.before)}" for edit in edits)


def _entry(entry: Standing) -> str:
    return f"{entry.state} on {entry.on.isoformat()} by {clipped(entry.by)}"


def _unsigned(
    parts: Iterable[tuple[PartRecord, PartRecord | None]], ledgers: Iterable[_Ledger], settled: set[tuple[str, str]]
) -> Iterator[Problem]:
    """Approvals whose last entry stood in a state already, of parts whose curve is not the one that it had there.

    The first state that has the last entry settles an approval: what the part shows there is what was approved.
    """
    curves = {now.name: (before, now) for before, now in parts if now is not None}
    for ledger in ledgers:
        entries = ledger.now
        if not entries or ledger.about not in curves or ledger.key in settled or len(ledger.before) < len(entries):
            continue
        before, now = curves[ledger.about]
        if _signs(ledger, entries, now):
            settled.add(ledger.key)
            moved = shift(before, now) if before is not now else None
            if moved is not None and moved.moved:
                yield ledger.problem((len(entries) - 1,), "curve-moved-unsigned", _moved_text(moved, ledger, entries))


def _signs(ledger: _Ledger, entries: Standings, part: PartRecord) -> bool:
    """Whether a ledger approves a part: its own, or an alternate's where the part has no approval of its own."""
    return entries[-1].state in APPROVING and (ledger.is_own or part.part.state() not in APPROVING)


def _moved_text(moved: Shift, ledger: _Ledger, entries: Standings) -> str:
    who = "the part" if ledger.is_own else clipped(ledger.what, 100)
    cure = "Append an entry that approves it as it is, or restore the figures."
    return f"{_shift_text(moved)} since revision {ledger.revision}, where {who} stood as {entries[-1].state} already. {cure}"


def _shift_text(moved: Shift) -> str:
    if abs(moved.worst_k) > MOVED_K and moved.at_c is not None:
        return f"the curve moved by {signed_text(moved.worst_k, 3)} K at {temperature_text(moved.at_c)}"
    if moved.band_at_c is not None:
        return (
            f"the tolerance band moved by {signed_text(moved.band_worst_k, 3)} K at {temperature_text(moved.band_at_c)}"
        )
    return "the curve shares no range with the one it was"
