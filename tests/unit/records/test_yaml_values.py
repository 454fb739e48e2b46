"""What an unquoted value means: the YAML 1.2.2 core schema, chapter 10.3.2, typed from its table by hand."""

import math

import pytest

from builder.records.yaml_text import field_name, read_yaml, scalar

# null | Null | NULL | ~ or nothing; true | True | TRUE, false | False | FALSE; [-+]?[0-9]+; 0o[0-7]+; 0x[0-9a-fA-F]+;
# [-+]?(\.[0-9]+|[0-9]+(\.[0-9]*)?)([eE][-+]?[0-9]+)?; [-+]?(\.inf|\.Inf|\.INF); \.nan | \.NaN | \.NAN; else text.
CORE = [
    ("null", None), ("Null", None), ("NULL", None), ("~", None), ("", None), ("nULL", "nULL"),
    ("true", True), ("True", True), ("TRUE", True), ("tRUE", "tRUE"),
    ("false", False), ("False", False), ("FALSE", False),
    ("0", 0), ("-19", -19), ("+12", 12), ("010", 10), ("0603", 603), ("-0", 0), ("08", 8),
    ("0o14", 12), ("0o18", "0o18"), ("-0o7", "-0o7"), ("0O7", "0O7"), ("0x3A", 58), ("0xC", 12), ("0x1F", 31), ("0xG", "0xG"), ("-0x1", "-0x1"), ("0b101", "0b101"),
    ("0.", 0.0), ("-0.0", -0.0), (".5", 0.5), ("+12e03", 12000.0), ("-2E+05", -200000.0), ("1e4", 1e4), ("2.0e6", 2e6), ("20e-6", 20e-6), ("1.5e", "1.5e"), (".", "."), (".e1", ".e1"), ("1e4.5", "1e4.5"), ("1E400", math.inf),
    (".inf", math.inf), ("-.Inf", -math.inf), ("+.INF", math.inf), (".iNF", ".iNF"), ("inf", "inf"), ("Infinity", "Infinity"),
    ("nan", "nan"), ("NaN", "NaN"), ("-.nan", "-.nan"),
    ("yes", "yes"), ("no", "no"), ("on", "on"), ("off", "off"), ("y", "y"), ("n", "n"), ("No", "No"), ("OFF", "OFF"),
    ("10:30", "10:30"), ("190:20:30", "190:20:30"), ("1_000", "1_000"), ("1,5", "1,5"), ("2025-03-11", "2025-03-11"),
    ("1 000", "1 000"), ("12345K", "12345K"), ("+", "+"), ("-", "-"), ("--1", "--1"), ("٣", "٣"), ("1\u0663", "1\u0663"),
]  # fmt: skip


@pytest.mark.parametrize(("text", "value"), CORE)
def test_an_unquoted_value_has_its_meaning_of_yaml_1_2(text, value):
    read = scalar(text)
    assert (type(read), read) == (type(value), value)
    assert math.copysign(1, read) == math.copysign(1, value) if isinstance(value, float) else True


@pytest.mark.parametrize("text", [".nan", ".NaN", ".NAN"])
def test_not_a_number_is_written_with_a_point(text):
    assert math.isnan(scalar(text))


def test_a_number_of_many_digits_stays_a_number():
    assert scalar("0.1000000000000000055511151231257827021181583404541015625") == 0.1
    assert scalar("1" * 1_000_000) == math.inf


def test_quoted_and_block_values_stay_text():
    text = "a: '1e4'\nb: \"true\"\nc: |-\n  12\nd: >-\n  null\n"
    assert read_yaml(text).value == {"a": "1e4", "b": "true", "c": "12", "d": "null"}


def test_the_name_of_a_field_is_text_whatever_it_looks_like():
    assert read_yaml("no: 1\n12: 2\ntrue: 3\n~: 4\n").value == {"no": 1, "12": 2, "true": 3, "~": 4}


def test_every_value_knows_its_line():
    document = read_yaml("# remark\na: 1\nb:\n  - {x: 1,\n     y: 2}\n  -\n    z: 3\n")
    paths = [("a",), ("b",), ("b", 0), ("b", 0, "y"), ("b", 1), ("b", 1, "z"), ("b", 1, "missing")]
    assert [document.line(path) for path in paths] == [2, 3, 4, 5, 7, 7, 7]


def test_a_value_keeps_how_it_was_typed_where_that_differs():
    assert read_yaml("a: 0603\nb: 603\nc: True\nd: 1e3\ne: '07'\nf: ~\n").plain == {
        ("a",): "0603",
        ("c",): "True",
        ("d",): "1e3",
    }


@pytest.mark.parametrize(
    ("path", "name"),
    [((), ""), (("b_values", 1, "b_k"), "b_values[1].b_k"), (("a", 0, 1), "a[0][1]"), (("a\n", ""), 'a\\n.""')],
)
def test_a_path_is_written_as_people_read_it(path, name):
    assert field_name(path) == name
