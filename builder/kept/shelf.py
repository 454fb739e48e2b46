"""Values by key in one file, each read only when it is asked for, and only where its checksum holds."""

from __future__ import annotations

import contextlib
import hashlib
import os
import pickle
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

_FIRST_LINE = b"beadroll keeps 1\n"
_DIGEST_BYTES = 64
_LENGTH_BYTES = 8
# What a killed run has left behind; a running one needs its file for seconds.
_LEFT_AFTER_S = 3600.0


def digest(data: bytes) -> str:
    """SHA-256, in hex digits."""
    return hashlib.sha256(data).hexdigest()


class Shelf:
    """The values of one file, and those that are new; without a file they are kept for this run only.

    The file begins with a first line, the digest of the code that made it, and the digest and length of its index; then come the
    index and the values, pickled. Whatever is not as it was written (damaged, cut short, of another version of
    the code) is not there. What nobody asks for from one saving to the next is dropped.
    """

    def __init__(self, path: Path | None, code: str) -> None:
        self._path = path
        self._code = code
        self._values: dict[str, Any] = {}
        self._new: dict[str, tuple[Any, bytes]] = {}
        self._used: set[str] = set()
        self._index, self._data = _opened(path, code)

    def head(self, key: str) -> Any:
        """What stands in the index for a key beside its value; None where the key is not there."""
        self._used.add(key)
        entry = self._new.get(key) or self._index.get(key)
        return None if entry is None else entry[0]

    def get(self, key: str) -> Any:
        """The value of a key; None where it is not there."""
        self._used.add(key)
        if key not in self._values:
            pickled = self._new[key][1] if key in self._new else self._pickled(key)
            self._values[key] = pickle.loads(pickled) if pickled else None
        return self._values[key]

    def later(self, key: str) -> Callable[[], Any]:
        """What gives the value that a key has now, whatever is put there later."""
        self._used.add(key)
        if key in self._values:
            value = self._values[key]
            return lambda: value
        entry, data = self._index.get(key), self._data
        return lambda: pickle.loads(pickled) if (pickled := _checked(entry, data)) else None

    def put(self, key: str, value: Any, head: Any = True) -> None:
        """Keep a value, with what is to stand in the index beside it; where the head says all, the value is None."""
        self._used.add(key)
        self._values[key] = value
        self._new[key] = head, b"" if value is None else pickle.dumps(value, pickle.HIGHEST_PROTOCOL)

    def _pickled(self, key: str) -> bytes | None:
        return _checked(self._index.get(key), self._data)

    def save(self) -> None:
        """Write what was asked for since the last saving, if that differs from what stands there.

        Raises
        ------
        OSError
            The folder cannot be written.
        """
        wanted = {key for key in self._used if key in self._new or key in self._index}
        self._used.clear()
        self._values = {key: value for key, value in self._values.items() if key in wanted}
        if self._path is None:
            self._new = {key: new for key, new in self._new.items() if key in wanted}
        if self._path is None or (not self._new and len(wanted) == len(self._index)):
            return
        index, pieces, start = {}, [], 0
        for key in sorted(wanted):
            head, pickled = self._new[key] if key in self._new else (self._index[key][0], self._pickled(key))
            if pickled is not None:
                index[key] = (head, start, len(pickled), digest(pickled) if pickled else "")
                pieces.append(pickled)
                start += len(pickled)
        self._index, self._data, self._new = index, b"".join(pieces), {}
        _write(self._path, self._code, index, self._data)


def _checked(entry: tuple[Any, int, int, str] | None, data: bytes) -> bytes | None:
    """The pickled value that an entry of the index names; None where it is not as it was written."""
    if entry is None:
        return None
    _, start, length, expected = entry
    found = data[start : start + length]
    return found if not length or digest(found) == expected else None


def _opened(path: Path | None, code: str) -> tuple[dict[str, Any], bytes]:
    """A file's index and the bytes after it; nothing of a file that is not as it was written."""
    if path is None:
        return {}, b""
    first = _FIRST_LINE + code.encode()
    index_from = len(first) + _DIGEST_BYTES
    with contextlib.suppress(OSError), path.open("rb") as file:
        head = file.read(index_from)
        if head[: len(first)] == first:
            rest = file.read()
            end = _LENGTH_BYTES + int.from_bytes(rest[:_LENGTH_BYTES], "big")
            if digest(rest[:end]).encode() == head[len(first) :]:
                return pickle.loads(rest[_LENGTH_BYTES:end]), rest[end:]
    return {}, b""


def _write(path: Path, code: str, index: dict[str, Any], data: bytes) -> None:
    """Put a whole file in the place of the old one at once, whoever reads or writes it at the same time."""
    path.parent.mkdir(parents=True, exist_ok=True)
    for left in path.parent.glob("*.part"):
        with contextlib.suppress(OSError):
            if time.time() - left.stat().st_mtime > _LEFT_AFTER_S:
                left.unlink()
    written = pickle.dumps(index, pickle.HIGHEST_PROTOCOL)
    written = len(written).to_bytes(_LENGTH_BYTES, "big") + written
    part = path.with_name(f"{path.name}.{os.getpid()}.part")
    try:
        part.write_bytes(b"".join((_FIRST_LINE, code.encode(), digest(written).encode(), written, data)))
        part.replace(path)
    finally:
        part.unlink(missing_ok=True)
