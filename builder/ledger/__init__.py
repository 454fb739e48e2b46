"""The ledger: what was decided about parts and about alternates at positions, by whom, and on which document."""

from builder.ledger.entries import Entry, entries
from builder.ledger.standings import APPROVING, Permission, is_for, may_stand, standing_at, standing_of

__all__ = [
    "APPROVING",
    "Entry",
    "Permission",
    "entries",
    "is_for",
    "may_stand",
    "standing_at",
    "standing_of",
]
