"""Where a new record stands, and files that are written whole or not at all, never over another."""

from __future__ import annotations

import os
import re
from collections.abc import Mapping
from pathlib import Path
from typing import Any


class NotWritten(Exception):
    """Nothing was written; the message says why."""


def record_path(records: Path, value: Mapping[str, Any]) -> Path:
    """`<maker>/<number>.yaml` for a part, `boards/<board>/<place>.yaml` for a position.

    >>> record_path(Path("parts"), {"part": "X/1 A", "maker": "Tarnbrook Ceramics"}).as_posix()
    'parts/tarnbrook-ceramics/X-1-A.yaml'
    >>> record_path(Path("parts"), {"position": "coolbox-main/RT1"}).as_posix()
    'parts/boards/coolbox-main/RT1.yaml'
    """
    if "part" in value:
        steps = [str(value["maker"]).casefold(), str(value["part"])]
    else:
        steps = ["boards", *str(value["position"]).split("/")]
    names = [re.sub(r"[^A-Za-z0-9._+-]+", "-", step).strip("-.") or "x" for step in steps]
    return records.joinpath(*names[:-1], f"{names[-1]}.yaml")


def write_new(files: Mapping[Path, str]) -> None:
    """Write all of the files or none.

    Raises
    ------
    NotWritten
        One of them is there already, or cannot be written.
    """
    written: list[Path] = []
    try:
        for path, text in files.items():
            _write_one(path, text)
            written.append(path)
    except BaseException as error:
        for done in written:
            done.unlink()
        if isinstance(error, OSError):
            raise NotWritten(f"{_reason(path, error)} Nothing was written.") from None
        raise


def _write_one(path: Path, text: str) -> None:
    path.parent.mkdir(parents=True, exist_ok=True)
    # Hidden from those who read records; unlike a rename, a link never takes another file's place.
    unfinished = path.with_name(f".{path.name}.{os.getpid()}")
    try:
        with unfinished.open("x", encoding="utf-8", newline="\n") as file:
            file.write(text)
        os.link(unfinished, path)
    finally:
        unfinished.unlink(missing_ok=True)


def _reason(path: Path, error: OSError) -> str:
    if isinstance(error, FileExistsError):
        return f"{path} is there already. Change that file, or give another with --out."
    return f"{path} cannot be written: {error.strerror}."
