"""A part's documents: their revisions, what rests on each, and which decisions rest on one that was replaced."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from builder.ledger import Entry, figure_documents, named_document, replacement
from builder.pages.context import Context
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.ledger import day_text, standing_badge
from builder.pages.page import CopiedFile
from builder.pages.paths import relative
from builder.records import PartRecord
from builder.records.part import Document, Figures, Part, Standing

_FIGURES: Mapping[Figures, str] = {
    "rated": "rated resistance",
    "b_values": "B-values",
    "steinhart_hart": "Steinhart–Hart coefficients",
    "r_t_table": "R–T table",
    "accuracy": "accuracy in kelvin",
    "limits": "limits",
    "qualification": "qualification",
}


def document_files(context: Context) -> Iterator[CopiedFile]:
    """The files of all documents, each once."""
    files = {context.paths.document(file): file for part in context.catalog.parts for file in part.files.values()}
    yield from (CopiedFile(path, file.path) for path, file in files.items())


def documents_section(record: PartRecord, context: Context) -> Html:
    """Every revision with the figures that were read from it, then what rests on a replaced one."""
    if not record.part.documents:
        return tag("p", "The record names none.")
    return joined([_documents(record, context), _outdated_table(record, context)])


def _documents(record: PartRecord, context: Context) -> Html:
    part, read_from = record.part, figure_documents(record.part)
    rows = [
        (
            link(document.title, document.link) if document.link else document.title,
            document.revision,
            day_text(document.dated),
            _file(document, record, context),
            ", ".join(_FIGURES[name] for name, source in read_from.items() if source is document),
            _replaced(replacement(part, document)),
        )
        for document in part.documents
    ]
    headings = ("document", "revision", "dated", "file", "figures read from it", "now")
    return table(headings, rows, caption="Documents, and the revision that each group of figures rests on")


def _file(document: Document, record: PartRecord, context: Context) -> Html | None:
    file = record.files.get(document.file or "")
    return link(file.path.name, relative(context.paths.document(file), context.paths.part(record))) if file else None


def _replaced(newer: Document | None) -> str | None:
    return None if newer is None else f"replaced by {newer.revision or 'a later one'}"


def rests_on(part: Part, standing: Standing | None) -> str | None:
    """The document that a decision about a part rests on, and the revision that has replaced it."""
    if standing is None or standing.document is None:
        return None
    document = named_document(part, standing.document)
    newer = replacement(part, document) if document else None
    return f"{standing.document}{f', {_replaced(newer)}' if newer else ''}"


def outdated_sources(record: PartRecord, context: Context) -> str:
    """What the part's page takes of the decisions at positions, for its `made_from`."""
    at = [(entry.standing, entry.position) for entry in context.outdated_at_positions(record) if entry.position]
    return repr([(standing, place.position.position, context.paths.position(place)) for standing, place in at])


def _outdated_table(record: PartRecord, context: Context) -> Html:
    rows = [
        (
            day_text(entry.standing.on),
            _where(entry, context),
            standing_badge(entry.standing.state),
            entry.standing.by,
            rests_on(record.part, entry.standing),
        )
        for entry in context.outdated(record)
    ]
    if not rows:
        return Html()
    said = "Compare both revisions, then append an entry to the standing that rests on the newer one, or withdraws."
    shown = table(("day", "about", "standing", "by", "rests on"), rows, caption=said)
    return joined([tag("h3", "Decisions that rest on a replaced revision"), shown])


def _where(entry: Entry, context: Context) -> Any:
    if entry.position is None:
        return "the part"
    address = relative(context.paths.position(entry.position), context.paths.part(entry.part))
    return joined(["alternate at ", link(entry.position.position.position, address)])
