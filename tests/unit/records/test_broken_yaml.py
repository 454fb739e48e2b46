"""What breaks YAML, said without its vocabulary."""

import pytest
import yaml
from factory import PART, part

from builder.records import yaml_text

DOES_NOT_FIT = (
    "the line does not go on as the ones above it ask. "
    "Check the indentation, dashes, quotes and brackets, and the space after each colon."
)
NOT_CLOSED = (
    "the bracket opened on line {} is not closed, or a comma is missing. "
    "Close it; put text that holds a comma, colon or bracket in quotes."
)
COLON = "a colon stands where none is expected. Put text that holds a colon in quotes, or check the indentation."
BACKSLASH = "a backslash in double quotes begins a code. Write the text in single quotes, or the backslash twice."
TOO_DEEP = "fields and lists stand more than 12 deep. No record needs that; check the indentation."
KEY = "a field's name must stand here. Check for a stray bracket, star or question mark."
ANCHOR = "names the value for use elsewhere (an anchor). Remove it, or put the text in quotes."
ALIAS = "stands for a value named elsewhere (an alias). Write the value out, or put the text in quotes."
TAG = "is a mark of a type (a tag). Remove it, or put the text in quotes."
DIRECTIVE = "a line that begins with % is no part of a record. Remove it."

BROKEN = {
    "tab as indentation": (part("  - {between", "\t- {between"), 6, "a tab stands where spaces must stand. Indent with spaces."),
    "brace left open": (part("tolerance_pct: 1}\nb_values", "tolerance_pct: 1\nb_values"), 5, NOT_CLOSED.format(4)),
    "bracket left open": (part("[25, 85]", "[25, 85"), 6, NOT_CLOSED.format(6)),
    "quote left open": (part("first samples}", '"first samples}'), 13, "the quote opened on line 12 is not closed. Close it."),
    "colon in text in braces": (part("first samples", "see: this"), 12, NOT_CLOSED.format(12)),
    "colon in text": (part("Tarnbrook Ceramics", "Tarnbrook: Ceramics"), 2, COLON),
    "field indented too far": (part("limits:", "  limits:"), 7, DOES_NOT_FIT),
    "dash too many": (part("maker:", "- maker:"), 2, DOES_NOT_FIT),
    "dash as value": (part("TB3A-103F38", "-"), 1, DOES_NOT_FIT),
    "brace too many": (part("revision: C", "revision: C}"), 10, DOES_NOT_FIT),
    "no space after the colon": (part("maker: ", "maker:"), 3, DOES_NOT_FIT),
    "no name before the colon": (part("maker:", ":"), 2, DOES_NOT_FIT),
    "name of 2000 characters": (PART + "x" * 2000 + ": 1\n", 13, DOES_NOT_FIT),
    "value left out in braces": (
        part("b_k: 3435", "b_k:"),
        6,
        "a colon stands without a value after it. Write name: value, with a space between.",
    ),
    "percent sign first": (part("first samples", "%5"), 12, "% cannot begin a value. Put the text in quotes."),
    "at sign first": (part("first samples", "@home"), 12, "@ cannot begin a value. Put the text in quotes."),
    "space after a star": (
        part("first samples", "* x"),
        12,
"a star or ampersand cannot begin text. Put the text in quotes.",
    ),
    "closing bracket as value": (
        part("Tarnbrook Ceramics", "]"),
        2,
        "a bracket or comma stands where a value must stand. Remove it, or put the text in quotes.",
    ),
    "unknown code after a backslash": (part('"0603"', '"\\q"'), 3, BACKSLASH),
    "half a character": (PART + 'notes: "\\uD800"\n', 13, BACKSLASH),
    "list as name": (part("maker:", "? [a]\n: 3\nmaker:"), 2, KEY),
    "fields as name": (part("maker:", "{a: 1}: 3\nmaker:"), 2, KEY),
    "alias as name": (PART + "*x : 2\n", 13, KEY),
    "names within names": (PART + "? " * 100 + "\n", 13, KEY),
    "a hundred thousand brackets": (PART + "notes: " + "[" * 100_000 + "\n", 13, TOO_DEEP),
    "fields thirteen deep": (PART + "notes:\n" + "".join(" " * i + "a:\n" for i in range(1, 20)), 25, TOO_DEEP),
    "second record": (
        f"{PART}---\n{PART}",
        13,
        "a second record begins here. Keep one record in a file; remove the line of three dashes.",
    ),
    "YAML version": (f"%YAML 1.1\n---\n{PART}", 1, DIRECTIVE),
    "future YAML version": (f"%YAML 2.0\n---\n{PART}", 1, DIRECTIVE),
    "unknown directive": (f"%FOO\n---\n{PART}", 1, DIRECTIVE),
    "zero byte": (PART + "notes: a\0b\n", 13, "the character U+0000 cannot stand in a record. Delete it, or save the file as UTF-8."),
    "control character": (
        PART + "notes: a\x07b\n",
        13,
        "the character U+0007 cannot stand in a record. Delete it, or save the file as UTF-8.",
    ),
}  # fmt: skip


@pytest.mark.parametrize(("text", "line", "message"), BROKEN.values(), ids=BROKEN)
def test_a_line_that_cannot_be_read_is_named_in_plain_words(messages, text, line, message):
    assert messages(text) == [f"parts/part.yaml:{line}: {message}"]


MARKED = {
    "anchor": (part("maker: T", "maker: &x T"), f"2: maker: &x {ANCHOR}"),
    "anchor of a name": (PART + "&a notes: x\n", f"13: &a {ANCHOR}"),
    "alias": (PART + "notes: *x\n", f"13: notes: *x {ALIAS}"),
    "alias alone": ("*x\n", f"1: *x {ALIAS}"),
    "tag": (PART + "notes: !!str 12\n", f"13: notes: !!str {TAG}"),
    "tag of a name": (PART + "!!str notes: x\n", f"13: !!str {TAG}"),
    "tag that makes an object": (
        PART + "notes: !!python/object:os.system x\n",
        f"13: notes: !!python/object:os.system {TAG}",
    ),
}


@pytest.mark.parametrize(("text", "message"), MARKED.values(), ids=MARKED)
def test_anchors_aliases_and_tags_are_refused_where_they_stand(messages, text, message):
    assert messages(text) == [f"parts/part.yaml:{message}"]


def test_every_mark_of_a_record_is_told_in_one_run(messages):
    assert messages(part("maker: T", "maker: &x T") + "notes: *x\n") == [
        f"parts/part.yaml:2: maker: &x {ANCHOR}",
        f"parts/part.yaml:13: notes: *x {ALIAS}",
    ]


def test_a_repeated_field_is_told_with_its_first_line_each_time(messages):
    assert messages(part("maker:", "part: X\npart: Y\nmaker:")) == [
        "parts/part.yaml:2: part: is given twice, first on line 1. Keep one of the two.",
        "parts/part.yaml:3: part: is given twice, first on line 1. Keep one of the two.",
    ]


def test_a_repeated_field_is_found_inside_braces(messages):
    assert messages(part("b_k: 3435", "b_k: 3435, b_k: 3436")) == [
        "parts/part.yaml:6: b_values[0].b_k: is given twice, first on line 6. Keep one of the two."
    ]


def test_three_dots_may_end_a_record(messages):
    assert messages(PART + "...\n") == []


# These the pure parser lets pass or words with the same fragment; what it cannot tell apart is left out.
BY_BOTH_PARSERS = [name for name in BROKEN if name not in ("half a character", "value left out in braces", "unknown directive", "name of 2000 characters", "a hundred thousand brackets")]  # fmt: skip


@pytest.mark.parametrize("name", BY_BOTH_PARSERS)
def test_the_parser_without_libyaml_says_the_same(monkeypatch, name):
    text, line, message = BROKEN[name]
    monkeypatch.setattr(yaml_text, "_LOADER", yaml.SafeLoader)
    faults = yaml_text.read_yaml(text).faults
    assert [(fault.line, fault.message) for fault in faults] == [(line, message)]
