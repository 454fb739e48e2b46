"""The written pages: metadata, links, nothing from elsewhere, and the two commands of the README."""

from __future__ import annotations

import os
import re
import subprocess
from pathlib import Path

import click
import pytest
import yaml
from click.testing import CliRunner

from builder.cli import main

ROOT = Path(__file__).parents[2]
PAGES = sorted((ROOT / "docs").rglob("*.md"))
README = (ROOT / "README.md").read_text("utf-8")
WRITTEN = [*PAGES, *sorted(file for file in (ROOT / "builder").rglob("*") if file.suffix in (".py", ".js", ".css"))]
OFTEN_LOADED_FROM = ("cdn.", "unpkg.com", "jsdelivr", "googleapis", "gstatic", "cloudflare")


@pytest.mark.parametrize("page", PAGES, ids=lambda page: page.name)
def test_a_page_has_a_title_and_a_description_and_one_heading_of_the_first_level(page: Path) -> None:
    _, front, body = page.read_text("utf-8").split("---\n", 2)
    meta = yaml.safe_load(front)
    assert meta["title"] and meta["description"]
    prose = re.sub(r"^```.*?^```", "", body, flags=re.DOTALL | re.MULTILINE)
    assert re.findall(r"^# (.+)$", prose, flags=re.MULTILINE) == [meta["title"]]


def test_nothing_of_ours_names_a_place_to_load_scripts_from() -> None:
    for file in WRITTEN:
        text = file.read_text("utf-8")
        assert not [place for place in OFTEN_LOADED_FROM if place in text], file
        assert not re.search(r"""(src|@import|import)[=\s(]+(url\()?["']?(https?:)?//""", text), file


def test_the_site_builds_without_a_warning(demo_site: Path) -> None:
    assert (demo_site / "index.html").is_file()


@pytest.mark.parametrize("page", [ROOT / "README.md", ROOT / "DEVELOPERS.md"], ids=lambda page: page.name)
def test_the_files_that_a_page_of_the_repository_links_are_there(page: Path) -> None:
    links = re.findall(r"\]\((?!https?://|#)([^)#]+)", page.read_text("utf-8"))
    assert [link for link in links if not (ROOT / link).exists()] == []


def commands() -> list[str]:
    return re.findall(r"^python3 -m venv .*$", README, flags=re.MULTILINE)


def test_the_readme_builds_with_one_command_and_tests_with_another() -> None:
    build, test = commands()
    assert build.endswith("mkdocs build") and "pytest" not in build
    assert "pytest" in test and '".[test]"' in test


def test_continuous_integration_runs_the_readme_s_own_test_command() -> None:
    script = (ROOT / ".ci" / "run").read_text("utf-8")
    (pattern,) = re.findall(r"sed -n '(.*)' README\.md", script)
    found = subprocess.run(["sed", "-n", pattern, "README.md"], cwd=ROOT, capture_output=True, text=True, check=True)
    assert found.stdout.splitlines() == [commands()[1]]
    assert os.access(ROOT / ".ci" / "run", os.X_OK)


def test_the_command_lines_of_the_readme_are_those_of_the_program() -> None:
    named = set(re.findall(r"(?:^|[\s`/])beadroll ([a-z]+)\b", README))
    assert named and named <= set(main.list_commands(click.Context(main)))


SHOWN = re.findall(
    r"`\.venv/bin/beadroll ((?:compare|swap) [^`]*)`[^\n]*\n\n```text\n(.*?)```", README, flags=re.DOTALL
)


@pytest.mark.parametrize(("command", "shown"), SHOWN, ids=[command for command, _ in SHOWN])
def test_what_the_readme_shows_is_what_the_command_answers(command: str, shown: str) -> None:
    answered = CliRunner().invoke(main, [*command.split(), "--records", str(ROOT / "parts")])
    assert answered.output.startswith(shown)


def test_the_readme_shows_answers_of_compare_and_swap() -> None:
    assert [command.split()[0] for command, _ in SHOWN] == ["compare", "swap"]
