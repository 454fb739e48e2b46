"""A draft as the text of its record: in the order of the record format, figures as typed."""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from typing import Any

from builder.records.quantities import RecordModel
from builder.records.yaml_text import Path, YamlText, read_yaml

_LONGEST_LINE = 120
# What other readers of YAML, with the meanings of version 1.1, take for a number, a time, a truth value or a sign of theirs.
_BENT = re.compile(r"[-+.]?[0-9][-+0-9_.,:eExXa-fA-F]*|[yYnN]|(?i:yes|no|on|off)|=|<<")
_DAY = re.compile("[0-9]{4}-[0-9]{2}-[0-9]{2}")


def record_yaml(model: type[RecordModel], draft: YamlText, instead: Mapping[str, Any] | None = None) -> str:
    """The record's text, with some fields replaced."""
    held = draft.value | (instead or {})
    ordered = {name: held[name] for name in model.model_fields if name in held}
    return "".join(f"{line}\n" for line in _block(draft, (), ordered))


def _block(draft: YamlText, path: Path, value: Any) -> Iterable[str]:
    """A group or a list over several lines."""
    if isinstance(value, list):
        for i, item in enumerate(value):
            first, *others = _item(draft, (*path, i), item)
            yield f"- {first}"
            yield from (f"  {line}" for line in others)
        return
    for name, held in value.items():
        inner = scalar_text(held) if isinstance(held, str) else _flow(draft, (*path, name), held)
        flow = f"{name}: {inner}" if _is_flat(held) else ""
        if flow and (len(flow) <= _LONGEST_LINE or not isinstance(held, dict)):
            yield flow
        elif held not in ({}, []):
            yield f"{name}:"
            yield from (f"  {line}" for line in _block(draft, (*path, name), held))


def _item(draft: YamlText, path: Path, item: Any) -> Iterable[str]:
    flow = _flow(draft, path, item) if _is_flat(item) else ""
    return [flow] if flow and (len(flow) <= _LONGEST_LINE or isinstance(item, list)) else _block(draft, path, item)


def _is_flat(value: Any) -> bool:
    """Whether a value may stand on one line: a scalar, a list of them, or a short group of both."""
    if isinstance(value, dict):
        return bool(value) and all(not isinstance(held, dict) and _is_flat(held) for held in value.values())
    return not isinstance(value, list) or (bool(value) and not any(isinstance(item, dict | list) for item in value))


def _flow(draft: YamlText, path: Path, value: Any) -> str:
    if isinstance(value, dict):
        return f"{{{', '.join(f'{name}: {_flow(draft, (*path, name), held)}' for name, held in value.items())}}}"
    if isinstance(value, list):
        return f"[{', '.join(_flow(draft, (*path, i), item) for i, item in enumerate(value))}]"
    return scalar_text(value, in_flow=True) if isinstance(value, str) else draft.plain.get(path, str(value))


def scalar_text(text: str, *, in_flow: bool = False) -> str:
    """Text as YAML reads it back, in quotes where it would be bent; in brackets and braces a comma bends it too.

    >>> scalar_text("0603"), scalar_text("10k"), scalar_text("a: b"), scalar_text("off"), scalar_text("2025-03-11")
    ('"0603"', '10k', '"a: b"', '"off"', '2025-03-11')
    >>> scalar_text("chip, 0603"), scalar_text("chip, 0603", in_flow=True)
    ('chip, 0603', '"chip, 0603"')
    """
    # Readers differ on a question mark in brackets.
    bent = (_BENT.fullmatch(text) and not _DAY.fullmatch(text)) or (in_flow and "?" in text)
    alone = f"{{a: {text}}}" if in_flow else f"a: {text}"
    if not bent and read_yaml(alone).value == {"a": text}:
        return text
    escaped = "".join(f"\\{c}" if c in '"\\' else c for c in text)
    return f'"{escaped}"'
