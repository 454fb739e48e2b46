"""YAML with its 1.2 core meanings and the line of every value.

PyYAML reads YAML 1.1, where `1e4` is text, `010` is 8, `10:30` is 630, `no` is False and a repeated key wins
in silence. So only its parser is used, and the values are made here from the parser's events.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from itertools import islice
from typing import Any

import yaml

from builder.problems import clipped

Path = tuple[str | int, ...]

# Without libyaml the pure parser does the same, seven times slower.
_LOADER: Any = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_INT = re.compile(r"[-+]?[0-9]+|0o[0-7]+|0x[0-9a-fA-F]+")
_FLOAT = re.compile(r"[-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?")
_INFINITE = re.compile(r"[-+]?\.(inf|Inf|INF)")
_WORDS: Mapping[str, Any] = (
    dict.fromkeys(("", "~", "null", "Null", "NULL"))
    | dict.fromkeys(("true", "True", "TRUE"), True)
    | dict.fromkeys(("false", "False", "FALSE"), False)
    | dict.fromkeys((".nan", ".NaN", ".NAN"), float("nan"))
)
_DEEPEST = 12
# Python refuses to make an int of thousands of digits, or text of one; no count of a record comes near this.
_LONGEST_INT = 40
_NOT_TEXT = re.compile("[^\t\n\r -~\x85\xa0-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")

_TOO_DEEP = f"fields and lists stand more than {_DEEPEST} deep. No record needs that; check the indentation."
_DOES_NOT_FIT = "the line does not go on as the ones above it ask. Check the indentation, dashes, quotes and brackets, and the space after each colon."
_NOT_CLOSED = "the bracket opened on line {opened} is not closed, or a comma is missing. Close it; put text that holds a comma, colon or bracket in quotes."
_DIRECTIVE = "a line that begins with % is no part of a record. Remove it."
# What libyaml or the pure parser says, by a fragment of it, in the words of somebody who writes records.
_SYNTAX: Mapping[str, str] = {
    "cannot start any token": "{sign} cannot begin a value. Put the text in quotes.",
    "tab character": "a tab stands where spaces must stand. Indent with spaces.",
    "mapping values are not allowed": "a colon stands where none is expected. Put text that holds a colon in quotes, or check the indentation.",
    "',' or '}'": _NOT_CLOSED,
    "',' or ']'": _NOT_CLOSED,
    "end of stream": "the quote opened on line {opened} is not closed. Close it.",
    "escape c": "a backslash in double quotes begins a code. Write the text in single quotes, or the backslash twice.",
    "unexpected ':'": "a colon stands without a value after it. Write name: value, with a space between.",
    "alphabetic or numeric character": "a star or ampersand cannot begin text. Put the text in quotes.",
    "node content": "a bracket or comma stands where a value must stand. Remove it, or put the text in quotes.",
    "nesting depth": _TOO_DEEP,
    "directive": _DIRECTIVE,
    "incompatible": _DIRECTIVE,
    "": _DOES_NOT_FIT,
}


@dataclass(frozen=True)
class Fault:
    """Something YAML allows or breaks that a record may not have."""

    line: int
    field: str
    rule: str
    message: str


@dataclass
class YamlText:
    """A document's value, its faults, and the line and source of each value in it."""

    value: Any = None
    faults: list[Fault] = field(default_factory=list)
    lines: dict[Path, int] = field(default_factory=dict)
    plain: dict[Path, str] = field(default_factory=dict)

    def line(self, path: Path) -> int:
        """The line of the value at a path, or of what would hold it."""
        return line_of(self.lines, path)


def line_of(lines: Mapping[Path, int], path: Path) -> int:
    """The line noted for a path or for the nearest one above it; only lines that differ are noted."""
    while path and path not in lines:
        path = path[:-1]
    return lines.get(path, 1)


def field_name(path: Path) -> str:
    """A path as people read it.

    >>> field_name(("b_values", 1, "b_k"))
    'b_values[1].b_k'
    """
    name = ""
    for step in path:
        if isinstance(step, int):
            name += f"[{step}]"
        else:
            name += ("." if name else "") + (clipped(step, 40) or '""')
    return name


def scalar(text: str) -> Any:
    """The value of an unquoted scalar in the YAML 1.2 core schema.

    >>> scalar("1e4"), scalar("010"), scalar("10:30"), scalar("no"), scalar("true")
    (10000.0, 10, '10:30', 'no', True)
    """
    if text in _WORDS:
        return _WORDS[text]
    if text[0] not in "+-.0123456789":
        return text
    if len(text) <= _LONGEST_INT and _INT.fullmatch(text):
        return int(text) if text[:2] not in ("0o", "0x") else int(text, 0)
    if _FLOAT.fullmatch(text):
        return float(text)
    if _INFINITE.fullmatch(text):
        return float(text.replace(".", "").lower())
    return text


def read_yaml(text: str) -> YamlText:
    """Read one document; what is wrong with it stands in `faults`, never raised."""
    document = YamlText()
    unseen = _NOT_TEXT.search(text)
    if unseen:
        message = (
            f"the character U+{ord(unseen[0]):04X} cannot stand in a record. Delete it, or save the file as UTF-8."
        )
        document.faults.append(Fault(text.count("\n", 0, unseen.start()) + 1, "", "broken-yaml", message))
        return document
    try:
        _Builder(document, iter(yaml.parse(text, Loader=_LOADER))).build()
    except yaml.MarkedYAMLError as error:
        document.faults.append(_syntax_fault(error, text))
    except _Stop:
        pass
    return document


class _Stop(Exception):
    """Nothing more can be made of the document; the fault is noted."""


def _syntax_fault(error: yaml.MarkedYAMLError, text: str) -> Fault:
    mark: Any = error.problem_mark or error.context_mark
    opened: Any = error.context_mark or mark
    line = next(islice(text.splitlines(), mark.line, None), "")
    sign = line[mark.column : mark.column + 1]
    said = "tab character" if sign == "\t" else error.problem or ""
    wording = next(words for fragment, words in _SYNTAX.items() if fragment in said)
    return Fault(
        mark.line + 1, "", "broken-yaml", wording.format(opened=opened.line + 1, sign=sign or "an empty place")
    )


class _Builder:
    """Makes values from the parser's events, noting lines on the way."""

    def __init__(self, document: YamlText, events: Iterator[Any]) -> None:
        self._document = document
        self._events = events

    def build(self) -> None:
        starts = (event for event in self._events if isinstance(event, yaml.DocumentStartEvent))
        first = next(starts, None)
        if first is not None:
            if first.version or first.tags:
                self._report(first, (), _DIRECTIVE)
            self._document.value = self._value(next(self._events), (), 1)
        second = next(starts, None)
        if second is not None:
            message = "a second record begins here. Keep one record in a file; remove the line of three dashes."
            self._report(second, (), message)

    def _report(self, event: Any, path: Path, message: str, rule: str = "broken-yaml") -> None:
        self._document.faults.append(Fault(event.start_mark.line + 1, field_name(path), rule, message))

    def _value(self, event: Any, path: Path, parent_line: int) -> Any:
        if isinstance(event, yaml.AliasEvent):
            message = f"*{clipped(str(event.anchor))} stands for a value named elsewhere (an alias). Write the value out, or put the text in quotes."
            self._report(event, path, message)
            return None
        self._report_marks(event, path)
        if isinstance(event, yaml.ScalarEvent):
            return self._scalar(event, path)
        if len(path) >= _DEEPEST:
            self._report(event, (), _TOO_DEEP)
            raise _Stop
        return (self._mapping if isinstance(event, yaml.MappingStartEvent) else self._sequence)(path, parent_line)

    def _report_marks(self, event: Any, path: Path) -> None:
        if event.anchor is not None:
            message = f"&{clipped(event.anchor)} names the value for use elsewhere (an anchor). Remove it, or put the text in quotes."
            self._report(event, path, message)
        if event.tag is not None:
            tag = clipped(event.tag.replace("tag:yaml.org,2002:", "!!"))
            self._report(event, path, f"{tag} is a mark of a type (a tag). Remove it, or put the text in quotes.")

    def _scalar(self, event: Any, path: Path) -> Any:
        if event.style not in ("", None):
            return event.value
        value = scalar(event.value)
        if value is not None and not isinstance(value, str) and event.value != str(value).lower():
            self._document.plain[path] = event.value
        return value

    def _note(self, path: Path, line: int, parent_line: int) -> None:
        if line != parent_line:
            self._document.lines[path] = line

    def _sequence(self, path: Path, parent_line: int) -> list[Any]:
        values: list[Any] = []
        while not isinstance(event := next(self._events), yaml.SequenceEndEvent):
            line, item = event.start_mark.line + 1, (*path, len(values))
            self._note(item, line, parent_line)
            values.append(self._value(event, item, line))
        return values

    def _mapping(self, path: Path, parent_line: int) -> dict[str, Any]:
        values: dict[str, Any] = {}
        if not path:
            self._document.value = values  # what stands above a line that cannot be read is known all the same
        while not isinstance(event := next(self._events), yaml.MappingEndEvent):
            line, key = event.start_mark.line + 1, self._key(event, path)
            entry = (*path, key)
            if key in values:
                message = f"is given twice, first on line {self._document.line(entry)}. Keep one of the two."
                self._report(event, entry, message, "repeated-key")
                self._value(next(self._events), (*path, "(repeated)"), line)
                continue
            self._note(entry, line, parent_line)
            values[key] = self._value(next(self._events), entry, line)
        return values

    def _key(self, event: Any, path: Path) -> str:
        if isinstance(event, yaml.ScalarEvent):
            self._report_marks(event, path)
            return str(event.value)
        message = "a field's name must stand here. Check for a stray bracket, star or question mark."
        self._report(event, path, message)
        raise _Stop
