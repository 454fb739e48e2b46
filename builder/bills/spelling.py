"""Texts as they are compared: what differs between two people typing the same thing is taken away."""

from __future__ import annotations

import re
from unicodedata import combining, normalize

_SPACE = re.compile(r"\s+")
_DASH = re.compile("[\u2010-\u2015\u2212]")
_BRACKETED = re.compile(r"\([^()]*\)|\[[^\[\]]*\]")


def number_key(number: str) -> str:
    """A part number without its spaces, lower case, every dash a hyphen.

    >>> number_key(" TB3A–103 F38")
    'tb3a-103f38'
    """
    return _DASH.sub("-", _SPACE.sub("", normalize("NFKC", number))).casefold()


def word_key(text: str) -> str:
    """Letters and figures alone, without accents, lower case.

    >>> word_key("Stückzahl"), word_key("Manufacturer P/N"), word_key("Part #"), word_key("N°")
    ('stuckzahl', 'manufacturerpn', 'partno', 'no')
    """
    plain = text.replace("#", "no").replace("°", "o")
    if not plain.isascii():
        plain = "".join(c for c in normalize("NFKD", plain) if not combining(c))
    return "".join(filter(str.isalnum, plain.casefold()))


def heading_key(heading: str) -> str:
    """A heading's words without what stands in brackets behind them.

    >>> heading_key("Quantity [pcs]")
    'quantity'
    """
    return word_key(_BRACKETED.sub("", heading))
