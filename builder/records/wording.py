"""What pydantic found wrong with a record, as faults in our own words."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any, Literal, get_args, get_origin

from pydantic import ValidationError

from builder.problems import clipped, count_text, near_name, nearest, quoted
from builder.records.quantities import RecordModel, models_in
from builder.records.yaml_text import Path, YamlText

Worded = tuple[Path, str, str]  # path, rule, message


def worded(error: ValidationError, model: type[RecordModel], document: YamlText) -> Iterator[Worded]:
    """Path, rule and message of each thing wrong, one for each path: a union repeats itself for every member."""
    details = [(_path_in_record(detail, document.value), detail) for detail in error.errors(include_url=False)]
    unknown = [path for path, detail in details if detail["type"] == "extra_forbidden"]
    # A misspelt field is told what it was meant to be; that field is not called missing as well.
    meant = {(*path[:-1], near_name(str(path[-1]), _known_fields(model, path, document))) for path in unknown}
    said: set[Path] = set()
    for path, detail in details:
        if path not in said and not (detail["type"] == "missing" and path in meant):
            said.add(path)
            yield path, *_rule_and_message(detail, path, model, document)


def _known_fields(model: type[RecordModel], path: Path, document: YamlText) -> list[str]:
    """Names that may stand beside the one at a path."""
    holders = _holders(model, path[:-1], document.value)
    return [name for name in dict.fromkeys(n for holder in holders for n in holder.model_fields) if name != path[-1]]


def _holders(model: type[RecordModel], path: Path, value: Any) -> list[type[RecordModel]]:
    """The models that the fields at a path may belong to."""
    models = [model]
    for step in path:
        value = value[step]
        if isinstance(step, str):
            held = [m.model_fields[step].annotation for m in models if step in m.model_fields]
            models = [found for annotation in held for found in models_in(annotation)]
            models = [m for m in models if isinstance(value, dict) and _chosen(m, value)] or models
    return models


def _chosen(model: type[RecordModel], value: Mapping[str, Any]) -> bool:
    """Whether the record chose this member of a union, such as the firmware with its method."""
    choices = {n: f.annotation for n, f in model.model_fields.items() if get_origin(f.annotation) is Literal}
    return all(value.get(name) in get_args(annotation) for name, annotation in choices.items())


def _path_in_record(detail: Any, value: Any) -> Path:
    """Where in the record it is: without the steps that pydantic adds for the members of a union."""
    path: list[str | int] = []
    location: Sequence[str | int] = detail["loc"]
    for i, step in enumerate(location):
        missing = detail["type"] == "missing" and i == len(location) - 1
        if missing and isinstance(step, int):
            break  # too few values in a list: the list is what is wrong
        held = step in value if isinstance(value, dict) else isinstance(value, list) and isinstance(step, int)
        if held or missing:
            path.append(step)
            value = None if missing else value[step]
    field = _context(detail).get("field") or _context(detail).get("discriminator", "").strip("'")
    return (*path, field) if field else tuple(path)


def _context(detail: Any) -> Mapping[str, Any]:
    context: Mapping[str, Any] = detail.get("ctx", {})
    return context


def _rule_and_message(detail: Any, path: Path, model: type[RecordModel], document: YamlText) -> tuple[str, str]:
    kind, context = detail["type"], _context(detail)
    shown = clipped(document.plain[path]) if path in document.plain else _shown(detail["input"])
    if "sentence" in context:
        return kind, context["sentence"]
    if kind == "extra_forbidden":
        return "unknown-field", _unknown_field(path, _known_fields(model, path, document))
    if kind == "union_tag_not_found" or (kind == "missing" and isinstance(detail["loc"][-1], str)):
        return "missing-field", _missing_field(path, _holders(model, path[:-1], document.value))
    if kind == "union_tag_invalid":
        chosen = detail["input"][path[-1]]
        shown = document.plain.get(path) or _shown(chosen)
        return "wrong-choice", _wrong_choice(chosen, shown, context["expected_tags"])
    if kind == "literal_error":
        return "wrong-choice", _wrong_choice(detail["input"], shown, context["expected"].replace(" or ", ", "))
    return "wrong-type", _wrong_type(kind, detail["input"], shown, detail["msg"])


def _shown(value: Any) -> str:
    return "a group of fields" if isinstance(value, dict) else "a list" if isinstance(value, list) else quoted(value)


def _unknown_field(path: Path, known: Sequence[str]) -> str:
    if str(path[-1])[:1].isdigit():
        return "is not a field. In brackets and braces a comma ends the value: write a point as decimal sign, and nothing between thousands."
    return "is not a field." + (nearest(str(path[-1]), known) or f" Known here: {', '.join(known)}.")


def _missing_field(path: Path, holders: Sequence[type[RecordModel]]) -> str:
    description = next(h.model_fields[str(path[-1])].description or "" for h in holders if path[-1] in h.model_fields)
    return (
        f"is missing. Add it: {description if description[:2].isupper() else description[:1].lower() + description[1:]}"
    )


def _wrong_choice(value: Any, shown: str, expected: str) -> str:
    choices = expected.replace("'", "")
    if value is None or isinstance(value, dict | list):
        return f"{shown} stands where one of {choices} must stand. Write one of them."
    return f"{shown} is none of {choices}.{nearest(str(value), choices.split(', ')) or ' Write one of them.'}"


def _wrong_type(kind: str, value: Any, shown: str, said: str) -> str:
    if kind == "string_type":
        return _not_text(value, shown)
    if kind in ("float_type", "int_type", "int_from_float"):
        return f"{shown} stands where a {'number' if kind == 'float_type' else 'whole number'} must stand. {_figure_cure(kind, value)}"
    if kind in ("model_type", "model_attributes_type", "dict_type"):
        return f"{shown} stands where fields must stand. Write name: value, indented below or in braces."
    if kind == "tuple_type":
        return f"{shown} stands where a list must stand. Write it in brackets, or with a dash on each line."
    if kind in ("too_long", "missing"):
        return (
            f"{quoted(value)} has {count_text(len(value), 'value')}, where 2 must stand. Write two, such as [25, 85]."
        )
    if kind == "finite_number":
        return f"{shown} is not a finite number. Write the figure, or remove the field."
    if kind == "string_pattern_mismatch":
        return f"{shown} is not the 64 hex digits of a SHA-256, in lower case. Copy it anew."
    return f"{shown}: {said}. See the Record format page."


def _not_text(value: Any, shown: str) -> str:
    if isinstance(value, bool | int | float):
        what = "true or false" if isinstance(value, bool) else "a number"
        return f'{shown} is read as {what}, where text must stand. Put it in quotes: "{shown}".'
    if value is None:
        return (
            "nothing stands where text must stand. Write the text, in quotes if it begins with #, or remove the field."
        )
    return f"{shown} stands where text must stand. Write a word or a sentence, in quotes if it begins with a bracket."


def _figure_cure(kind: str, value: Any) -> str:
    if value is None:
        return "Write the figure, or remove the field."
    if isinstance(value, str) and "," in value:
        return "Write a point as decimal sign, and nothing between thousands."
    if isinstance(value, float) and kind != "float_type":
        return "Write it without a decimal point."
    return "Write the figure alone, without unit or quotes."
