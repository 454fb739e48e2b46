"""What a test does whose program is not installed."""

import pytest
from outside_tool import needed


def test_missing_program_fails_under_continuous_integration(monkeypatch):
    monkeypatch.setenv("CI", "true")
    with pytest.raises(pytest.fail.Exception, match=r"^no-such-tool is not installed"):
        needed("no-such-tool")


def test_missing_program_skips_elsewhere(monkeypatch):
    monkeypatch.delenv("CI", raising=False)
    with pytest.raises(pytest.skip.Exception, match=r"^no-such-tool is not installed"):
        needed("no-such-tool")
