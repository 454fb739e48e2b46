"""Two builds of the demo are the same bytes, wherever and however they are made."""

from __future__ import annotations

import os
import shutil
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]


def site(folder: Path, prepare: Callable[[], object] | None, **environment: str) -> dict[str, bytes]:
    """The demo's site, built in a folder of its own, by a process of its own."""
    for name in ("mkdocs.yml", "docs", "parts"):
        copy = shutil.copytree if (ROOT / name).is_dir() else shutil.copy
        folder.mkdir(parents=True, exist_ok=True)
        copy(ROOT / name, folder / name)
    variables = os.environ | {"SOURCE_DATE_EPOCH": "0", "PYTHONPATH": str(ROOT)} | environment
    command = [sys.executable, "-m", "mkdocs", "build", "--quiet"]
    subprocess.run(command, cwd=folder, env=variables, check=True, stderr=subprocess.DEVNULL, preexec_fn=prepare)
    files = [path for path in (folder / "site").rglob("*") if path.is_file()]
    return {path.relative_to(folder / "site").as_posix(): path.read_bytes() for path in files}


@pytest.mark.skipif(not hasattr(os, "sched_setaffinity"), reason="processes are bound to a core on Linux only")
def test_folder_locale_time_zone_hash_seed_and_number_of_processes_change_nothing(tmp_path: Path) -> None:
    def one_core() -> None:
        os.sched_setaffinity(0, {min(os.sched_getaffinity(0))})

    one = site(tmp_path / "one", None, PYTHONHASHSEED="1", LC_ALL="C.UTF-8", TZ="UTC")
    other = site(tmp_path / "in" / "another folder", one_core, PYTHONHASHSEED="2", LC_ALL="C", TZ="Asia/Tokyo")
    assert [name for name in sorted({*one, *other}) if one.get(name) != other.get(name)] == []
