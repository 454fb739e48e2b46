"""Laws of the reader: whatever stands in a file, it yields records and problems, and never raises."""

import tempfile
from fractions import Fraction
from pathlib import Path
from unittest import mock

import yaml
from factory import CSV, POSITION, WITH_CSV
from hypothesis import example, given, settings
from hypothesis import strategies as st

from builder.records import Catalog, read_catalog, yaml_text
from builder.records.yaml_text import read_yaml, scalar
from builder.units import ohms_from_text, resistance_from_code

seeded = settings(derandomize=True, deadline=None, max_examples=200)

# What YAML, JSON, Python or a terminal reads as more than text.
NASTY = st.sampled_from(
    [
        "null", "~", "true", "no", "0x1F", "010", "10:30", "1_000", "1e400", ".nan", "-.inf", "1e4", "9" * 400, "-1", "0", "4k7", "10 kΩ",
        "[]", "{}", "[[[[", "}}", "[1,", "{a: ", "- ", "? ", ": ", ", ", "#", "'", '"', "\\", "|", ">-", "&a ", "*a ", "!!str ", "!x ", "---", "...", "%YAML 1.1",
        "<<: ", "\t", "\n", "\r", "\r\n", "\n\n", "  ", "\0", "\x07", "\x1b[31m", "\x7f", "\x85", "\xa0", "\xad", "\u2028", "\u202e", "\ufeff", "\ufffe", "−", "٣", "\U0001f321",
        "part: ", "position: ", "r_t_table: ", "rows: ", "file: ../../x", "t_c", "r_min_ohm", ";", "1,5", "firmware: ", "method: b-value", "reference: 2.5",
    ]
)  # fmt: skip
PLACES = st.integers(0, 2000)
EDITS = st.lists(
    st.one_of(
        st.tuples(st.just("insert"), PLACES, NASTY),
        st.tuples(st.just("delete"), PLACES, st.integers(1, 40)),
        st.tuples(st.just("repeat line"), PLACES, st.just(0)),
        st.tuples(st.just("replace value"), PLACES, NASTY),
    ),
    min_size=1,
    max_size=5,
)


def edited(text: str, edits: list[tuple[str, int, str | int]]) -> str:
    """The text after each edit; places beyond its end are counted from its beginning again."""
    for kind, place, value in edits:
        at = place % (len(text) + 1)
        lines = text.split("\n")
        line = place % len(lines)
        if kind == "insert":
            text = text[:at] + str(value) + text[at:]
        elif kind == "delete":
            text = text[:at] + text[at + int(value) :]
        elif kind == "repeat line":
            text = "\n".join([*lines[:line], lines[line], *lines[line:]])
        else:
            lines[line] = lines[line].partition(":")[0] + ": " + str(value)
            text = "\n".join(lines)
    return text


def catalog_of(files: dict[str, bytes]) -> Catalog:
    with tempfile.TemporaryDirectory() as folder:
        for name, content in files.items():
            Path(folder, name).write_bytes(content)
        return read_catalog(Path(folder))


def assert_lawful(catalog: Catalog) -> None:
    """Each problem once, in order, on one printable line, in words of our own, with a cure behind it."""
    said = [str(problem) for problem in catalog.problems]
    assert len(set(said)) == len(said)
    assert list(catalog.problems) == sorted(catalog.problems, key=lambda p: (p.file, p.line))
    for problem, sentence in zip(catalog.problems, said, strict=True):
        assert problem.line >= 1
        assert sentence.isprintable()
        assert sentence.endswith((".", "?"))
        assert not any(word in sentence for word in ("Input", "pydantic", "valid YAML", "token", "None", "Traceback"))


@seeded
@given(st.binary(max_size=200), st.binary(max_size=200))
def test_random_bytes_are_read_or_told(record, table):
    assert_lawful(catalog_of({"a.yaml": record, "table.csv": table, "b.yaml": WITH_CSV.encode()}))


@seeded
@given(st.text(st.sampled_from(":-?[]{},#&*!|>'\"%@` \t\nab01."), max_size=40))
@example(": \n")
@example("? \n- [")
def test_random_yaml_is_read_or_told(text):
    assert_lawful(catalog_of({"a.yaml": text.encode(), "b.yaml": f"part: {text}".encode()}))


@settings(seeded, max_examples=400)
@given(EDITS, EDITS, EDITS)
def test_damaged_records_are_read_or_told(part_edits, position_edits, table_edits):
    files = {
        "a.yaml": edited(WITH_CSV, part_edits),
        "b.yaml": edited(POSITION, position_edits),
        "table.csv": edited(CSV, table_edits),
    }
    assert_lawful(catalog_of({name: text.encode("utf-8", "surrogatepass") for name, text in files.items()}))


@seeded
@given(EDITS)
def test_both_parsers_make_the_same_values(edits):
    text = edited(WITH_CSV, edits)
    with_libyaml = read_yaml(text)
    document = _by_pure_parser(text)
    # libyaml refuses a few texts more (names of over 1,000 characters, `a:` in braces); where both read, they agree.
    if not with_libyaml.faults and not document.faults:
        assert repr(document.value) == repr(with_libyaml.value)
        assert document.lines == with_libyaml.lines


def _by_pure_parser(text):
    with mock.patch.object(yaml_text, "_LOADER", yaml.SafeLoader):
        return read_yaml(text)


@seeded
@given(st.floats(allow_nan=False))
def test_a_number_that_python_prints_is_read_back(value):
    text = repr(value).replace("inf", ".inf")
    assert float(scalar(text)) == value


@seeded
@given(st.text(max_size=12))
def test_any_text_in_single_quotes_is_read_back(text):
    line = " ".join(text.split())
    document = read_yaml("a: '" + line.replace("'", "''") + "'\n")
    assert document.faults or document.value == {"a": line}


DIGITS = st.text("0123456789", min_size=1, max_size=6)


@seeded
@given(DIGITS, st.sampled_from("RKMrk"), st.one_of(st.just(""), DIGITS))
def test_a_code_is_its_digits_times_its_letter(whole, letter, decimals):
    exact_ohm = Fraction(f"{whole}.{decimals or 0}") * {"R": 1, "K": 10**3, "M": 10**6}[letter.upper()]
    assert resistance_from_code(f"{whole}{letter}{decimals}") == float(exact_ohm)


@seeded
@given(st.integers(1, 999_999), st.sampled_from(["R", "k", "M"]))
def test_a_resistance_written_as_code_is_read_back(thousandths, letter):
    code = f"{thousandths // 1000}{letter}{thousandths % 1000:03d}"
    step_ohm = {"R": 1e-3, "k": 1.0, "M": 1e3}[letter]
    assert round(ohms_from_text(code) / step_ohm) == thousandths


@seeded
@given(st.text(max_size=12))
def test_text_is_a_resistance_or_a_value_error(text):
    try:
        assert ohms_from_text(text) > 0
    except ValueError as refused:
        assert "is not a resistance" in str(refused)
