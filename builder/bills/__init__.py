"""Bills of materials: read from CSV and XLSX, their thermistors found and held against the ledger."""

from builder.bills.bill import Bill, BillLine, read_bill
from builder.bills.boards import Board, UnknownBoard, boards, guessed_board, named_board
from builder.bills.finding import Finding
from builder.bills.headings import Role
from builder.bills.judgement import Judgement, judgement
from builder.bills.unreadable import Unreadable

__all__ = [
    "Bill",
    "BillLine",
    "Board",
    "Finding",
    "Judgement",
    "Role",
    "UnknownBoard",
    "Unreadable",
    "boards",
    "guessed_board",
    "judgement",
    "named_board",
    "read_bill",
]
