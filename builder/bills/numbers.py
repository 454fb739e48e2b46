"""The catalog's numbers: the part that a number on a bill names, and the numbers that it looks like."""

from __future__ import annotations

import re
from collections import defaultdict
from collections.abc import Iterable, Iterator

from builder.bills.headings import words
from builder.bills.spelling import number_key, word_key
from builder.records import PartRecord

# Shorter numbers are one slip away from too many others, longer ones are no numbers.
_SHORTEST_ALIKE, _LONGEST_ALIKE = 5, 80
_BETWEEN_WORDS = re.compile(r"[\s,_\-\u2010-\u2015]+")
_ARTICLES = words("the die der das la le el")
_LEGAL_FORMS = words(
    "ab ag as bv co company corp corporation gmbh inc incorporated kg kgaa limited llc llp ltd nv oy oyj plc pte pty"
    " sa sarl sas se sl spa srl"
)
_BEFORE_A_SUFFIX = "-/_.,+#( "


class Numbers:
    """Every number that a part goes by, each found without looking at the others."""

    def __init__(self, parts: Iterable[PartRecord]) -> None:
        self._named: dict[str, list[PartRecord]] = {}
        self._spelt: dict[str, str] = {}
        self._one_short: defaultdict[str, set[str]] = defaultdict(set)
        kinds: list[dict[str, list[PartRecord]]] = [defaultdict(list) for _ in range(3)]
        for part in parts:
            for found, names in zip(kinds, _names(part), strict=True):
                for key in dict.fromkeys(map(number_key, names)):
                    found[key].append(part)
            self._add_alike(part.part.part)
        # A maker's number is never hidden by somebody's internal one, nor by a packaging suffix.
        for found in reversed(kinds):
            self._named |= found

    def parts(self, number: str, maker: str = "") -> tuple[PartRecord, ...]:
        """The parts that go by a number; of several the ones whose maker is named."""
        found = tuple(self._named.get(number_key(number), ()))
        named = tuple(part for part in found if is_maker(maker, part))
        return named if maker and len(found) > 1 and named else found

    def alike(self, number: str) -> tuple[str, ...]:
        """The makers' numbers that a number is one slip away from, or begins with."""
        key = word_key(number)
        if not _SHORTEST_ALIKE <= len(key) <= _LONGEST_ALIKE:
            return ()
        if key in self._spelt:
            return (self._spelt[key],)
        found = {spelt for short in (key, *_shortened(key)) for spelt in self._one_short.get(short, ())}
        return tuple(sorted(found)) or tuple(self._beginnings(number))[-1:]

    def _add_alike(self, number: str) -> None:
        key = word_key(number)
        if len(key) >= _SHORTEST_ALIKE:
            self._spelt[key] = number
            # Two texts that are one slip apart (a sign is another, too many, missing, elsewhere) have one of these in common.
            for short in (key, *_shortened(key)):
                self._one_short[short].add(number)

    def _beginnings(self, number: str) -> Iterator[str]:
        """Known numbers that the number begins with, up to a sign that may begin a suffix; the shortest first."""
        ends = (i for i, sign in enumerate(number) if sign in _BEFORE_A_SUFFIX)
        return (self._spelt[key] for end in ends if (key := word_key(number[:end])) in self._spelt)


def _names(part: PartRecord) -> tuple[Iterable[str], ...]:
    """What a part goes by, the names that decide first."""
    own = part.part.own_number
    plain = (part.part.part, part.name)
    packed = (name + suffix for name in plain for suffix in part.part.packaging_suffixes)
    return plain, [own] if own else [], packed


def _shortened(key: str) -> Iterator[str]:
    return (key[:i] + key[i + 1 :] for i in range(len(key)))


def is_maker(name: str, part: PartRecord) -> bool:
    """Whether a maker's name on a bill is the record's, whole or its first word; a name without letters says nothing.

    Case, spaces, punctuation, an article and the legal form do not matter; a later word is shared by many makers.
    """
    return not (typed := _spellings(name)) or bool(typed & _spellings(part.part.maker))


def _spellings(name: str) -> set[str]:
    """The first word of a maker's name and its words in one, without article and legal form."""
    keys = [key for word in _BETWEEN_WORDS.split(name) if (key := word_key(word)) and key not in _ARTICLES]
    plain = keys[:1] + [key for key in keys[1:] if key not in _LEGAL_FORMS]
    return {plain[0], "".join(plain)} if plain else set()
