"""What is doubtful about a record, as pages show it."""

from __future__ import annotations

from builder.crosschecks.rules import RULE_NAMES
from builder.pages.html import Html, html, link, notice, tag
from builder.pages.paths import relative
from builder.problems import Problem


def problem_notice(problem: Problem, here: str) -> Html:
    """A problem as the command says it, without the file: the page is about that."""
    field = tag("strong", f"{problem.place}: ") if problem.field else ""
    return notice("warning", field, problem.message, " ", tag("small", rule_link(problem.rule, here)))


def rule_link(rule: str, here: str) -> Html:
    """A rule's name, leading to its page where it is one of the cross-checks."""
    return link(rule, relative(f"checks/{rule}.html", here)) if rule in RULE_NAMES else html(rule)
