"""The `beadroll` command: which commands there are, and where each stands."""

from __future__ import annotations

import io
import sys
from importlib import import_module

import click

# Read only when it is called for: a command starts without what the others need.
_MODULES = {
    "check": "checking",
    "curve": "curves",
    "temperature": "curves",
    "fit": "curves",
    "intake": "intake_file",
    "compare": "comparing",
    "families": "comparing",
    "budget": "positions",
    "swap": "positions",
    "shortlist": "positions",
    "changes": "changing",
    "bom": "bom",
    "new": "new_record",
}


class Commands(click.Group):
    """The commands, each imported from its module when it is asked for."""

    def list_commands(self, ctx: click.Context) -> list[str]:  # noqa: ARG002
        """Their names, in the order of the documentation."""
        return list(_MODULES)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:  # noqa: ARG002
        """The command of that name."""
        if cmd_name not in _MODULES:
            return None
        found = getattr(import_module(f"builder.commands.{_MODULES[cmd_name]}"), f"{cmd_name}_command")
        assert isinstance(found, click.Command)
        return found


@click.group(cls=Commands, context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 110})
@click.version_option(package_name="beadroll")
def main() -> None:
    """Check records of NTC thermistors, turn them into curves, compare them in kelvin."""
    # A pipe on Windows has a code page without Ω, and JSON is UTF-8 everywhere.
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(encoding="utf-8")
