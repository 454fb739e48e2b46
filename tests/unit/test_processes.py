"""Work shared out over processes is the same work, and a process that dies is told of."""

import os
import signal
from concurrent.futures.process import BrokenProcessPool

import pytest

from builder import processes
from builder.processes import shared_out


@pytest.fixture(autouse=True)
def two_cores(monkeypatch):
    monkeypatch.setattr(processes, "_cores", lambda: 2)


def _doubled(items):
    return [(2 * item, os.getpid()) for item in items]


def test_results_come_in_the_order_of_the_items_from_other_processes():
    results = shared_out(_doubled, range(1000))
    assert [result for result, _ in results] == [2 * item for item in range(1000)]
    assert os.getpid() not in {process for _, process in results}


def test_few_items_are_done_here():
    assert {process for _, process in shared_out(_doubled, range(10))} == {os.getpid()}


def test_what_is_raised_in_a_process_is_raised_here():
    def refuse(items):
        raise ValueError(f"{len(items)} items")

    with pytest.raises(ValueError, match="items"):
        shared_out(refuse, range(1000))


def test_a_process_that_is_killed_is_an_error_and_no_endless_wait():
    def die(_):
        os.kill(os.getpid(), signal.SIGKILL)

    with pytest.raises(BrokenProcessPool):
        shared_out(die, range(1000))
