"""What tests of records share."""

from collections.abc import Callable
from pathlib import Path

import pytest

from builder.records import Catalog, read_catalog

# Doctests are collected from every module; two files named conftest would be taken for one.
collect_ignore_glob = ["conftest.py", "*/conftest.py"]

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
