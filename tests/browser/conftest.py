"""One Chromium for all browser tests."""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterator

import pytest
from playwright.sync_api import Browser, sync_playwright

_ARGUMENTS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)


@pytest.fixture(scope="session")
def chromium() -> Iterator[Browser]:
    """Debian's Chromium, with nothing in it that calls other hosts; in continuous integration it must be there."""
    found = shutil.which("chromium")
    if found is None:
        missing = pytest.fail if os.environ.get("CI") else pytest.skip
        missing("chromium is not installed: apt-get install chromium")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=found, args=list(_ARGUMENTS))
        yield browser
        browser.close()
