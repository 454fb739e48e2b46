"""The cross-checks: a page for each rule, and the list of them."""

from __future__ import annotations

from builder.crosschecks import RULES, Rule
from builder.pages.context import Context
from builder.pages.home_page import problem_sources, problems_table
from builder.pages.html import Html, joined, link, table, tag
from builder.pages.page import Heading, Page
from builder.problems import Problem

_HEADINGS = (("example", "An example"), ("settle", "How to settle it"), ("now", "What it finds now"))


def checks_page() -> Page:
    """The list of rules."""
    return Page(
        path="checks/index.html",
        title="Checks",
        description="The rules by which records are checked against themselves.",
        body=lambda: str(_list_body()),
        search_text="checks rules misprints warnings accepted",
        in_nav=True,
        made_from=(),
        wide=False,
    )


def rule_page(rule: Rule, context: Context) -> Page:
    """The page of one rule."""
    return Page(
        path=f"checks/{rule.name}.html",
        title=rule.name,
        description=rule.looks_for.split(":")[0],
        body=lambda: str(_rule_body(rule, context)),
        headings=tuple(Heading(anchor, text) for anchor, text in _HEADINGS),
        search_text=f"check rule {rule.looks_for}",
        made_from=problem_sources(_problems_of(rule, context), context),
        wide=False,
    )


def _problems_of(rule: Rule, context: Context) -> list[Problem]:
    """What a rule finds in the catalog."""
    return [problem for problem in context.catalog.problems if problem.rule == rule.name]


def _list_body() -> Html:
    lead = (
        "Records are typed from data sheets, and data sheets have misprints. The command beadroll check and every build look at "
        "each record as a whole, by these rules. A finding that stands as it is, because the maker has confirmed it, is accepted "
        "in the record:"
    )
    example = "accepted:\n  - {rule: row-out-of-line, row: 35, because: the maker confirmed the row on 2026-03-02}"
    rows = [(link(rule.name, f"{rule.name}.html"), rule.looks_for) for rule in RULES]
    measured = tag("p", link("How well misprints are found", "../misprint-rates.html"), " has measured rates.")
    shown = tag("div", tag("pre", tag("code", example)), class_="highlight")
    rules = table(("rule", "what it looks for"), rows, caption="Every rule of the cross-checks")
    return joined([tag("h1", "Checks"), tag("p", lead), shown, measured, rules])


def _rule_body(rule: Rule, context: Context) -> Html:
    found = _problems_of(rule, context)
    bodies = (
        tag("p", rule.example),
        tag("p", rule.settled_by),
        problems_table(found, f"checks/{rule.name}.html", context),
    )
    sections = [
        joined([tag("h2", text, id=anchor), body]) for (anchor, text), body in zip(_HEADINGS, bodies, strict=True)
    ]
    accept = f"accepted: [{{rule: {rule.name}, because: …}}]"
    stands = tag("p", "Where it is right as it stands, the record says so: ", tag("code", accept))
    silenced = stands if rule.acceptable else tag("p", "It is never right as it stands, so it cannot be accepted.")
    return joined(
        [tag("h1", rule.name), tag("p", rule.looks_for, class_="bd-lead"), *sections[:2], silenced, sections[2]]
    )
