"""Answers of the commands about the demo records, and the command that writes them anew: `python tests/golden/rewrite.py`.

Look at `git diff tests/golden` afterwards: every changed line must be meant.
"""

from pathlib import Path

from click.testing import CliRunner

from builder.cli import main

HERE = Path(__file__).parent
RECORDS = HERE.parents[1] / "parts"
COMMANDS = {
    "check.txt": "check --today 2026-12-01",
    "curve-table.txt": "curve TB3A-103F38 --step 25",
    "curve-accuracy.csv": "curve OSP4-103W --step 25 --format csv",
    "curve-steinhart-hart.txt": "curve TB5A-502F36 --step 25",
    "curve-b-values.txt": "curve OSP4-153Z --step 25",
    "curve-b-value.json": "curve NV10-3950 --from -40 --to 120 --step 80 --format json",
    "temperature.txt": "temperature TB3A-103F38 189k25 10k 4k7 531R 400",
}


def answer(command: str) -> str:
    """What a command answers, as a user in the project's folder sees it."""
    result = CliRunner().invoke(main, [*command.split(), "--records", str(RECORDS)])
    assert result.exit_code == 0, result.output
    return result.stdout.replace(RECORDS.as_posix(), "parts")


if __name__ == "__main__":
    for name, command in COMMANDS.items():
        (HERE / name).write_text(answer(command), encoding="utf-8")
