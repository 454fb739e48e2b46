"""Fields of a record that are wrong: each message whole, with its value and its cure."""

import pytest
from factory import part, position

NUMBER = "stands where a number must stand. Write the figure alone, without unit or quotes."
EMPTY_NUMBER = "nothing stands where a number must stand. Write the figure, or remove the field."
NOT_FINITE = "is not a finite number. Write the figure, or remove the field."
COMMA_FIELD = (
    "is not a field. In brackets and braces a comma ends the value: "
    "write a point as decimal sign, and nothing between thousands."
)
OUTSIDE_B = "is outside 1000 to 10000 K. Check the decimal point; data sheets print B in kelvin."
TOP = (
    "part, maker, own_number, packaging_suffixes, description, body, rated, b_values, steinhart_hart, r_t_table, accuracy, curve_from, "
    "shape, limits, qualification, lifecycle, documents, standing, accepted, notes"
)


def told_of(text: str, *lines: str) -> tuple[str, list[str]]:
    """A text and the messages about it, each without the file."""
    return text, [f"parts/part.yaml:{line}" for line in lines]


def assert_told(messages, case):
    text, expected = case
    files = {"part.yaml": text} if text.startswith("part") else {"part.yaml": part(), "position.yaml": text}
    assert messages(files) == [line.replace("parts/part.yaml", "parts/" + list(files)[-1]) for line in expected]


def b_k(value: str, *messages: str) -> tuple[str, list[str]]:
    return told_of(part("b_k: 3435", f"b_k: {value}"), *(f"6: b_values[0].b_k: {m}" for m in messages))


NUMBERS = {
    "in quotes": b_k('"3435"', f'"3435" {NUMBER}'),
    "with a unit": b_k("3435 K", f'"3435 K" {NUMBER}'),
    "no": b_k("no", f'"no" {NUMBER}'),
    "underscore": b_k("3_435", f'"3_435" {NUMBER}'),
    "time of day": b_k("10:30", f'"10:30" {NUMBER}'),
    "true": b_k("true", f"true {NUMBER}"),
    "list": b_k("[1]", f"a list {NUMBER}"),
    "fields": b_k("{a: 1}", f"a group of fields {NUMBER}"),
    "null": b_k("null", EMPTY_NUMBER),
    "tilde": b_k("~", EMPTY_NUMBER),
    "not a number": b_k(".nan", f".nan {NOT_FINITE}"),
    "infinite": b_k("-.inf", f"-.inf {NOT_FINITE}"),
    "too large for a float": b_k("1e400", f"1e400 {NOT_FINITE}"),
    "a million digits": b_k("1" * 900_000, f"{'1' * 59}… {NOT_FINITE}"),
    "decimal point lost": b_k("34350", f"34350 K {OUTSIDE_B}"),
    "minus": b_k("-3435", f"−3435 K {OUTSIDE_B}"),
    "hexadecimal": b_k("0x1F", f"31 K {OUTSIDE_B}"),
    "leading zero, not octal": b_k("010", f"10 K {OUTSIDE_B}"),
    "exponent without point": b_k("1e4"),
    "exponent": b_k("3.4e3"),
    "decimal comma in a block": told_of(
        part("  - {between_c: [25, 85], b_k: 3435, tolerance_pct: 1}", "  - between_c: [25, 85]\n    b_k: 3435,0"),
        '7: b_values[0].b_k: "3435,0" stands where a number must stand. '
        "Write a point as decimal sign, and nothing between thousands.",
    ),
    "decimal comma in braces": told_of(part("b_k: 3435", "b_k: 3435,0"), f"6: b_values[0].0: {COMMA_FIELD}"),
    "thousands comma in braces": told_of(
        part("b_k: 3435", "b_k: 3,435"),
        f"6: b_values[0].435: {COMMA_FIELD}",
        f"6: b_values[0].b_k: 3 K {OUTSIDE_B}",
    ),
}


@pytest.mark.parametrize("case", NUMBERS.values(), ids=NUMBERS)
def test_what_is_no_number_or_out_of_bounds_is_shown_as_typed(messages, case):
    assert_told(messages, case)


def ohm(value: str, *messages: str) -> tuple[str, list[str]]:
    return told_of(part("10k", value), *(f"4: rated.resistance_ohm: {m}" for m in messages))


NOT_OHM = (
    "is not a resistance. Write ohms as a number with a point as decimal sign, or an R-K-M code such as 4k7, "
    "without a unit."
)
OUTSIDE_OHM = "is outside 0.01 to 1e9 Ω. Check the decimal point, and k or M."
RESISTANCES = {
    "with prefix and unit": ohm("10 kΩ", f'"10 kΩ" {NOT_OHM}'),
    "with a space": ohm("10 k", f'"10 k" {NOT_OHM}'),
    "letter alone": ohm("k", f'"k" {NOT_OHM}'),
    "thousandth": ohm("1m0", f'"1m0" {NOT_OHM}'),
    "with tolerance letter": ohm("4k7J", f'"4k7J" {NOT_OHM}'),
    "underscore": ohm("1_000", f'"1_000" {NOT_OHM}'),
    "no": ohm("no", f'"no" {NOT_OHM}'),
    "endless code": ohm("1" * 900_000 + "k", f'"{"1" * 59}…" {NOT_OHM}'),
    "decimal comma": told_of(part("10k", "10,5"), f"4: rated.5: {COMMA_FIELD}"),
    "list": ohm("[10k]", f"a list {NUMBER}"),
    "zero": ohm("0", f"0 Ω {OUTSIDE_OHM}"),
    "below zero": ohm("-5", f"−5 Ω {OUTSIDE_OHM}"),
    "too large": ohm("1e12", f"1e12 Ω {OUTSIDE_OHM}"),
    "null": ohm("null", EMPTY_NUMBER),
    "code in quotes": ohm('"4k7"'),
}


@pytest.mark.parametrize("case", RESISTANCES.values(), ids=RESISTANCES)
def test_what_is_no_resistance_is_shown_as_typed(messages, case):
    assert_told(messages, case)


def number(value: str, *messages: str) -> tuple[str, list[str]]:
    return told_of(part("part: TB3A-103F38", f"part: {value}"), *(f"1: part: {m}" for m in messages))


def as_number(typed: str) -> str:
    return f'{typed} is read as a number, where text must stand. Put it in quotes: "{typed}".'


EMPTY_TEXT = "nothing stands where text must stand. Write the text, in quotes if it begins with #, or remove the field."
NOT_TEXT = "stands where text must stand. Write a word or a sentence, in quotes if it begins with a bracket."
TEXTS = {
    "number": number("12345", as_number("12345")),
    "leading zero": number("0603", as_number("0603")),
    "octal of YAML 1.1": number("010", as_number("010")),
    "exponent": number("1e3", as_number("1e3")),
    "hexadecimal": number("0x1F", as_number("0x1F")),
    "true": number("true", 'true is read as true or false, where text must stand. Put it in quotes: "true".'),
    "False": number("False", 'False is read as true or false, where text must stand. Put it in quotes: "False".'),
    "null": number("null", EMPTY_TEXT),
    "nothing": number("", EMPTY_TEXT),
    "remark": number("#40512", EMPTY_TEXT),
    "list": number("[a]", f"a list {NOT_TEXT}"),
    "fields": number("{a: 1}", f"a group of fields {NOT_TEXT}"),
    "spaces": number('"  "', "is empty. Write something, or remove the field."),
    "escape": number('"A\\x1b[31m"', '"A\\x1b[31m" holds U+001B, which cannot be seen. Type the text anew.'),
    "soft hyphen": number("TB3A\u00ad103", '"TB3A\\xad103" holds U+00AD, which cannot be seen. Type the text anew.'),
    "direction mark": number("TB\u202e3A", '"TB\\u202e3A" holds U+202E, which cannot be seen. Type the text anew.'),
    "revision number": told_of(
        part("revision: C", "revision: 4.10"), f"10: documents[0].revision: {as_number('4.10')}"
    ),
    "size code": told_of(part('"0603"', "0603"), f"3: body.size_code: {as_number('0603')}"),
    "number in a list": told_of(part("[AEC-Q200 grade 1]", "[AEC, 200]"), f"8: qualification[1]: {as_number('200')}"),
    "fitted number": told_of(position("fitted: TB3A-103F38", "fitted: 123"), f"13: fitted: {as_number('123')}"),
    "no stays text": number("no"),
    "time of day stays text": number("10:30"),
    "underscore stays text": number("1_000"),
    "date stays text": number("2025-03-11"),
    "line break in notes": told_of(part("limits:", 'notes: "a\\nb"\nlimits:')),
}


@pytest.mark.parametrize("case", TEXTS.values(), ids=TEXTS)
def test_text_is_text_or_is_refused(messages, case):
    assert_told(messages, case)


TWO = "where 2 must stand. Write two, such as [25, 85]."
LIST = "stands where a list must stand. Write it in brackets, or with a dash on each line."
FIELDS = "stands where fields must stand. Write name: value, indented below or in braces."


def pair(value: str, message: str) -> tuple[str, list[str]]:
    return told_of(part("[25, 85]", value), f"6: b_values[0].between_c{message}")


SHAPES = {
    "list too short": pair("[25]", f": [25] has 1 value, {TWO}"),
    "list too long": pair("[25, 85, 100]", f": [25, 85, 100] has 3 values, {TWO}"),
    "decimal comma in a list": pair("[25,5, 85]", f": [25, 5, 85] has 3 values, {TWO}"),
    "endless list": pair(
        "[" + "1," * 100_000 + "]", f": [1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1… has 100000 values, {TWO}"
    ),
    "empty list": pair("[]", f": [] has 0 values, {TWO}"),
    "number for a list": pair("25", f": 25 {LIST}"),
    "fields for a list": pair("{a: 1}", f": a group of fields {LIST}"),
    "null for a list": pair("null", f": nothing {LIST}"),
    "text in a list": pair("[25, x]", f'[1]: "x" {NUMBER}'),
    "null in a list": pair("[25, null]", f"[1]: {EMPTY_NUMBER}"),
    "one temperature twice": pair(
        "[25, 25.5]", ": 25 °C and 25.5 °C are less than 1 K apart. A B-value needs two temperatures."
    ),
    "two B-values for one pair": told_of(
        part("tolerance_pct: 1}\nlimits", "tolerance_pct: 1}\n  - {between_c: [85, 25.001], b_k: 4100}\nlimits"),
        "5: b_values: 3435 K and 4100 K are both stated for 25/85 °C. Compare them with the data sheet, and leave one.",
    ),
    "one B-value twice": told_of(
        part("tolerance_pct: 1}\nlimits", "tolerance_pct: 1}\n  - {between_c: [85, 25], b_k: 3435}\nlimits"),
    ),
    "one revision of a document twice": told_of(
        part('revision: C, dated: 2025-03-11, link: "https://example.com/tb3a.pdf"}', "revision: C}\n  - {title: Data sheet, revision: c}"),
        "9: documents: Data sheet, revision c stands twice. Give the newer one its own revision, or leave one.",
    ),
    "a document without revision twice": told_of(
        part(', revision: C, dated: 2025-03-11, link: "https://example.com/tb3a.pdf"}', "}\n  - {title: data sheet, dated: 2026-01-07}"),
        "9: documents: data sheet stands twice. Give the newer one its own revision, or leave one.",
    ),
    "below absolute zero": pair(
        "[-300, 25]", "[0]: −300 °C is outside −273.14 to 1000 °C. Check the decimal point and the unit."
    ),
    "range that falls": told_of(
        part("[-40, 125]", "[125, -40]"),
        "7: limits.operating_c: 125 to −40 °C does not rise. Write the lower temperature first.",
    ),
    "text for a list": told_of(part("[AEC-Q200 grade 1]", "AEC-Q200"), f'8: qualification: "AEC-Q200" {LIST}'),
    "list for fields": told_of(
        part("{resistance_ohm: 10k, at_c: 25, tolerance_pct: 1}", "[10k]"), f"4: rated: a list {FIELDS}"
    ),
    "text for fields": told_of(
        part("{resistance_ohm: 10k, at_c: 25, tolerance_pct: 1}", "10k"), f'4: rated: "10k" {FIELDS}'
    ),
    "number for an alternate": told_of(
        position("{part: TB3A-103F38, standing: []}", "TB3A-103F38"), f'15: alternates[0]: "TB3A-103F38" {FIELDS}'
    ),
    "fraction of a bit": told_of(
        position("bits: 12", "bits: 12.5"),
        "11: adc.bits: 12.5 stands where a whole number must stand. Write it without a decimal point.",
    ),
    "point after the bits": told_of(
        position("bits: 12", "bits: 12.0"),
        "11: adc.bits: 12.0 stands where a whole number must stand. Write it without a decimal point.",
    ),
    "too many bits": told_of(
        position("bits: 12", "bits: 40"), "11: adc.bits: 40 bits is outside 4 to 32 bits. Check the converter's data sheet."
    ),
    "full scale of other bits": told_of(
        position("4096", "4000"), "11: adc.full_scale: 4000 does not fit 12 bits. Write 4096 or 4095."
    ),
    "pair that falls, as makers may state it": told_of(part("[25, 85]", "[85, 25]")),
}  # fmt: skip


@pytest.mark.parametrize("case", SHAPES.values(), ids=SHAPES)
def test_a_wrong_type_length_or_bound_says_what_must_stand_there(messages, case):
    assert_told(messages, case)


METHODS = "table, curve, b-value, steinhart-hart"
REFERENCE = (
    "stands where a reference must stand. "
    "Write ratiometric, or the reference's own volts, such as {volts: 2.5, tolerance_pct: 0.5}."
)
FORMS = "chip, leaded, bead, probe, lug, disc"
CHOICES = {
    "near": told_of(part("form: chip", "form: chp"), f'3: body.form: "chp" is none of {FORMS}. Did you mean chip?'),
    "capital": told_of(
        part("form: chip", "form: Chip"), f'3: body.form: "Chip" is none of {FORMS}. Did you mean chip?'
    ),
    "far": told_of(part("form: chip", "form: x"), f'3: body.form: "x" is none of {FORMS}. Write one of them.'),
    "number": told_of(part("form: chip", "form: 1"), f"3: body.form: 1 is none of {FORMS}. Write one of them."),
    "null": told_of(
        part("form: chip", "form: null"),
        f"3: body.form: nothing stands where one of {FORMS} must stand. Write one of them.",
    ),
    "list": told_of(
        part("form: chip", "form: [chip]"),
        f"3: body.form: a list stands where one of {FORMS} must stand. Write one of them.",
    ),
    "endless": told_of(
        part("form: chip", "form: " + "x" * 900_000),
        f'3: body.form: "{"x" * 59}…" is none of {FORMS}. Write one of them.',
    ),
    "state": told_of(
        part("proposed", "aproved"),
        '12: standing[0].state: "aproved" is none of proposed, approved, restricted, withdrawn. Did you mean approved?',
    ),
    "method": told_of(
        position("method: table", "method: tabel"),
        f'12: firmware.method: "tabel" is none of {METHODS}. Did you mean table?',
    ),
    "method null": told_of(
        position("method: table", "method: null"),
        f"12: firmware.method: nothing stands where one of {METHODS} must stand. Write one of them.",
    ),
    "method missing": told_of(
        position("method: table, ", ""), "12: firmware.method: is missing. Add it: how codes become degrees."
    ),
    "reference misspelt": told_of(position("ratiometric", "ratiometrc"), f'10: reference: "ratiometrc" {REFERENCE}'),
    "reference as a number": told_of(position("ratiometric", "2.5"), f"10: reference: 2.5 {REFERENCE}"),
    "reference null": told_of(position("ratiometric", "null"), f"10: reference: nothing {REFERENCE}"),
    "reference of its own": told_of(position("ratiometric", "{volts: 2.5}")),
    "reference of its own, wrong": told_of(position("ratiometric", "{volts: x}"), f'10: reference.volts: "x" {NUMBER}'),
    "curve from a table that is not there": told_of(
        part("maker:", "curve_from: table\nmaker:"), "2: curve_from: the record has no table. Write b-value."
    ),
}


@pytest.mark.parametrize("case", CHOICES.values(), ids=CHOICES)
def test_a_wrong_choice_names_the_choices_and_the_nearest(messages, case):
    assert_told(messages, case)


NAMES = {
    "near": told_of(part("qualification:", "qualifications:"), "8: qualifications: is not a field. Did you mean qualification?"),
    "far": told_of(part("qualification:", "xyzzy:"), f"8: xyzzy: is not a field. Known here: {TOP}."),
    "nested, near": told_of(part("at_c", "atc"), "4: rated.atc: is not a field. Did you mean at_c?"),
    "nested, far": told_of(
        part("at_c", "qqq"), "4: rated.qqq: is not a field. Known here: resistance_ohm, at_c, tolerance_pct."
    ),
    "in a list": told_of(
        part("b_k: 3435, tolerance_pct", "b_k: 3435, tolerence_pct"),
        "6: b_values[0].tolerence_pct: is not a field. Did you mean tolerance_pct?",
    ),
    "misspelt field that must be there": told_of(
        position("step_k", "step"), "12: firmware.step: is not a field. Did you mean step_k?"
    ),
    "field of another method": told_of(
        position("method: table", "method: b-value, b_k: 3435, resistance_ohm: 10k"),
        "12: firmware.step_k: is not a field. Known here: method, resistance_ohm, at_c, b_k.",
    ),
    "merge of YAML 1.1": told_of(part("limits:", "<<: {}\nlimits:"), f"7: <<: is not a field. Known here: {TOP}."),
    "no name": told_of(part("limits:", '"": 1\nlimits:'), f'7: "": is not a field. Known here: {TOP}.'),
    "endless name": told_of(part("limits:", "x" * 500 + ": 1\nlimits:"), f"7: {'x' * 39}…: is not a field. Known here: {TOP}."),
    "line break and escape in a name": told_of(
        part("limits:", '"a\\nb\\x1b": 1\nlimits:'), f"7: a\\nb\\x1b: is not a field. Known here: {TOP}."
    ),
}  # fmt: skip


@pytest.mark.parametrize("case", NAMES.values(), ids=NAMES)
def test_an_unknown_field_names_the_nearest_or_those_known_there(messages, case):
    assert_told(messages, case)


def test_a_misspelt_field_does_not_hide_what_is_wrong_with_its_neighbour(messages):
    assert messages(part("tolerance_pct: 1}\nb", "tolerance_pct: x, tolerence_pct: 1}\nb")) == [
        f'parts/part.yaml:4: rated.tolerance_pct: "x" {NUMBER}',
        "parts/part.yaml:4: rated.tolerence_pct: is not a field. Did you mean tolerance_pct?",
    ]


MISSING = {
    "top": told_of(part("maker: Tarnbrook Ceramics\n", ""), "1: maker: is missing. Add it: who makes it."),
    "nested": told_of(
        part("resistance_ohm: 10k, ", ""),
        "4: rated.resistance_ohm: is missing. Add it: rated resistance: a number in Ω, or an R-K-M code.",
    ),
    "in a list": told_of(
        part(", by: sensors, because: first samples", ""),
        "12: standing[0].because: is missing. Add it: why, in a sentence.",
        "12: standing[0].by: is missing. Add it: who decided.",
    ),
    "description that begins with a symbol": told_of(
        position("method: table, step_k: 5", "method: b-value, resistance_ohm: 10k"),
        "12: firmware.b_k: is missing. Add it: B-value in the code, K.",
    ),
    "size of a chip": told_of(
        part(', size_code: "0603"', ""),
        '3: body.size_code: is missing, and the body is a chip. Add it in quotes, such as "0603".',
    ),
    "curve": told_of(
        part("b_values:\n  - {between_c: [25, 85], b_k: 3435, tolerance_pct: 1}\n", ""),
        "1: nothing says how the resistance falls with temperature. Add b_values, steinhart_hart or r_t_table.",
    ),
}


@pytest.mark.parametrize("case", MISSING.values(), ids=MISSING)
def test_a_missing_field_says_what_belongs_there(messages, case):
    assert_told(messages, case)


NOT_A_DATE = "is not a date. Write it as year-month-day, such as 2026-02-10."


@pytest.mark.parametrize(
    ("typed", "message"),
    [
        ("2025-02-30", "2025-02-30 is not in the calendar. Check month and day."),
        ("2025-13-01", "2025-13-01 is not in the calendar. Check month and day."),
        ("11.03.2025", f'"11.03.2025" {NOT_A_DATE}'),
        ("2025-3-1", f'"2025-3-1" {NOT_A_DATE}'),
        ("2025", f"2025 {NOT_A_DATE}"),
        ("true", f"true {NOT_A_DATE}"),
        ("[1]", f"[1] {NOT_A_DATE}"),
        ("2025-03-11T10:00:00", f'"2025-03-11T10:00:00" {NOT_A_DATE}'),
        ("٢٠٢٥-٠٣-١١", f'"٢٠٢٥-٠٣-١١" {NOT_A_DATE}'),
        ("x" * 90_000, f'"{"x" * 59}…" {NOT_A_DATE}'),
    ],
)
def test_a_date_is_a_day_of_the_calendar(messages, typed, message):
    assert messages(part("2025-03-11", typed)) == [f"parts/part.yaml:10: documents[0].dated: {message}"]


def test_a_date_may_be_quoted(messages):
    assert messages(part("2025-03-11", '"2025-03-11"')) == []


@pytest.mark.parametrize(
    "typed",
    ["javascript:alert(1)", "ftp://x", "http://", "https:///x", "HTTP://x", " https://x", "https://a b", "https://x'y", "https://<b>"],
)  # fmt: skip
def test_a_link_is_a_web_address(messages, typed):
    cure = "Begin it with https:// or http://, without spaces or quotes in it."
    assert messages(part("https://example.com/tb3a.pdf", typed)) == [
        f'parts/part.yaml:10: documents[0].link: "{typed}" is not a web address. {cure}'
    ]


def test_a_hash_is_64_digits(messages):
    assert messages(part("revision: C", "sha256: ABC")) == [
        'parts/part.yaml:10: documents[0].sha256: "ABC" is not the 64 hex digits of a SHA-256, in lower case. Copy it anew.'
    ]


def test_all_that_is_wrong_with_a_record_is_told_in_the_order_of_its_lines(messages):
    text = part("form: chip", "form: chp").replace("at_c", "atc").replace("3435", "x").replace("proposed", "done")
    assert [message.split(":")[1] for message in messages(text)] == ["3", "4", "6", "12"]
