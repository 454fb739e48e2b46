"""A part's documents: which revision is the newest, what rests on which, and what rests on one that was replaced."""

from __future__ import annotations

from collections.abc import Sequence

from builder.ledger.entries import Entry
from builder.ledger.standings import APPROVING
from builder.records import Part
from builder.records.part import FIGURES, Document, DocumentRevision, Figures, Limits


def newest(documents: Sequence[Document]) -> Document:
    """The newest of several revisions: by date, and of one day the last; where one has no date, the last."""
    dated = [(document.dated, i) for i, document in enumerate(documents) if document.dated]
    return documents[max(dated)[1] if len(dated) == len(documents) else -1]


def same_title(part: Part, title: str) -> list[Document]:
    """The revisions of a part's document, as its record lists them; upper and lower case alike."""
    return [document for document in part.documents if document.title.casefold() == title.casefold()]


def named_document(part: Part, named: DocumentRevision) -> Document | None:
    """The document of a part that an entry names; None where the part has no such revision."""
    return next((d for d in same_title(part, named.title) if _is_same(d.revision, named.revision)), None)


def replacement(part: Part, document: Document) -> Document | None:
    """The newest revision of a document, where that is another one."""
    found = newest(same_title(part, document.title))
    return None if _is_same(found.revision, document.revision) else found


def replaced_since(entry: Entry) -> Document | None:
    """The newest revision of the document that an approval rests on, where the entry names an earlier one.

    Only entries that hold are looked at: of an earlier one the entries after it tell what became of it.
    """
    named, part = entry.standing.document, entry.part.part
    if not entry.holds or entry.standing.state not in APPROVING or named is None:
        return None
    document = named_document(part, named)
    return replacement(part, document) if document else None


def figure_documents(part: Part) -> dict[Figures, Document]:
    """The document that each group of a part's figures was read from: the newest that names it in `figures`.

    What none names rests on the newest revision of the first document; of a part without documents nothing is known.
    """
    if not part.documents:
        return {}
    first = newest(same_title(part, part.documents[0].title))
    stated = [name for name in FIGURES if getattr(part, name) not in (None, (), Limits())]
    naming = {name: [d for d in part.documents if name in d.figures] for name in stated}
    return {name: newest(documents) if documents else first for name, documents in naming.items()}


def _is_same(revision: str | None, other: str | None) -> bool:
    return (revision or "").casefold() == (other or "").casefold()
