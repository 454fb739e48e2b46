"""What the cross-checks say of one record."""

from __future__ import annotations

import datetime
from collections.abc import Callable, Iterable
from pathlib import Path

import pytest
from clean_part import RECORD, Check

from builder.crosschecks import checked_catalog
from builder.problems import Problem

TODAY = datetime.date(2026, 6, 1)


@pytest.fixture
def check(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Check:
    """Every problem of a record, and of the table beside it if rows are given."""
    monkeypatch.chdir(tmp_path)

    def problems(record: str = RECORD, rows: Iterable[tuple[object, ...]] = (), ends: str = "") -> tuple[Problem, ...]:
        Path("parts").mkdir(exist_ok=True)
        if rows:
            record += "r_t_table: {file: t.csv}\n"
            lines = ["t_c,r_ohm" + ends, *(",".join(map(str, row)) for row in rows)]
            Path("parts", "t.csv").write_text("\n".join(lines) + "\n", "utf-8")
        Path("parts", "p.yaml").write_text(record, "utf-8")
        return checked_catalog(Path("parts"), today=TODAY).problems

    return problems


@pytest.fixture
def told(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Callable[..., list[str]]:
    """Every problem of the records given by their names, as `check` says it."""
    monkeypatch.chdir(tmp_path)

    def said(today: datetime.date = TODAY, **files: str) -> list[str]:
        Path("parts").mkdir(exist_ok=True)
        for name, text in files.items():
            Path("parts", f"{name}.yaml").write_text(text, "utf-8")
        problems = checked_catalog(Path("parts"), today=today).problems
        return [f"{p} [{p.severity}: {p.rule}]" for p in problems]

    return said
