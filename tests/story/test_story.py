"""The story of a part and its alternates, told rightly from its git history by every output."""

import csv
import io
import json
import os
import re
import subprocess
import sys
from html import unescape
from xml.etree import ElementTree

import pytest
from click.testing import CliRunner
from git_records import ALONE, GitRecords
from outside_tool import needed
from story import STEPS, TODAY, TOLD, told

from builder.cli import main


@pytest.fixture
def records(tmp_path, monkeypatch):
    needed("git")
    for name, value in ALONE.items():
        monkeypatch.setenv(name, value)
    monkeypatch.chdir(tmp_path)
    return GitRecords(tmp_path)


def test_the_story_is_told_word_by_word(records):
    assert told(records) == TOLD.read_text("utf-8")


def findings(since):
    result = CliRunner().invoke(main, ["check", "--since", since, *TODAY, "--format", "json"])
    return [
        (p["file"], p["field"], p["rule"]) for p in json.loads(result.stdout)["problems"] if p["severity"] == "error"
    ]


def test_each_step_has_the_findings_that_it_deserves(records):
    """By hand: an edit is unsigned until it is signed, an undone swap is missed for good, all else was appended."""
    unsigned = ("parts/x.yaml", "standing[1]", "curve-moved-unsigned")
    undone = ("parts/boards/rt1.yaml", "alternates[0].standing", "ledger-removed")
    deserved = {"edit the B-value": [unsigned], "undo the swap": [undone], "withdraw": [undone]}
    commits = []
    for name, texts in STEPS:
        commits.append(records.commit(name, **texts))
        assert findings(commits[0]) == deserved.get(name, []), name


def test_a_check_against_the_step_before_finds_what_that_step_did(records):
    for name, texts in STEPS:
        records.commit(name, **texts)
        if name != STEPS[0][0]:
            bad = name in ("edit the B-value", "undo the swap")
            assert bool(findings("HEAD~1")) == bad, name


MKDOCS_YML = """\
site_name: Story
site_url: https://story.example.com/
use_directory_urls: false
theme: {name: material, font: false}
plugins: [beadroll]
nav: [{Home: index.md}, {Parts: parts/index.md}, {Changes: changes.md}, {Ledger: ledger.md}]
"""


@pytest.fixture(scope="module")
def site(tmp_path_factory):
    """The site at the story's end."""
    needed("git")
    records = GitRecords(tmp_path_factory.mktemp("story"))
    for name, texts in STEPS:
        records.commit(name, **texts)
    (records.root / "mkdocs.yml").write_text(MKDOCS_YML)
    (records.root / "docs").mkdir()
    surroundings = os.environ | ALONE | {"NO_MKDOCS_2_WARNING": "1", "SOURCE_DATE_EPOCH": "1796083200"}
    command = [sys.executable, "-m", "mkdocs", "build", "--quiet"]
    built = subprocess.run(command, cwd=records.root, capture_output=True, text=True, env=surroundings)
    assert (built.returncode, built.stderr) == (0, "")
    return records.root / "site"


# Every entry that stands at the end, oldest first; the swap that was undone is not among them.
LEDGER = [
    ("2026-01-12", "X-103", "", "proposed"),
    ("2026-01-12", "Y-103", "", "proposed"),
    ("2026-01-13", "Y-103", "board/RT1", "proposed"),
    ("2026-02-10", "X-103", "", "approved"),
    ("2026-02-10", "Y-103", "", "approved"),
    ("2026-04-20", "X-103", "", "approved"),
    ("2026-06-02", "X-103", "", "approved"),
    ("2026-08-14", "Y-103", "", "withdrawn"),
]


def test_the_ledger_s_csv_has_every_entry_that_stands(site):
    rows = csv.DictReader(io.StringIO((site / "ledger.csv").read_text("utf-8")))
    assert [(row["on"], row["part"], row["position"], row["state"]) for row in rows] == LEDGER


def test_the_feed_has_every_entry_that_stands_the_newest_first(site):
    atom = "{http://www.w3.org/2005/Atom}"
    entries = ElementTree.parse(site / "ledger.xml").getroot().findall(f"{atom}entry")
    told = [(entry.findtext(f"{atom}updated"), entry.findtext(f"{atom}title")) for entry in entries]
    expected = [(f"{on}T00:00:00Z", f"{part} {state}{at and f' at {at}'}") for on, part, at, state in LEDGER]
    assert told == expected[::-1]


def test_the_ledger_page_has_every_entry_that_stands_the_newest_first(site):
    (body,) = re.findall(
        "<caption>Entries</caption>.*?<tbody>(.*?)</tbody>", (site / "ledger.html").read_text("utf-8"), re.DOTALL
    )
    rows = [re.findall("<t[hd].*?</t[hd]>", row, re.DOTALL) for row in body.split("</tr>")[:-1]]
    told = [tuple(re.sub("<[^>]+>", "", cell) for cell in row[:4]) for row in rows]
    expected = [(on, f"{part} Maker", at or "everywhere", state) for on, part, at, state in LEDGER]
    assert told == expected[::-1]


def test_the_changes_page_has_every_step_the_newest_first(site):
    page = (site / "changes.html").read_text("utf-8")
    headings = [unescape(heading) for heading in re.findall('<h2 id="r-[^>]*>(.*?)</h2>', page)]
    assert headings == [f"2026-03-0{day} {name}" for day, (name, _) in enumerate(STEPS, start=2)][::-1]
    assert "−0.513" in page and "fits → does not fit" in page
