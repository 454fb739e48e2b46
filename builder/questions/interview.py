"""The questions of a record, one a field, in the order of its model; each answer is checked before the next question."""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterable, Mapping
from typing import Any

from builder.questions.kinds import answered, choices, group_models, item_annotation
from builder.records.draft import draft_faults
from builder.records.quantities import RecordModel
from builder.records.yaml_text import Path, YamlText, field_name

# What a first record leaves to its defaults or to a later decision, and tables, which nobody types in answers.
_NOT_ASKED = ("curve_from", "shape", "r_t_table", "accepted", "alternates", "sha256", "file", "figures")
_CURVE = ("b_values", "steinhart_hart")

Refusal = Callable[[Path, Mapping[str, Any], Any], str]


class Interview:
    """Fills in a draft. `ask` gives the answer to a question, `tell` takes a line for the person who answers.

    `refused` says what the catalog has against a value, empty where nothing.
    """

    def __init__(
        self,
        model: type[RecordModel],
        draft: YamlText,
        ask: Callable[[str], str],
        tell: Callable[[str], None],
        refused: Refusal,
    ) -> None:
        self.model, self.draft, self.tell = model, draft, tell
        self._ask, self._refused = ask, refused

    @property
    def asked(self) -> list[str]:
        """The fields that are asked for."""
        return [name for name in self.model.model_fields if name not in _NOT_ASKED]

    def fill_in(self) -> None:
        """Ask for every field of the record."""
        for name in self.asked:
            self._field((name,), self.model.model_fields[name])
            while name == _CURVE[-1] and (wrong := [message for path, _, message in self._faults() if not path]):
                self.tell(wrong[0])
                self.ask_again(_CURVE)

    def ask_again(self, names: Collection[str]) -> None:
        """Ask for these fields anew, without what they hold."""
        for name in names:
            self._drop((name,))
        for name in [name for name in self.asked if name in names]:
            self._field((name,), self.model.model_fields[name])

    def _field(self, path: Path, field: Any) -> bool:
        item, models = item_annotation(field.annotation), group_models(field.annotation)
        if item is not None:
            return self._list(path, field, item)
        if models:
            self.tell(f"\n{field.description}")
            return self._group(path, models, may_skip=not field.is_required() and _needs_something(models[0]))
        return self._value(path, field, field.annotation)

    def _list(self, path: Path, field: Any, item: Any) -> bool:
        models = group_models(item)
        if models:
            self.tell(f"\n{field.description}")
        self._put(path, [])
        while True:
            entry = (*path, len(self._at(path)))
            more = self._group(entry, models, may_skip=True) if models else self._value(entry, field, item, True)
            if not more:
                break
        held = bool(self._at(path))
        if not held:
            self._drop(path)
        return held

    def _group(self, path: Path, models: list[type[RecordModel]], *, may_skip: bool) -> bool:
        """Ask for a group until its fields fit together; False where it was left out."""
        while True:
            if self._at(path) is None:
                self._put(path, {})
            if not self._group_fields(path, models, may_skip):
                self._drop(path)
                return False
            wrong = [fault for fault in self._faults() if fault[0] and _on_one_line(fault[0], path)]
            if not wrong:
                return True
            for where, _, message in wrong:
                self.tell(f"{field_name(where)}: {message}")
            self._drop(path)

    def _group_fields(self, path: Path, models: list[type[RecordModel]], may_skip: bool) -> bool:
        first, *others = models[0].model_fields
        model = models[0]
        if may_skip or len(models) > 1:
            annotations = [m.model_fields[first].annotation for m in models]
            if not self._value((*path, first), model.model_fields[first], annotations[0], may_skip, annotations):
                return False
            chosen = self._at((*path, first))
            model = next((m for m in models if chosen in choices([m.model_fields[first].annotation])), model)
            others = list(model.model_fields)[1:]
        else:
            others.insert(0, first)
        for name in others:
            if name not in _NOT_ASKED:
                self._field((*path, name), model.model_fields[name])
        return True

    def _value(
        self, path: Path, field: Any, annotation: Any, may_skip: bool = False, annotations: list[Any] | None = None
    ) -> bool:
        """Ask for a value until it is right; False where it was left out."""
        allowed = choices(annotations or [annotation])
        known = self._known(path, field)
        self._drop(path)
        while True:
            missing = not may_skip and any(
                where == path for where, rule, _ in self._faults() if rule == "missing-field"
            )
            enter = f"Enter for {known}." if known else "" if missing else _skips(path, may_skip)
            answer = self._ask(f"{_question(field, allowed, path)} {enter}".strip() + f"\n{field_name(path)}").strip()
            if not answer and not known and not missing:
                return False
            if answer or known:
                self._put(path, *answered(answer or known, annotation))
            message = self._message(path)
            if not message:
                return True
            self.tell(f"{field_name(path)}: {message}")
            self._drop(path)

    def _message(self, path: Path) -> str:
        """What is wrong with the value at a path."""
        own = [message for where, _, message in self._faults() if where[: len(path)] == path]
        return own[0] if own else self._refused(path, self.draft.value, self._at(path))

    def _known(self, path: Path, field: Any) -> str:
        """What Enter stands for: what the draft has, or the field's default."""
        held = self._at(path)
        if held is None:
            default = None if field.is_required() else field.default
            return f"{default:g}" if isinstance(default, float) else default if isinstance(default, str) else ""
        if isinstance(held, list):
            return " ".join(self.draft.plain.get((*path, i), str(value)) for i, value in enumerate(held))
        return self.draft.plain.get(path, str(held))

    def _faults(self) -> list[tuple[Path, str, str]]:
        return draft_faults(self.model, self.draft)

    def _at(self, path: Path) -> Any:
        value: Any = self.draft.value
        for step in path:
            held = step in value if isinstance(value, dict) else isinstance(step, int) and step < len(value)
            if not held:
                return None
            value = value[step]
        return value

    def _put(self, path: Path, value: Any, figures: Iterable[str] = ()) -> None:
        holder = self._at(path[:-1])
        if isinstance(holder, list):
            holder.append(value)
        else:
            holder[path[-1]] = value
        places = [(*path, i) for i in range(len(value))] if isinstance(value, list) else [path]
        self.draft.plain.update(zip(places, figures, strict=False))

    def _drop(self, path: Path) -> None:
        if self._at(path) is not None:
            del self._at(path[:-1])[path[-1]]
        for noted in [noted for noted in self.draft.plain if noted[: len(path)] == path]:
            del self.draft.plain[noted]


def _needs_something(model: type[RecordModel]) -> bool:
    """Whether a group that is given must have a field: it can be left out by its first one."""
    return any(field.is_required() for field in model.model_fields.values())


def _on_one_line(where: Path, path: Path) -> bool:
    """Whether one of two paths holds the other."""
    return all(a == b for a, b in zip(where, path, strict=False))


def _skips(path: Path, begins: bool) -> str:
    """What Enter does at an optional field; where a list's later item begins it ends the list."""
    places = [step for step in path[-2:] if isinstance(step, int)]
    return "Enter ends the list." if begins and places and places[0] > 0 else "Enter skips."


def _question(field: Any, allowed: list[str], path: Path) -> str:
    example = field.examples[0] if field.examples else None
    if isinstance(example, list):
        example = example[0] if isinstance(path[-1], int) else " ".join(map(str, example))
    one_of = f" One of {', '.join(allowed)}." if allowed else ""
    such_as = f" Such as {example}." if example is not None else ""
    return f"{field.description}{one_of}{such_as}"
