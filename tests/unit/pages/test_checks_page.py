"""The pages of the rules."""

from __future__ import annotations

from pathlib import Path

import pytest
from small_site import read, rows, section, text

from builder.crosschecks import RULES, Rule
from builder.pages.checks_page import checks_page, rule_page


def test_the_list_has_every_rule_with_a_link_to_its_page() -> None:
    body = checks_page().body()
    assert [row[0] for row in rows(body, "Every rule")] == [rule.name for rule in RULES]
    assert all(f'<a href="{rule.name}.html">{rule.name}</a>' in body for rule in RULES)


@pytest.mark.parametrize("rule", RULES, ids=lambda rule: rule.name)
def test_a_rule_s_page_says_what_it_looks_for_an_example_and_the_cure(tmp_path: Path, rule: Rule) -> None:
    body = rule_page(rule, read(tmp_path)).body()
    assert body.startswith(f"<h1>{rule.name}</h1>") and rule.looks_for in text(body)
    assert rule.example in text(section(body, "example"))
    assert rule.settled_by in text(section(body, "settle"))


def test_a_rule_s_page_lists_what_it_finds_now_and_nothing_else(tmp_path: Path) -> None:
    context = read(tmp_path)
    missing = next(rule for rule in RULES if rule.name == "document-missing")
    (row,) = rows(rule_page(missing, context).body(), "Found: 1 warning")
    assert row[0] == "PX-1" and row[3] == "document-missing"
    other = next(rule for rule in RULES if rule.name == "b-order")
    assert text(section(rule_page(other, context).body(), "now")) == "What it finds now Nothing in this catalog."


def test_only_what_can_be_right_may_be_accepted(tmp_path: Path) -> None:
    context = read(tmp_path)
    for rule in RULES:
        settle = text(section(rule_page(rule, context).body(), "settle"))
        assert (f"accepted: [{{rule: {rule.name}, because: …}}]" in settle) == rule.acceptable
        assert ("cannot be accepted" in settle) != rule.acceptable
