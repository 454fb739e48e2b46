"""Records kept under git, in a repository of their own; a part's and a position's record as text."""

import os
import subprocess
from pathlib import Path

from factory import changed

ALONE = {
    "GIT_CONFIG_GLOBAL": os.devnull,
    "GIT_CONFIG_SYSTEM": os.devnull,
    "GIT_CONFIG_NOSYSTEM": "1",
    "GIT_AUTHOR_NAME": "Ann",
    "GIT_AUTHOR_EMAIL": "ann@example.com",
    "GIT_COMMITTER_NAME": "Ann",
    "GIT_COMMITTER_EMAIL": "ann@example.com",
}
PART = """\
part: X-103
maker: Maker
body: {form: bead}
rated: {resistance_ohm: 10k, tolerance_pct: 1}
b_values:
  - {between_c: [25, 85], b_k: 3950, tolerance_pct: 1}
shape: plain
limits: {operating_c: [-40, 105], dissipation_mw_per_k: 1.0}
documents:
  - {title: data sheet, revision: A}
standing:
  - {state: proposed, on: 2026-01-12, by: sensors, because: first samples}
"""
POSITION = """\
position: board/RT1
board: Board
purpose: air
range_c: [-20, 60]
limit_k: 1.5
circuit:
  thermistor: low side
  fixed: {resistance_ohm: 10k, tolerance_pct: 0.1, tempco_ppm_per_k: 25}
  supply_v: 3.3
  supply_tolerance_pct: 1
adc: {bits: 12, offset_lsb: 1, gain_pct: 0.05, nonlinearity_lsb: 1, leakage_na: 5}
firmware: {method: curve}
trips:
  - {name: too warm, at_c: 40, when: rising, within_k: 1.5}
fitted: X-103
alternates:
  - part: Y-103
    standing:
      - {state: proposed, on: 2026-01-13, by: purchasing, because: second source}
"""


def part(*edits: tuple[str, str]) -> str:
    """The part's record with some places changed."""
    return _edited(PART, edits)


def position(*edits: tuple[str, str]) -> str:
    """The position's record with some places changed."""
    return _edited(POSITION, edits)


def other_part(number: str = "Y-103", *edits: tuple[str, str]) -> str:
    """A second part, that reads much as the first."""
    return part(("X-103", number), ("b_k: 3950", "b_k: 3960"), *edits)


def _edited(text: str, edits: tuple[tuple[str, str], ...]) -> str:
    for old, new in edits:
        text = changed(text, old, new)
    return text


def appended(text: str, *entries: str) -> str:
    """A record whose last field is a ledger, with entries added to it."""
    indent = text.splitlines()[-1].partition("- ")[0]
    return text + "".join(f"{indent}- {{{entry}}}\n" for entry in entries)


class GitRecords:
    """A repository whose records stand in `parts/`."""

    def __init__(self, root: Path, records: str = "parts") -> None:
        self.root, self.records = root, root / records
        self.records.mkdir(parents=True, exist_ok=True)
        self._day = 0
        self.git("init", "--quiet", "--initial-branch=main")

    def git(self, *arguments: str) -> str:
        day = f"2026-03-{self._day + 1:02d}T12:00:00+0000"
        surroundings = os.environ | ALONE | {"GIT_AUTHOR_DATE": day, "GIT_COMMITTER_DATE": day}
        done = subprocess.run(["git", *arguments], cwd=self.root, env=surroundings, capture_output=True, check=True)
        return done.stdout.decode("utf-8", "surrogateescape").strip()

    def write(self, **texts: str | None) -> None:
        """Write records by name, without `.yaml`; remove those that are None."""
        for name, text in texts.items():
            path = self.records / f"{name}.yaml"
            path.parent.mkdir(parents=True, exist_ok=True)
            path.unlink() if text is None else path.write_text(text, "utf-8")

    def commit(self, message: str, **texts: str | None) -> str:
        """Write records, commit everything; gives the hash."""
        self.write(**texts)
        self._day += 1
        self.git("add", "--all")
        self.git("commit", "--quiet", "--allow-empty", "--message", message)
        return self.git("rev-parse", "HEAD")
