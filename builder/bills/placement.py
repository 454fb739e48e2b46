"""Whether a part may stand where a bill puts it, as the ledger has it, in a sentence."""

from __future__ import annotations

from builder.bills.boards import Board
from builder.bills.finding import Kind, Severity
from builder.ledger import Permission, may_stand
from builder.ledger.standings import goes_by
from builder.problems import clipped
from builder.records import PartRecord, PositionRecord
from builder.records.part import Standing

Judged = tuple[Kind, Severity, str]


def placement(part: PartRecord, reference: str, board: Board | None) -> Judged:
    """What the ledger says of a part at a reference of a board, or of a part alone."""
    place = board.at.get(reference.casefold()) if board else None
    permission = may_stand(part, place)
    if place is None:
        return _anywhere(part, permission, board, reference)
    return _at(part, permission, place)


def _anywhere(part: PartRecord, permission: Permission, board: Board | None, reference: str) -> Judged:
    """Without a position on record only the part's own entry counts, and whether it names the board."""
    standing = permission.standing
    if not permission.given or standing is None:
        return _not_given(part, permission)
    on_board = {place.position.board.casefold() for place in board.places} if board else set()
    if standing.only_for and not on_board & {name.casefold() for name in standing.only_for}:
        return _restricted(
            part, standing, "/".join(filter(None, (board.short_name, reference))) if board else "this board"
        )
    return "approved", "ok", f"{part.part.part} is approved since {standing.on}."


def _at(part: PartRecord, permission: Permission, place: PositionRecord) -> Judged:
    number, position, standing = part.part.part, place.position, permission.standing
    is_fitted = goes_by(part, position.fitted)
    if permission.verdict == "not for here" and standing is not None:
        return _restricted(part, standing, position.position)
    if permission.verdict == "withdrawn" or (is_fitted and not permission.given):
        return _not_given(part, permission)
    if is_fitted and standing is not None:
        return "approved", "ok", f"{number} is what {position.position} is made for, approved since {standing.on}."
    if permission.given and standing is not None:
        return (
            "differs",
            "ok",
            f"{number} is an approved alternate for {position.fitted} at {position.position}, since {standing.on}.",
        )
    fitted = f"{position.position} is made for {position.fitted}"
    if permission.verdict == "not named here":
        return (
            "differs",
            "blocks",
            f"{fitted}, and {number} is no alternate there. Fit the part on record, or propose an alternate.",
        )
    return (
        "differs",
        "blocks",
        f"{fitted}; the alternate {number} is not approved there. Fit the part on record, or have it approved.",
    )


def _restricted(part: PartRecord, standing: Standing, where: str) -> Judged:
    only = clipped(", ".join(standing.only_for))
    message = (
        f"{part.part.part} is approved for {only} only, not for {where}. Fit another part, or have it approved here."
    )
    return "restricted", "blocks", message


def _not_given(part: PartRecord, permission: Permission) -> Judged:
    number, standing = part.part.part, permission.standing
    if standing is None:
        return "no-standing", "blocks", f"nobody has decided about {number} yet. Propose it, and have it approved."
    if standing.state == "withdrawn":
        because = clipped(standing.because, 120)
        return "withdrawn", "blocks", f"{number} was withdrawn on {standing.on}: {because} Fit another part."
    return (
        "proposed",
        "blocks",
        f"{number} is proposed since {standing.on}, not approved. Have it approved, or fit another part.",
    )
