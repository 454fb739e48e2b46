"""docs/commands.md against the program."""

from __future__ import annotations

import re
from pathlib import Path

import click
import pytest

from builder.cli import main

PAGE = (Path(__file__).parents[2] / "docs" / "commands.md").read_text("utf-8")
INTRODUCTION, *SECTIONS = re.split(r"^## ", PAGE, flags=re.MULTILINE)
DOCUMENTED = {section.partition("\n")[0].strip(): section for section in SECTIONS}
# What the introduction says of every command stands there once.
COMMON = ("--records", "--format", "--no-cache")


def commands() -> list[tuple[str, click.Command]]:
    context = click.Context(main)
    found = {name: main.get_command(context, name) for name in sorted(main.list_commands(context))}
    return [(name, command) for name, command in found.items() if command is not None]


def test_every_command_has_its_section_and_no_section_lacks_a_command() -> None:
    assert sorted(DOCUMENTED) == [name for name, _ in commands()]


@pytest.mark.parametrize("name", COMMON)
def test_what_every_command_takes_stands_in_the_introduction(name: str) -> None:
    assert f"`{name}" in INTRODUCTION


@pytest.mark.parametrize(("name", "command"), commands())
def test_every_argument_and_option_of_a_command_stands_in_its_section(name: str, command: click.Command) -> None:
    section = DOCUMENTED[name]
    assert f"`beadroll {name}" in section
    for parameter in command.params:
        if isinstance(parameter, click.Option):
            assert any(f"`{option}" in section + INTRODUCTION * (option in COMMON) for option in parameter.opts), (
                parameter
            )
        else:
            assert parameter.make_metavar(click.Context(command)).strip("[].") in section, parameter


@pytest.mark.parametrize(("name", "command"), commands())
def test_every_option_that_a_section_names_exists(name: str, command: click.Command) -> None:
    known = {option for parameter in command.params for option in parameter.opts} | {"--help"}
    named = set(re.findall(r"`(--[a-z-]+)", DOCUMENTED[name]))
    assert named <= known


@pytest.mark.parametrize(("name", "command"), commands())
def test_every_choice_of_an_option_is_named(name: str, command: click.Command) -> None:
    for parameter in command.params:
        if isinstance(parameter.type, click.Choice) and parameter.opts[0] not in COMMON:
            for choice in parameter.type.choices:
                assert re.search(rf"[`|\s\\]{re.escape(choice)}[`|\s,.\\]", DOCUMENTED[name]), choice
    formats = next((p.type.choices for p in command.params if "--format" in p.opts), ())
    assert set(formats) <= {"table", "json", "csv", "markdown"}
