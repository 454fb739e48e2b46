"""A swap as sentences and as JSON's answer; its rows are those of its budget."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from builder.decisions import Reason, Swap
from builder.exports.budget_rows import budget_answer
from builder.exports.rows import Row, rounded

_SAYS = {True: "against", None: "open", False: "to know"}


def swap_answer(found: Swap) -> dict[str, Any]:
    """What JSON answers: the alternate's budget with the firmware in the field, the verdict and its reasons."""
    return budget_answer(found.after, found.alternate.part.part) | {
        "fitted": found.fitted.part.part,
        "worst_before_k": rounded(found.before.worst_k),
        "worst_new_firmware_k": rounded(found.new_firmware.worst_k),
        "verdict": found.verdict,
        "reasons": [_reason(reason) for reason in found.reasons],
    }


def _reason(reason: Reason) -> Row:
    return {"about": reason.about, "message": reason.message, "against": reason.against}


def swap_sentences(found: Swap) -> Iterator[str]:
    """The verdict, and below it every reason: what speaks against first, then what is open, then what is to be known."""
    place = found.position.position
    yield f"{found.alternate.name} in place of {found.fitted.name} at {place.position}: {found.verdict}."
    for against, says in _SAYS.items():
        for reason in found.reasons:
            if reason.against is against:
                yield f"{says:8} {reason.about}: {reason.message}"
