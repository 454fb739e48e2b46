"""A draft's text: read back as it was, quoted where YAML would bend it, tidy."""

import pytest
import yaml
from hypothesis import given
from hypothesis import strategies as st

from builder.questions.record_yaml import record_yaml, scalar_text
from builder.records import Part
from builder.records.yaml_text import YamlText, read_yaml

PRINTABLE = st.text(st.characters(codec="utf-8", categories=("L", "N", "P", "S", "Zs")), min_size=1).map(str.strip)


@pytest.mark.parametrize(
    ("text", "written"),
    [
        ("0603", '"0603"'),
        ("40512", '"40512"'),
        ("4", '"4"'),
        ("1e4", '"1e4"'),
        ("10:30", '"10:30"'),
        ("010", '"010"'),
        ("0x1F", '"0x1F"'),
        ("no", '"no"'),
        ("null", '"null"'),
        ("=", '"="'),
        ("<<", '"<<"'),
        ("# 3", '"# 3"'),
        ('say "x"', 'say "x"'),
        ('"x', r'"\"x"'),
        ("C:\\x: y", r'"C:\\x: y"'),
        ("10k", "10k"),
        ("2025-03-11", "2025-03-11"),
        ("TB3A-103F38", "TB3A-103F38"),
        ("10 kΩ ±1 %, 0603", "10 kΩ ±1 %, 0603"),
    ],
)
def test_text_is_quoted_where_yaml_would_bend_it(text, written):
    assert scalar_text(text) == written


@given(PRINTABLE.filter(bool))
def test_any_text_is_read_back_as_it_was_by_this_reader_and_by_pyyaml(text):
    line = f"notes: {scalar_text(text)}\nlist: [{scalar_text(text, in_flow=True)}]"
    assert read_yaml(line).value == {"notes": text, "list": [text]}
    by_pyyaml = yaml.safe_load(line)
    assert {str(by_pyyaml["notes"]), str(by_pyyaml["list"][0])} == {text}


def test_a_record_is_in_the_order_of_its_format_with_figures_as_typed():
    value = {
        "limits": {"operating_c": [-40, 125], "dissipation_mw_per_k": 1.0},
        "part": "0603",
        "rated": {"resistance_ohm": "4k7", "at_c": 25},
        "documents": [{"title": "data sheet"}, {"title": "t" * 120, "revision": "2"}],
        "b_values": [],
    }
    draft = YamlText(value=value, plain={("limits", "dissipation_mw_per_k"): "1.00"})
    assert record_yaml(Part, draft).splitlines() == [
        'part: "0603"',
        "rated: {resistance_ohm: 4k7, at_c: 25}",
        "limits: {operating_c: [-40, 125], dissipation_mw_per_k: 1.00}",
        "documents:",
        "  - {title: data sheet}",
        f"  - title: {'t' * 120}",
        '    revision: "2"',
    ]
