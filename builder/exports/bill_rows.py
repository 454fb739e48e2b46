"""What was found on a bill of materials as rows, as a sentence and as JSON's answer: for the command line and CSV."""

from __future__ import annotations

from typing import Any

from builder.bills import Judgement
from builder.exports.rows import Column, Row
from builder.problems import clipped, count_text

NAMES = ("line", "reference", "number", "part", "finding", "severity", "message")


def _text(value: str | None) -> str:
    return clipped(value or "", 30)


COLUMNS = (
    Column("line", "line", lambda line: "–" if line is None else str(line)),
    Column("severity", "severity", left=True),
    Column("finding", "finding", left=True),
    Column("reference", "reference", _text, left=True),
    Column("number", "number", _text, left=True),
    Column("message", "", left=True),
)


def bill_rows(judged: Judgement) -> list[Row]:
    """One row for each finding."""
    return [{name: getattr(finding, name) for name in NAMES} for finding in judged.findings]


def bill_answer(judged: Judgement) -> dict[str, Any]:
    """What JSON answers."""
    return {
        "board": judged.board.short_name if judged.board else None,
        "lines": bill_rows(judged),
        "thermistor_lines": judged.thermistor_lines,
        "other_lines": judged.other_lines,
        "blocks": judged.count("blocks"),
        "warnings": judged.count("warning"),
    }


def bill_sentence(judged: Judgement) -> str:
    """What stands below the table: how many lines of which kind, and how many findings block."""
    board = judged.board.short_name if judged.board else "No board named"
    lines = (
        f"{count_text(judged.thermistor_lines, 'line')} of thermistors, {count_text(judged.other_lines, 'other line')}"
    )
    blocking = judged.count("blocks")
    verdict = (
        f"{count_text(blocking, 'finding')} {'blocks' if blocking == 1 else 'block'}" if blocking else "nothing blocks"
    )
    return f"{board}: {lines}; {verdict}, {count_text(judged.count('warning'), 'warning')}."
