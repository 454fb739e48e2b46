"""A record on disk and what the command answers about it: the way a user's figures go."""

import json
from pathlib import Path

import yaml
from click.testing import CliRunner

from builder.cli import main
from builder.part_curve import PartCurve, part_curve
from builder.records import read_catalog


def written(folder: Path, rated: dict, **fields) -> Path:
    """The folder, with the record of a part X1 in it."""
    record = {"part": "X1", "maker": "Maker", "body": {"form": "bead"}, "rated": rated, **fields}
    (folder / "X1.yaml").write_text(yaml.safe_dump(record, sort_keys=False), encoding="utf-8")
    return folder


def curve_of(folder: Path, rated: dict, **fields) -> PartCurve:
    """The curve and band of a part with these fields."""
    catalog = read_catalog(written(folder, rated, **fields))
    assert not catalog.problems
    return part_curve(catalog.part("X1"))


def answered(folder: Path, command: str, *arguments: str) -> dict:
    """The JSON that a command answers about the part X1."""
    result = CliRunner().invoke(main, [command, "X1", *arguments, "--format", "json", "--records", str(folder)])
    assert result.exit_code == 0, result.output
    return json.loads(result.stdout)
