"""Rules about the ledger: each entry by itself, beside the one before it, and beside the record that it stands in."""

from __future__ import annotations

import datetime
from collections import Counter, defaultdict
from collections.abc import Iterable, Iterator, Sequence
from itertools import pairwise

from builder.crosschecks.fitting_findings import fitting_findings
from builder.kept import Shelf
from builder.ledger import APPROVING, Entry, alternate_ledgers, named_document, part_ledger, replaced_since
from builder.problems import Problem, clipped, count_text, errors, nearest
from builder.records import Catalog, PartRecord, Source
from builder.records.part import DocumentRevision

_FEWEST_WORDS = 2


def ledger_findings(catalog: Catalog, today: datetime.date, shelf: Shelf) -> Iterator[Problem]:
    """What is wrong or doubtful in the ledgers of a catalog, and in who is fitted where.

    What the shelf has of a part's own ledger is not looked for again, and the part not fetched.
    """
    holding: list[Entry] = []
    for part in (*catalog.parts, *catalog.curveless):
        key = f"{part.digest} ledger {today}"
        if shelf.head(key) is None:
            ledger = part_ledger(part)
            names_places = bool(ledger and ledger[-1].standing.only_for)
            shelf.put(key, None, (tuple(_of_ledger(ledger, today)), names_places))
        found, names_places = shelf.head(key)
        yield from found
        holding += part_ledger(part)[-1:] if names_places else ()
    for place in catalog.positions:
        for ledger in alternate_ledgers(place, catalog):
            yield from _of_ledger(ledger, today)
            holding += ledger[-1:]
    yield from fitting_findings(catalog, holding)
    yield from _shared_own_numbers(catalog)


def _of_ledger(ledger: Sequence[Entry], today: datetime.date) -> Iterator[Problem]:
    for entry in ledger:
        for check in (_document, _replaced, _reason, _review_before):
            yield from check(entry)
        yield from _dates(entry, today)
    yield from _out_of_order(ledger)


def _document(entry: Entry) -> Iterator[Problem]:
    named, state = entry.standing.document, entry.standing.state
    if named is None:
        if state in APPROVING:
            message = (
                f"is missing: {state} without one. Name the document that the decision rests on, with its revision."
            )
            yield entry.problem(("document",), "approval-document", message)
    elif named.revision is None and state in APPROVING:
        message = f"is missing: {state} on no revision of the {clipped(named.title)}. Name the one that was looked at."
        yield entry.problem(("document", "revision"), "approval-document", message)
    elif (document := named_document(entry.part.part, named)) is None:
        message = f"{clipped(str(named))} is not among the documents of {entry.part.name}.{_near(named, entry)}"
        yield entry.problem(("document",), "approval-document", message)
    elif document.dated and document.dated > entry.standing.on:
        message = (
            f"{clipped(str(named))} is of {document.dated.isoformat()}, after the decision, {entry.standing.on.isoformat()}. "
            "Correct one of the two days, or name the revision that was looked at."
        )
        yield entry.problem(("document",), "document-after-decision", message, "warning")


def _near(named: DocumentRevision, entry: Entry) -> str:
    known = [str(DocumentRevision(title=d.title, revision=d.revision)) for d in entry.part.part.documents]
    return nearest(str(named), known) or " Add it there, or name the one that was meant."


def _replaced(entry: Entry) -> Iterator[Problem]:
    newer, named = replaced_since(entry), entry.standing.document
    if newer is not None and named is not None:
        later = f"revision {newer.revision}" if newer.revision else "one without a revision"
        since = f" of {newer.dated.isoformat()}" if newer.dated else ""
        message = (
            f"{entry.standing.state} rests on {clipped(str(named))}, which {later}{since} has replaced. "
            "Review what changed, then append an entry."
        )
        yield entry.problem(("document",), "revision-replaced", message, "warning")


def _reason(entry: Entry) -> Iterator[Problem]:
    because = entry.standing.because
    if entry.standing.state == "withdrawn" and sum(any(map(str.isalnum, w)) for w in because.split()) < _FEWEST_WORDS:
        message = f"{clipped(because)} does not say why. Write a sentence: somebody will want to approve it again."
        yield entry.problem(("because",), "withdrawn-why", message)


def _review_before(entry: Entry) -> Iterator[Problem]:
    due, on = entry.standing.review_due, entry.standing.on
    if due is not None and due < on:
        message = f"{due.isoformat()} lies before the decision, {on.isoformat()}. Correct one of the two."
        yield entry.problem(("review_due",), "review-before-decision", message)


def _dates(entry: Entry, today: datetime.date) -> Iterator[Problem]:
    due, on = entry.standing.review_due, entry.standing.on
    if on > today:
        message = (
            f"{on.isoformat()} lies after today, {today.isoformat()}. Correct the date, or append the entry on its day."
        )
        yield entry.problem(("on",), "future-entry", message, "warning")
    elif due is not None and due < today and entry.holds:
        what = "alternate" if entry.position else "part"
        message = f"the review was due on {due.isoformat()}. Review the {what} and append an entry to its standing."
        yield entry.problem(("review_due",), "review-overdue", message, "warning")


def _out_of_order(ledger: Sequence[Entry]) -> Iterator[Problem]:
    for before, after in pairwise(ledger):
        if after.standing.on < before.standing.on:
            message = (
                f"{after.standing.on.isoformat()} lies before the entry above, {before.standing.on.isoformat()}. "
                "Entries are appended as they are made: correct the date, or move the entry."
            )
            yield after.problem(("on",), "ledger-order", message)


def _shared_own_numbers(catalog: Catalog) -> Iterator[Problem]:
    meanings: dict[str, list[tuple[PartRecord, str]]] = defaultdict(list)
    for record in catalog.parts:
        meanings[record.number.casefold()].append((record, "part number"))
        meanings[(record.own_number or "").casefold()].append((record, "own number"))
    for record in catalog.parts:
        own = record.own_number or ""
        shared = next(((other, what) for other, what in meanings[own.casefold()] if other is not record), None)
        if own and shared:
            other, what = shared
            message = (
                f"{clipped(own)} is the {what} of {other.name} too. Give each part its own, or accept the finding where "
                "one number buys either."
            )
            yield record.source.problem(("own_number",), "own-number-shared", message, "warning")


def approvals_of_errors(catalog: Catalog, problems: Iterable[Problem]) -> Iterator[Problem]:
    """Approved parts whose records have errors: people rely on them while they are mended."""
    # What is wrong with the ledger itself says so.
    faulty = Counter(p.file for p in errors(problems) if not p.field.startswith("standing"))
    parts = (*catalog.parts, *catalog.curveless)
    tables = {r.source.file: r.table_file for r in parts}
    tables |= {loose.source.file: loose.table.file for loose in catalog.loose_tables}

    def count(source: Source) -> int:
        return sum(faulty[file] for file in {source.file, tables.get(source.file) or source.file})

    # Only what has errors is fetched.
    holding = [(r.source, len(r.part.standing) - 1, r.part.standing[-1]) for r in parts if r.state and count(r.source)]
    holding += [(loose.source, loose.index, loose.standing) for loose in catalog.loose_standings if count(loose.source)]
    for source, index, standing in holding:
        if standing.state in APPROVING:
            message = (
                f"the part is {standing.state} since {standing.on.isoformat()}, and its record has "
                f"{count_text(count(source), 'error')}. Correct what is wrong; where a figure changes, append an entry that says who looked at it."
            )
            yield source.problem(("standing", index), "approval-of-errors", message, "warning")
