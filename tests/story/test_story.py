"""The story of a part and its alternates, told rightly from its git history by every output."""

import json

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
