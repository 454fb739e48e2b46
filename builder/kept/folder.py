"""Where values are kept between runs, and for which code."""

from __future__ import annotations

import os
import platform
import sys
from functools import cache
from pathlib import Path

from builder.kept.shelf import Shelf, digest

FOLDER = ".beadroll-cache"
_BUILDER = Path(__file__).parents[1]


class Kept:
    """The shelves of one records folder; without a folder nothing outlives the run.

    They stand beside the records folder, so that commands and site builds share them, in a folder that git ignores by
    itself. It may be deleted at any time. `trouble` says, in a sentence, why nothing could be written.
    """

    def __init__(self, folder: Path | None = None) -> None:
        self._folder = folder
        self._shelves: dict[str, Shelf] = {}
        self.trouble = ""

    @classmethod
    def beside(cls, records: Path) -> Kept:
        """For a records folder."""
        folder = Path(os.path.abspath(records))  # noqa: PTH100 -- a link to the records is not followed
        return cls(folder.parent / FOLDER / (folder.name or "root"))

    def shelf(self, name: str) -> Shelf:
        """The shelf of that name, opened when first asked for."""
        if name not in self._shelves:
            path = self._folder / name if self._folder else None
            self._shelves[name] = Shelf(path, code_digest())
        return self._shelves[name]

    def below(self, name: str) -> Kept:
        """Shelves in a folder of their own below this one."""
        return Kept(self._folder / name if self._folder else None)

    def save(self, *names: str) -> None:
        """Save shelves, without names all that were opened; that they cannot be written is told, and harms nothing."""
        try:
            self._ignore()
            for name in names or self._shelves:
                self.shelf(name).save()
        except OSError as error:
            self.trouble = f"Nothing is kept for the next run: {error.filename or self._folder}: {error.strerror}."

    def _ignore(self) -> None:
        """Have git ignore the folder."""
        for folder in (self._folder, *self._folder.parents) if self._folder else ():
            if folder.name == FOLDER and not (ignored := folder / ".gitignore").exists():
                folder.mkdir(parents=True, exist_ok=True)
                ignored.write_text("*\n", "utf-8")


@cache
def code_digest() -> str:
    """Of all that values are made by: this package, the packages installed beside it, Python and the machine's kind."""
    files = sorted(path for path in _BUILDER.rglob("*") if path.is_file() and "__pycache__" not in path.parts)
    texts = [path.relative_to(_BUILDER).as_posix().encode() + path.read_bytes() for path in files]
    installed = sorted(
        name
        for folder in sys.path
        if os.path.isdir(folder)  # noqa: PTH112
        for name in os.listdir(folder)  # noqa: PTH208
        if name.endswith((".dist-info", ".egg-info"))
    )
    about = repr((installed, sys.version, sys.byteorder, platform.machine(), platform.system()))
    return digest(b"\0".join([about.encode(), *texts]))
