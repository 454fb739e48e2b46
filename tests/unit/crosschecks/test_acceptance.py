"""Findings that a record accepts, and the list of rules."""

from __future__ import annotations

import datetime
import re
from pathlib import Path

import pytest
from clean_part import CLEAN, RECORD, Check, with_row

import builder
from builder.crosschecks import RULES, checked_catalog
from builder.crosschecks.rules import RULE_NAMES

ROOT = Path(builder.__file__).parents[1]
ACCEPTED = "accepted:\n  - {rule: row-out-of-line, row: 35, because: the maker confirmed it}\n"
TWO_SLIPS = [(t_c, 2587 if t_c == 60 else r_ohm) for t_c, r_ohm in with_row(35, 35, 6830)]


def test_an_acceptance_silences_its_row_and_no_other(check: Check) -> None:
    assert [p.row for p in check(RECORD, TWO_SLIPS)] == [35, 60]
    assert [p.row for p in check(RECORD + ACCEPTED, TWO_SLIPS)] == [60]


def test_an_acceptance_without_a_row_silences_the_rule(check: Check) -> None:
    assert check(RECORD + ACCEPTED.replace("row: 35, ", ""), TWO_SLIPS) == ()


def test_an_acceptance_of_one_rule_leaves_the_others(check: Check) -> None:
    overdue = RECORD.replace("2027-01-01", "2026-05-31")
    assert [p.rule for p in check(overdue + ACCEPTED.replace("row: 35, ", ""), TWO_SLIPS)] == ["review-overdue"]


def test_what_cannot_be_accepted_is_still_told(check: Check) -> None:
    open_field = RECORD.replace("Pellworm", "FILL-IN") + ACCEPTED.replace("row-out-of-line, row: 35", "to-be-filled-in")
    assert [p.rule for p in check(open_field)] == ["to-be-filled-in", "wrong-choice"]


def test_an_acceptance_of_nothing_is_told(check: Check) -> None:
    assert [f"{p} [{p.severity}: {p.rule}]" for p in check(RECORD + ACCEPTED, CLEAN)] == [
        "parts/p.yaml:13: accepted[0]: row-out-of-line finds nothing at 35 °C. Remove the entry, so that it hides nothing "
        "later. [warning: accepted-nothing]"
    ]


@pytest.mark.parametrize(
    ("rule", "said"),
    [
        ("row-out-of-lime", "row-out-of-lime is not a rule of the cross-checks. Did you mean row-out-of-line?"),
        ("zzz", "zzz is not a rule of the cross-checks. The page Checks lists them."),
        (
            "not-falling",
            "not-falling cannot be accepted: what it finds is never right. Remove the entry and correct that.",
        ),
    ],
)
def test_an_acceptance_that_cannot_be_is_an_error(check: Check, rule: str, said: str) -> None:
    problems = check(RECORD + ACCEPTED.replace("row-out-of-line", rule), CLEAN)
    assert [f"{p} [{p.severity}]" for p in problems] == [f"parts/p.yaml:13: accepted[0].rule: {said} [error]"]


def test_a_table_that_does_not_fall_cannot_be_accepted(check: Check) -> None:
    assert [p.rule for p in check(RECORD + ACCEPTED, with_row(35, 35, 8530))] == ["not-falling"]


def test_every_rule_that_the_cross_checks_name_is_in_the_list() -> None:
    folders = [ROOT / "builder" / name for name in ("crosschecks", "misprints")]
    sources = "".join(file.read_text("utf-8") for folder in folders for file in sorted(folder.glob("*.py")))
    reported = set(re.findall(r'source\.problem\([^"]*\("[^)]*\), "([a-z-]+)"', sources))
    reported |= set(re.findall(r'source\.problem\(path, "([a-z-]+)"', sources))
    reported |= set(re.findall(r'\bFinding\(\s*"([a-z-]+)"', sources)) | {"coefficients-differ"}
    assert reported - {"wrong-choice"} <= set(RULE_NAMES)
    assert len(reported) > 12


def test_rules_are_listed_once_with_all_their_texts() -> None:
    assert len(set(RULE_NAMES)) == len(RULE_NAMES)
    assert all(rule.looks_for and rule.example and rule.settled_by for rule in RULES)


def test_the_demo_s_findings_are_those_it_is_made_to_show(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    problems = checked_catalog(Path("parts"), today=datetime.date(2026, 12, 1)).problems
    assert [(Path(p.file).stem, p.rule) for p in problems] == [
        ("RT1", "revision-replaced"),
        ("FD5-502J", "review-overdue"),
        ("FD9-223M", "tolerance-missing"),
        ("YC3-103H0", "document-missing"),
    ]
