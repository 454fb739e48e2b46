"""Verdicts on swaps, in words and colour."""

from __future__ import annotations

from builder.decisions import Verdict
from builder.pages.html import Html, tag

_CLASSES: dict[Verdict, str] = {
    "fits": "good",
    "fits with new firmware": "warn",
    "does not fit": "bad",
    "undecided": "open",
}
MEANINGS: dict[Verdict, str] = {
    "fits": "With the firmware in the field unchanged, every board stays within the limit and nothing else speaks against it.",
    "fits with new firmware": "With the firmware in the field it does not meet the limit; with firmware made for it, it would.",
    "does not fit": "Something speaks against it that new firmware does not cure.",
    "undecided": "A figure that decides is not stated. Nothing is taken for zero.",
}


def verdict_badge(verdict: Verdict) -> Html:
    """A verdict in words and colour."""
    return tag("span", verdict, class_=f"bd-verdict bd-verdict-{_CLASSES[verdict]}")
