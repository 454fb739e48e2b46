"""What the cross-checks say of one record."""

from __future__ import annotations

import datetime
from collections.abc import Iterable
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
