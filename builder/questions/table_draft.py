"""A draft that has its R–T table already, as `intake` reads it from a file."""

from __future__ import annotations

from typing import Any

from builder.intake import record_text
from builder.intake.record import FILL_IN
from builder.records.yaml_text import YamlText, read_yaml

_READ = ("rated", "limits", "r_t_table")


def table_draft(data: bytes, *, name: str, **options: str | None) -> tuple[YamlText, list[str]]:
    """The draft, and what was recognised and assumed, a line each.

    Raises
    ------
    Unreadable
        The file cannot be read without guessing.
    """
    text = record_text(data, name=name, **options)
    draft = read_yaml(text)
    draft.value = {key: _filled(draft.value[key]) for key in _READ}
    remarks = text[text.index("\nstanding:") :].splitlines()
    return draft, [line.removeprefix("# ") for line in remarks if line.startswith("# ")]


def _filled(group: dict[str, Any]) -> dict[str, Any]:
    return {name: value for name, value in group.items() if value != FILL_IN}


def table_csv(draft: YamlText) -> str:
    """The draft's table as the text of a CSV, figures as typed."""
    columns, rows = (draft.value["r_t_table"][name] for name in ("columns", "rows"))
    cells = [
        [draft.plain.get(("r_t_table", "rows", i, j), str(cell)) for j, cell in enumerate(row)]
        for i, row in enumerate(rows)
    ]
    return "".join(f"{','.join(line)}\n" for line in [columns, *cells])
