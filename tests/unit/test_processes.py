"""Work shared out over processes is the same work, and a process that dies is told of.

Each case runs in an interpreter of its own: where other threads run, as beside a browser, nothing is shared out.
"""

import subprocess
import sys

import pytest

HEAD = """
import os, signal
from builder import processes
processes._cores = lambda: 2
def doubled(items): return [(2 * item, os.getpid()) for item in items]
def refuse(items): raise ValueError(f"{len(items)} items")
def die(items): os.kill(os.getpid(), signal.SIGKILL)
"""


def told(line: str) -> str:
    """What a line prints in an interpreter of its own, or the last line of its error."""
    done = subprocess.run([sys.executable, "-c", HEAD + line], capture_output=True, text=True, timeout=60)
    return (done.stdout or done.stderr).strip().splitlines()[-1]


pytestmark = pytest.mark.skipif(sys.platform != "linux", reason="work is shared out on Linux only")


def test_results_come_in_the_order_of_the_items_from_other_processes():
    line = """
done = processes.shared_out(doubled, range(1000))
print([d for d, _ in done] == list(range(0, 2000, 2)), os.getpid() in {p for _, p in done})
"""
    assert told(line) == "True False"


def test_few_items_are_done_here():
    assert told("print({p for _, p in processes.shared_out(doubled, range(10))} == {os.getpid()})") == "True"


def test_what_is_raised_in_a_process_is_raised_here():
    assert told("processes.shared_out(refuse, range(1000))") == "ValueError: 125 items"


def test_a_process_that_is_killed_is_an_error_and_no_endless_wait():
    assert told("processes.shared_out(die, range(1000))").startswith("concurrent.futures.process.BrokenProcessPool:")
