"""Measures Beadroll against the reference, side by side on this machine, and prints what it found in Markdown.

Every run is a process of its own. This one stays small and imports none of the project: on Linux a child's peak
memory counts from its parent's.
"""

from __future__ import annotations

import argparse
import datetime
import gzip
import json
import os
import platform
import re
import shutil
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field
from importlib.metadata import version
from pathlib import Path

import yaml

HERE = Path(__file__).resolve().parent
PROJECT = HERE.parents[1]
PACKAGES = ("mkdocs", "mkdocs-material", "numpy", "pyyaml", "matplotlib", "pydantic")
WHAT = ("reference", "build", "check", "curves", "browser")
SPEED_PAGE = PROJECT / "docs" / "speed.md"
WRITTEN_SIZES = [100, 1000, 4000, 10000]
LOCAL_FILES = re.compile(r'(?:src|href)="(?!https?:|data:|#)([^"#?]+\.(?:js|css))"')
MEBIBYTE = 2**20
# ru_maxrss counts kibibytes on Linux, bytes on macOS.
# As anyone runs it: compiled modules stay for the next run.
ENVIRONMENT = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
MAXRSS_UNIT_BYTES = 1 if sys.platform == "darwin" else 1024


@dataclass(frozen=True)
class Cost:
    """What one process took, with those that it waited for."""

    wall_s: float
    cpu_s: float
    peak_mib: float


@dataclass
class Run:
    """One thing to measure, once in every round."""

    name: str
    parts: int
    folder: Path
    command: Sequence[str]
    prepare: Callable[[Path], None]
    tells_cost: bool = False  # the process does more than is to be measured, and tells what that took
    costs: list[Cost] = field(default_factory=list)

    def measure(self) -> None:
        """Run once more."""
        self.prepare(self.folder)
        cost = measured(self.command, self.folder)
        if self.tells_cost:
            wall_s, cpu_s = map(float, (self.folder / "log.txt").read_text("utf-8").split()[-2:])
            cost = Cost(wall_s, cpu_s, cost.peak_mib)
        self.costs.append(cost)

    @property
    def cost(self) -> Cost:
        """The shortest times, since other work on the machine only ever adds; the largest peak."""
        return Cost(
            min(cost.wall_s for cost in self.costs),
            min(cost.cpu_s for cost in self.costs),
            max(cost.peak_mib for cost in self.costs),
        )


def measured(command: Sequence[str], folder: Path) -> Cost:
    """The cost of a command; one that fails ends the bench with what it said."""
    with (folder / "log.txt").open("w+", encoding="utf-8") as log:
        start_s = time.perf_counter()
        process = subprocess.Popen(command, cwd=folder, stdout=log, stderr=log, env=ENVIRONMENT)
        _, status, usage = os.wait4(process.pid, 0)
        wall_s = time.perf_counter() - start_s
        process.returncode = os.waitstatus_to_exitcode(status)
        if process.returncode:
            log.seek(0)
            sys.exit(f"{' '.join(command)} failed in {folder}:\n{log.read()[-3000:]}")
    return Cost(wall_s, usage.ru_utime + usage.ru_stime, usage.ru_maxrss * MAXRSS_UNIT_BYTES / MEBIBYTE)


BUILD = (sys.executable, "-m", "mkdocs", "build", "--quiet")
SERVE = (sys.executable, str(HERE / "serve_edit.py"))
BEADROLL = str(Path(sys.executable).with_name("beadroll"))
CHECK = (BEADROLL, "check")


def forget(folder: Path) -> None:
    """Nothing is kept from an earlier run."""
    shutil.rmtree(folder / ".beadroll-cache", ignore_errors=True)


def remove_site(folder: Path) -> None:
    """A full build starts from nothing."""
    forget(folder)
    shutil.rmtree(folder / "site", ignore_errors=True)


def edit_record(folder: Path) -> None:
    """Lengthen the notes, a record's last line, of one part."""
    record = min((folder / "parts").glob("*/*.yaml"))
    record.write_text(record.read_text("utf-8").rstrip("\n") + " Edited.\n", "utf-8")


def leave(folder: Path) -> None:
    """Nothing to prepare."""


def script_text(script: str) -> str:
    """What one of the scripts beside this one prints."""
    return subprocess.run(
        [sys.executable, str(HERE / script)], check=True, stdout=subprocess.PIPE, text=True
    ).stdout.strip()


def run_script(script: str, *arguments: object) -> None:
    """Run one of the scripts beside this one; what it has to complain about it says itself."""
    if subprocess.run([sys.executable, str(HERE / script), *map(str, arguments)]).returncode:
        sys.exit(f"{script} failed.")


def write_config(folder: Path, *, figures: bool) -> None:
    """The project's own mkdocs.yml, with the records of the bench."""
    config = yaml.safe_load((PROJECT / "mkdocs.yml").read_text("utf-8"))
    config["docs_dir"] = str(PROJECT / "docs")
    options = {"records": "parts"} | ({} if figures else {"figures": False})
    config["plugins"] = [{"beadroll": options} if "beadroll" in plugin else plugin for plugin in config["plugins"]]
    (folder / "mkdocs.yml").write_text(yaml.safe_dump(config, sort_keys=False), "utf-8")


def made_runs(chosen: argparse.Namespace) -> Iterator[Run]:
    """What was asked for, its records and pages made."""
    if "reference" in chosen.only:
        folder = chosen.work / f"reference-{chosen.reference}"
        run_script("make_reference.py", "--pages", chosen.reference, folder)
        yield Run("reference", chosen.reference, folder, BUILD, remove_site)
    for parts in chosen.sizes if {"build", "check"} & set(chosen.only) else ():
        folder = chosen.work / f"catalog-{parts}"
        options = ("--parts", parts, "--curves", chosen.curves, "--positions", chosen.positions)
        run_script("make_catalog.py", *options, folder / "parts")
        write_config(folder, figures=chosen.figures == "yes")
        if "check" in chosen.only:
            yield from command_runs(parts, folder)
        if "build" in chosen.only:
            yield Run("build", parts, folder, BUILD, remove_site)
            yield Run("one record edited", parts, folder, BUILD, edit_record)
            yield Run("one record edited, serving", parts, folder, SERVE, leave, tells_cost=True)


def command_runs(parts: int, folder: Path) -> Iterator[Run]:
    """`check` of records never seen before, then commands on records that are as they were."""
    yield Run("check", parts, folder, CHECK, forget)
    yield Run("check, unchanged", parts, folder, CHECK, leave)
    one, other = (path.stem for path in sorted((folder / "parts").glob("*/*.csv"))[:2])
    commands = {"curve": (one,), "compare": (one, other), "swap": ("bench-000/RT1", other)}
    for name, arguments in commands.items():
        yield Run(f"{name}, unchanged", parts, folder, (BEADROLL, name, *arguments), leave)


def table(header: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    """A pipe table, its first column words and the others numbers."""
    lines = [header, ["---", *["---:"] * (len(header) - 1)], *rows]
    return "\n".join(f"| {' | '.join(cells)} |" for cells in lines)


def times_table(runs: Sequence[Run]) -> str:
    """Times and memory."""
    rows = []
    for run in runs:
        cost = run.cost
        each_ms = 1000 * cost.cpu_s / run.parts
        figures = (f"{cost.wall_s:.2f}", f"{cost.cpu_s:.2f}", f"{cost.peak_mib:.0f}", f"{each_ms:.2f}")
        rows.append((run.name, f"{run.parts}", *figures))
    return table(("run", "parts or pages", "wall, s", "CPU, s", "peak, MiB", "CPU each, ms"), rows)


def ratios_table(runs: Sequence[Run]) -> str:
    """Times as shares of the reference's, and their growth with the parts."""
    header = ("run", "parts", "wall of the reference", "CPU of the reference", "CPU each more, ms", "growth of CPU")
    others = (run for run in runs if run.name != "reference")
    return table(header, [(run.name, f"{run.parts}", *shares(run, runs), *growth(run, runs)) for run in others])


def shares(run: Run, runs: Sequence[Run]) -> tuple[str, str]:
    """Wall and CPU time over the reference's, where it has as many pages as the run has parts."""
    for other in runs:
        if other.name == "reference" and other.parts == run.parts:
            return f"{run.cost.wall_s / other.cost.wall_s:.3f}", f"{run.cost.cpu_s / other.cost.cpu_s:.3f}"
    return "–", "–"


def growth(run: Run, runs: Sequence[Run]) -> tuple[str, str]:
    """CPU time of each part more than in the next smaller catalog [ms], and CPU time over that catalog's."""
    smaller = [other for other in runs if other.name == run.name and other.parts < run.parts]
    if not smaller:
        return "–", "–"
    before = max(smaller, key=lambda other: other.parts)
    each_more_ms = 1000 * (run.cost.cpu_s - before.cost.cpu_s) / (run.parts - before.parts)
    return f"{each_more_ms:.2f}", f"{run.cost.cpu_s / before.cost.cpu_s:.2f} for {run.parts / before.parts:g} times"


def sites_table(runs: Sequence[Run]) -> str:
    """Files and bytes of each site that was built."""
    rows = []
    for run in runs:
        if run.name not in ("reference", "build"):
            continue
        sizes = [path.stat().st_size for path in (run.folder / "site").rglob("*") if path.is_file()]
        index = (run.folder / "site" / "search" / "search_index.json").stat().st_size
        total_mib = sum(sizes) / MEBIBYTE
        each_kib = sum(sizes) / 1024 / run.parts
        row = (f"{len(sizes)}", f"{total_mib:.1f}", f"{each_kib:.1f}", f"{index / 1024:.0f}")
        rows.append((run.name, f"{run.parts}", *row))
    return table(("site", "parts or pages", "files", "size, MiB", "each, KiB", "search index, KiB"), rows)


def views_table(runs: Sequence[Run]) -> str:
    """What a browser loads for the first view of the pages that hold the whole catalog."""
    rows = []
    for run in (run for run in runs if run.name == "build"):
        for page in ("parts/index.html", "side-by-side.html", "shortlist.html"):
            html = run.folder / "site" / page
            loaded = {html, *(html.parent / name for name in LOCAL_FILES.findall(html.read_text("utf-8")))}
            contents = [path.read_bytes() for path in loaded if path.is_file()]
            plain = sum(map(len, contents)) / 1024
            packed = sum(len(gzip.compress(content, 6)) for content in contents) / 1024
            rows.append((page, f"{run.parts}", f"{len(contents)}", f"{plain:.0f}", f"{packed:.0f}"))
    return table(("page, with its scripts and styles", "parts", "files", "KiB", "KiB compressed"), rows)


def keystrokes_table(runs: Sequence[Run]) -> str:
    """How long the list of parts takes to answer a keystroke in Chromium."""
    rows = []
    for run in (run for run in runs if run.name == "build"):
        done = subprocess.run(
            [sys.executable, str(HERE / "keystrokes.py"), str(run.folder / "site")], capture_output=True, text=True
        )
        if done.returncode:
            sys.exit(f"keystrokes.py failed:\n{done.stderr[-2000:]}")
        told = json.loads(done.stdout)
        rows.append((f"{run.parts}", *(f"{told[name]:.0f}" for name in ("ready_ms", "median_ms", "longest_ms"))))
    return table(("parts", "Parts page ready, ms", "keystroke, median, ms", "keystroke, longest, ms"), rows)


def processor() -> str:
    """The processor's name, where the system tells it."""
    info = Path("/proc/cpuinfo")
    lines = info.read_text("utf-8").splitlines() if info.exists() else []
    return next((line.split(":")[1].strip() for line in lines if line.startswith("model name")), platform.machine())


def heading(chosen: argparse.Namespace, load: float) -> str:
    """When, on what and with what this was measured."""
    now = datetime.datetime.now(datetime.UTC)
    packages = ", ".join(f"{name} {version(name)}" for name in PACKAGES)
    yaml_reader = "with libyaml" if yaml.__with_libyaml__ else "without libyaml, which makes reading slow"
    return (
        f"Measured {now:%Y-%m-%d %H:%M} UTC on {processor()}, {os.cpu_count()} cores, {platform.system()}, "
        f"load {load:.1f} before the first run. "
        f"Python {platform.python_version()}, {packages}, {yaml_reader}. "
        f"Curves: {chosen.curves}; positions: {chosen.positions}; figures: {chosen.figures}; "
        f"shortest of {chosen.repeat}."
    )


def say(message: str) -> None:
    """Progress."""
    print(message, file=sys.stderr, flush=True)


def bench(chosen: argparse.Namespace) -> Iterator[str]:
    """Make, run in turn, report: the pieces of the report as they are known."""
    load = os.getloadavg()[0]
    say("Making the records and pages")
    runs = list(made_runs(chosen))
    for number in range(1, chosen.repeat + 1):
        for run in runs:
            run.measure()
            cost = run.costs[-1]
            say(
                f"Round {number} of {chosen.repeat}, {run.name}, {run.parts}: "
                f"wall {cost.wall_s:.2f} s, CPU {cost.cpu_s:.2f} s, peak {cost.peak_mib:.0f} MiB"
            )
    yield heading(chosen, load)
    if runs:
        yield times_table(runs)
        yield ratios_table(runs)
    if any(run.name in ("reference", "build") for run in runs):
        yield sites_table(runs)
    if "browser" in chosen.only and any(run.name == "build" for run in runs):
        yield views_table(runs)
        yield keystrokes_table(runs)
    if "curves" in chosen.only:
        yield script_text("curve_speed.py")


def reported(chosen: argparse.Namespace) -> None:
    """Print the report, and write the page of it where that is asked for."""
    pieces = []
    for piece in bench(chosen):
        print(f"{piece}\n", flush=True)
        pieces.append(piece)
    if chosen.write:
        SPEED_PAGE.write_text(SPEED_TEXT.format(report="\n\n".join(pieces)), "utf-8")


SPEED_TEXT = """\
---
title: Speed
description: What builds, checks and commands took when they were last measured, beside a reference on the same machine.
---

# Speed

Times drift with the machine, so they are told beside a reference that was run in turn with them: MkDocs and Material
alone, building as many Markdown pages with tables of the same size. `tests/bench/README.md` in the repository says what
each run and each figure is; `python tests/bench/run.py --write` makes this page.

{report}
"""


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--sizes", type=int, nargs="+", help="parts of the catalogs; default 100 1000 4000")
    parser.add_argument("--write", action="store_true", help="write docs/speed.md too; then 10000 parts as well")
    parser.add_argument("--reference", type=int, default=1000, metavar="PAGES", help="pages of the reference")
    parser.add_argument("--only", nargs="+", choices=WHAT, default=WHAT, help="what to measure")
    parser.add_argument("--repeat", type=int, default=1, metavar="ROUNDS", help="rounds; the shortest times count")
    parser.add_argument("--figures", choices=("yes", "no"), default="yes", help="figures on the parts' pages")
    parser.add_argument("--curves", default="csv", help="how the parts state their curves; see make_catalog.py")
    parser.add_argument("--positions", type=int, default=20)
    parser.add_argument("--work", type=Path, help="an empty folder to work in and keep; default one that is removed")
    chosen = parser.parse_args()
    chosen.sizes = chosen.sizes or (WRITTEN_SIZES if chosen.write else WRITTEN_SIZES[:-1])
    if chosen.work:
        chosen.work = chosen.work.resolve()
        reported(chosen)
    else:
        with tempfile.TemporaryDirectory(prefix="beadroll-bench-") as folder:
            chosen.work = Path(folder)
            reported(chosen)


if __name__ == "__main__":
    main()
