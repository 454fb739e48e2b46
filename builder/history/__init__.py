"""The records as they were at a git revision, what has changed since, and whether the ledger was kept."""

from builder.history.changes import Changes, PartChange, PositionChange, changes
from builder.history.past import Past, Step
from builder.history.repository import Commit, HistoryUnread, Repository
from builder.history.revision import State, present_state, state_at
from builder.history.shift import Shift, shift
from builder.history.slips import ledger_slips, states_since

__all__ = [
    "Changes",
    "Commit",
    "HistoryUnread",
    "PartChange",
    "Past",
    "PositionChange",
    "Repository",
    "Shift",
    "State",
    "Step",
    "changes",
    "ledger_slips",
    "present_state",
    "shift",
    "state_at",
    "states_since",
]
