"""What tests of records and of the site share."""

import os
import shutil
import subprocess
import sys
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest
from playwright.sync_api import Browser, sync_playwright

from builder.records import Catalog, read_catalog

# Doctests are collected from every module; two files named conftest would be taken for one.
collect_ignore_glob = ["conftest.py", "*/conftest.py"]

_ARGUMENTS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)

ROOT = Path(__file__).parents[1]
Files = dict[str, str | bytes]


@pytest.fixture
def records(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Callable[[Files], Catalog]:
    """Reads the files given, by their paths below parts/, from a folder of their own."""
    monkeypatch.chdir(tmp_path)

    def read(files: Files) -> Catalog:
        for name, content in files.items():
            path = Path("parts", name)
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_bytes(content if isinstance(content, bytes) else content.encode())
        return read_catalog(Path("parts"))

    return read


@pytest.fixture
def messages(records: Callable[[Files], Catalog]) -> Callable[..., list[str]]:
    """Every problem that these files have, as every output says it; a text alone is a part's record."""

    def told(files: Files | str | bytes) -> list[str]:
        named = files if isinstance(files, dict) else {"part.yaml": files}
        return [str(problem) for problem in records(named).problems]

    return told


@pytest.fixture(scope="session")
def demo_site(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The demo site, built strictly once for all the tests of a worker."""
    folder = tmp_path_factory.mktemp("demo") / "site"
    command = [sys.executable, "-m", "mkdocs", "build", "--strict", "--quiet", "--site-dir", str(folder)]
    built = subprocess.run(
        command, cwd=ROOT, capture_output=True, text=True, env=os.environ | {"NO_MKDOCS_2_WARNING": "1"}
    )
    assert (built.returncode, built.stderr) == (0, ""), built.stderr
    return folder


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
