"""Whole answers about the demo records; `python tests/golden/rewrite.py` writes them anew."""

import pytest
from rewrite import COMMANDS, HERE, answer


@pytest.mark.parametrize("name", COMMANDS)
def test_command_answers_as_before(name):
    assert answer(COMMANDS[name]) == (HERE / name).read_text(encoding="utf-8")
