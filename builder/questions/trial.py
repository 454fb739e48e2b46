"""A draft's files, once `check` has nothing against them."""

from __future__ import annotations

import datetime
import re
from collections.abc import Mapping
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Any

from builder.crosschecks import checked_catalog
from builder.problems import Problem, errors
from builder.questions.interview import Interview
from builder.questions.new_files import NotWritten
from builder.questions.record_yaml import record_yaml
from builder.questions.table_draft import table_csv


def proven_files(interview: Interview, record: Path, today: datetime.date, *, csv: bool) -> dict[Path, str]:
    """The record's text and that of the CSV beside it; fields that `check` finds wrong are asked for again.

    Raises
    ------
    NotWritten
        What is wrong stands in the table, which is not asked for.
    """
    while True:
        files = _files(interview, record, csv)
        found = _trial_errors(files, today)
        if not found:
            return files
        for problem in found:
            interview.tell(f"{problem.place}: {problem.message}" if problem.field else problem.message)
        names = {re.split(r"[.\[]", problem.field)[0] for problem in found}
        if not names <= set(interview.asked):
            raise NotWritten("The table has errors, shown above. Correct its file. Nothing was written.")
        interview.ask_again(names)


def _files(interview: Interview, record: Path, csv: bool) -> dict[Path, str]:
    draft, model = interview.draft, interview.model
    if not csv:
        return {record: record_yaml(model, draft)}
    table = record.with_suffix(".csv")
    beside: dict[str, Any] = {"r_t_table": {"file": table.name}}
    # The table first: no record names a file that is not there yet.
    return {table: table_csv(draft), record: record_yaml(model, draft, beside)}


def _trial_errors(files: Mapping[Path, str], today: datetime.date) -> list[Problem]:
    """The errors of the files, alone in a folder; the catalog's parts are looked up while asking."""
    with TemporaryDirectory() as folder:
        for path, text in files.items():
            Path(folder, path.name).write_text(text, "utf-8")
        found = errors(checked_catalog(Path(folder), today=today).problems)
    return [problem for problem in found if problem.rule != "unknown-part"]
