"""What a server takes to build the site again after an edit: prints wall and CPU seconds of that build alone.

As `mkdocs serve` does, it builds in one process that goes on running, the plugin's object the same at each build.
"""

from __future__ import annotations

import logging
import os
import time
from pathlib import Path

from mkdocs.commands.build import build
from mkdocs.config import load_config


def cpu_s() -> float:
    """User and system time of this process and of those that it waited for."""
    return sum(os.times()[:4])


def main() -> None:
    logging.disable(logging.CRITICAL)
    build(load_config("mkdocs.yml"), serve_url="http://127.0.0.1:8000/")
    record = min(Path("parts").glob("*/*.yaml"))
    record.write_text(record.read_text("utf-8").rstrip("\n") + " Edited.\n", "utf-8")
    start_s, start_cpu_s = time.perf_counter(), cpu_s()
    build(load_config("mkdocs.yml"), serve_url="http://127.0.0.1:8000/")
    print(time.perf_counter() - start_s, cpu_s() - start_cpu_s)


if __name__ == "__main__":
    main()
