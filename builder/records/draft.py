"""A record that is still being written: what is wrong with what it has."""

from __future__ import annotations

from pydantic import ValidationError

from builder.records.quantities import RecordModel
from builder.records.wording import Worded, worded
from builder.records.yaml_text import YamlText


def draft_faults(model: type[RecordModel], draft: YamlText) -> list[Worded]:
    """Path, rule and message of each fault; a field that is still missing is one of them."""
    try:
        model.model_validate(draft.value)
    except ValidationError as error:
        return list(worded(error, model, draft))
    return []
