"""Reference designators: a cell's list of them, with its ranges."""

from __future__ import annotations

import re
from collections.abc import Iterator

# More references than this in one range are a slip of the finger.
_LONGEST_RANGE = 1000
_RANGE = re.compile(
    r"(?<![^\s,;/&+|])(?P<head>[^\W\d_]{1,9})(?P<first>[0-9]{1,6})\s?"
    r"(?:[-~:\u2010-\u2015\u2212\u2026]|\.{2,3}|\b(?:to|bis|a|à)\b)"
    r"\s?(?P<tail>[^\W\d_]{0,9})(?P<last>[0-9]{1,6})(?![^\s,;/&+|])"
)
_DIVIDED = re.compile(r"[\s,;/&+|]+")


def references(cell: str) -> tuple[str, ...]:
    """The references that a cell names, in its order; what does not begin with a letter is none.

    >>> references("RT1, RT2"), references("RT1-RT4"), references("RT1 RT2; RT9")
    (('RT1', 'RT2'), ('RT1', 'RT2', 'RT3', 'RT4'), ('RT1', 'RT2', 'RT9'))
    """
    listed = _RANGE.sub(_range, cell)
    return tuple(name for name in _DIVIDED.split(listed) if name[:1].isalpha())


def _range(found: re.Match[str]) -> str:
    head, first, last = found["head"], int(found["first"]), int(found["last"])
    same = found["tail"].casefold() in ("", head.casefold())
    if not same or not 0 <= last - first < _LONGEST_RANGE:
        return found[0]
    return " ".join(_counted(head, first, last, len(found["first"])))


def _counted(head: str, first: int, last: int, width: int) -> Iterator[str]:
    return (f"{head}{number:0{width}}" for number in range(first, last + 1))
