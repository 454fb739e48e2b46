"""The ledger: what was decided about parts and about alternates at positions, by whom, and on which document."""

from builder.ledger.documents import figure_documents, named_document, replaced_since, replacement
from builder.ledger.entries import Entry, alternate_ledgers, entries, part_ledger
from builder.ledger.standings import APPROVING, Permission, is_for, may_stand, standing_at, standing_of

__all__ = [
    "APPROVING",
    "Entry",
    "Permission",
    "alternate_ledgers",
    "entries",
    "figure_documents",
    "is_for",
    "may_stand",
    "named_document",
    "part_ledger",
    "replaced_since",
    "replacement",
    "standing_at",
    "standing_of",
]
