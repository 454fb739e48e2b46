"""What a field of a record asks for: a value, a list, a group of fields; and what a typed answer is as its value."""

from __future__ import annotations

import re
from types import NoneType, UnionType
from typing import Annotated, Any, Literal, Union, get_args, get_origin

from builder.records.quantities import RecordModel
from builder.records.yaml_text import scalar

_BETWEEN_TWO = re.compile(r"\s+to\s+|[\s,;/]+")


def members(annotation: Any) -> list[Any]:
    """The types that a field may have, without what only bounds them and without None.

    >>> members(Annotated[float, "bounds"] | None)
    [<class 'float'>]
    """
    if get_origin(annotation) is Annotated:
        return members(get_args(annotation)[0])
    if get_origin(annotation) in (Union, UnionType):
        return [found for member in get_args(annotation) for found in members(member)]
    return [] if annotation is NoneType else [annotation]


def group_models(annotation: Any) -> list[type[RecordModel]]:
    """The models of a field that is a group of fields; several where the first field chooses one."""
    return [m for m in members(annotation) if isinstance(m, type) and issubclass(m, RecordModel)]


def item_annotation(annotation: Any) -> Any:
    """The type of a list's items; None where the field is no list."""
    (first, *_) = members(annotation)
    return get_args(first)[0] if get_origin(first) is tuple and get_args(first)[-1] is Ellipsis else None


def choices(annotations: list[Any]) -> list[str]:
    """The words of which one must be chosen; none where anything may be typed."""
    return [word for a in annotations for m in members(a) if get_origin(m) is Literal for word in get_args(m)]


def answered(text: str, annotation: Any) -> tuple[Any, list[str]]:
    """An answer as its field takes it, and the typed figures in it; what is no figure is left for the model to refuse.

    >>> answered("-40 to 125", tuple[float, float]), answered('"0603"', str), answered("4k7", float)
    (([-40, 125], ['-40', '125']), ('0603', []), ('4k7', []))
    """
    (first, *_) = members(annotation)
    if first not in (int, float) and get_origin(first) is not tuple:
        return (text[1:-1] if re.fullmatch('".*"', text) else text), []
    is_pair = get_origin(first) is tuple
    typed = [piece.replace("−", "-") for piece in (_BETWEEN_TWO.split(text.strip("[] ")) if is_pair else [text])]
    values = [scalar(piece) for piece in typed]
    figures = [piece for piece, value in zip(typed, values, strict=True) if isinstance(value, int | float)]
    return (values if is_pair else values[0]), figures
