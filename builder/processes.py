"""Work on many items shared out over the machine's cores."""

from __future__ import annotations

import os
import sys
import threading
from collections.abc import Callable, Iterator, Sequence
from itertools import pairwise
from typing import Any, TypeVar

from builder.progress import Progress

T = TypeVar("T")
R = TypeVar("R")

# Two processes cost some 30 ms to start; fewer items of 0.2 ms than this are done sooner by one.
_FEWEST_ITEMS = 150
# Several shares for each process, since one item may cost more than another.
_SHARES_EACH = 4
# Forked processes find here what they were started for: it need not be pickled.
_work: Callable[[Sequence[Any]], list[Any]] | None = None
_items: Sequence[Any] = ()


def shared_out(
    work: Callable[[Sequence[T]], list[R]], items: Sequence[T], doing: str = "Working", fewest: int = _FEWEST_ITEMS
) -> list[R]:
    """What `work` gives for the items, one result an item, in their order.

    `work` is called with a share of the items in each of several forked processes, or with one after the other here:
    where there are fewer items than `fewest`, one core, other threads (a fork copies their locks, not them), or no safe
    fork. A terminal is shown how far it has come, and that it is `doing`.
    """
    count = min(_cores(), len(items) // fewest + 1)
    shares = count * _SHARES_EACH
    ends = [len(items) * share // shares for share in range(shares + 1)]
    progress, results = Progress(doing, len(items)), list[R]()
    alone = count < 2 or sys.platform != "linux" or threading.active_count() > 1
    for found in _done_here(work, items, ends) if alone else _done_by_processes(work, items, ends, count):
        results += found
        progress.show(len(results))
    progress.end()
    return results


def _done_here(work: Callable[[Sequence[T]], list[R]], items: Sequence[T], ends: Sequence[int]) -> Iterator[list[R]]:
    return (work(items[first:end]) for first, end in pairwise(ends) if first < end)


def _done_by_processes(
    work: Callable[[Sequence[T]], list[R]], items: Sequence[T], ends: Sequence[int], count: int
) -> Iterator[list[R]]:
    # Imported here: that takes as long as many a command, which shares nothing out.
    import multiprocessing
    from concurrent.futures import ProcessPoolExecutor

    global _work, _items
    _work, _items = work, items
    try:
        # Unlike a Pool, it raises when a process is killed, instead of waiting for it for ever.
        with ProcessPoolExecutor(count, multiprocessing.get_context("fork")) as pool:
            yield from pool.map(_share, ends[:-1], ends[1:])
    finally:
        _work, _items = None, ()


def _share(first: int, end: int) -> list[Any]:
    assert _work is not None
    return _work(_items[first:end])


def _cores() -> int:
    return len(os.sched_getaffinity(0)) if hasattr(os, "sched_getaffinity") else 1
