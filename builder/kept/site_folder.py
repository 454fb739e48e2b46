"""A site's folder: a new site is built beside it and takes its place at once, with the files that stay as they are."""

from __future__ import annotations

import contextlib
import ctypes
import os
import shutil
import sys
from collections.abc import Iterator
from pathlib import Path

from builder.kept.shelf import digest

_AT_FDCWD = -100
_RENAME_EXCHANGE = 2


class SiteFolder:
    """The place of a site, and the folder beside it that the next one is built in.

    A build that ends early, however it ends, leaves the site as it was; what it had built is removed by the next.
    """

    def __init__(self, place: Path) -> None:
        self.place = Path(os.path.realpath(place))
        self.building = self._beside("building")
        self._folders: set[str] = set()

    def begin(self) -> None:
        """Make the folder to build in, after putting right what an earlier build left behind.

        Raises
        ------
        OSError
            Nothing can be written beside the site.
        """
        for left in self._left("replaced"):
            # A build was killed between the two renames of `_exchange_slowly`.
            if not self.place.exists():
                left.rename(self.place)
        for left in (*self._left("replaced"), *self._left("building")):
            shutil.rmtree(left, ignore_errors=True)
        self.building.mkdir()

    def take(self, path: str, expected: str) -> bool:
        """Take a file over from the site, if it is there with the content that a digest says; whether it was."""
        # Plain names, not Path: thousands of files are taken over in a tenth of a second.
        old, new = f"{self.place}/{path}", f"{self.building}/{path}"
        try:
            with open(old, "rb") as file:  # noqa: PTH123
                data = file.read()
        except OSError:
            return False
        if digest(data) != expected:
            return False
        folder = new.rpartition("/")[0]
        if folder not in self._folders:
            Path(folder).mkdir(parents=True, exist_ok=True)
            self._folders.add(folder)
        try:
            # The old name goes with the old site: no file is left that has two.
            os.link(old, new)
        except OSError:
            Path(new).write_bytes(data)
        return True

    def finish(self) -> None:
        """Put what was built in the site's place, with the hidden files at its top (.git, .nojekyll), and remove the old one."""
        if not self.place.exists():
            self.building.rename(self.place)
            return
        replaced = self._exchanged()
        for hidden in replaced.glob(".*"):
            if not Path(self.place, hidden.name).exists():
                hidden.rename(Path(self.place, hidden.name))
        shutil.rmtree(replaced, ignore_errors=True)

    def give_up(self) -> None:
        """Remove what was built."""
        shutil.rmtree(self.building, ignore_errors=True)

    def _exchanged(self) -> Path:
        """Exchange the two folders; gives where the old site is now."""
        if _exchange(self.building, self.place):
            return self.building
        replaced = self._beside("replaced")
        self.place.rename(replaced)
        self.building.rename(self.place)
        return replaced

    def _beside(self, what: str) -> Path:
        return self.place.with_name(f".{self.place.name}.{os.getpid()}.{what}")

    def _left(self, what: str) -> Iterator[Path]:
        """Folders of builds that do not run any more."""
        for path in self.place.parent.glob(f".{self.place.name}.*.{what}"):
            pid = path.name.split(".")[-2]
            if pid.isdigit() and (int(pid) == os.getpid() or not _runs(int(pid))):
                yield path


def _runs(pid: int) -> bool:
    if sys.platform == "win32":
        return False
    try:
        os.kill(pid, 0)
    except ProcessLookupError:
        return False
    except OSError:
        return True
    return True


def _exchange(one: Path, other: Path) -> bool:
    """Exchange two folders at once, where the system can (Linux); whether it did."""
    with contextlib.suppress(OSError, AttributeError):
        libc = ctypes.CDLL(None, use_errno=True)
        paths = os.fsencode(one), os.fsencode(other)
        done: int = libc.renameat2(_AT_FDCWD, paths[0], _AT_FDCWD, paths[1], _RENAME_EXCHANGE)
        return done == 0
    return False
