"""What tests of the history share."""

import pytest
from git_records import ALONE, GitRecords
from outside_tool import needed


@pytest.fixture
def kept(tmp_path, monkeypatch):
    """A repository with records, in which the test runs."""
    needed("git")
    for name, value in ALONE.items():
        monkeypatch.setenv(name, value)
    monkeypatch.chdir(tmp_path)
    return GitRecords(tmp_path)
