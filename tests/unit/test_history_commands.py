"""`changes` and `check --since`: what they answer on which stream, and with which exit code."""

import json
import shutil

import pytest
from click.testing import CliRunner
from git_records import ALONE, GitRecords, appended, other_part, part, position
from outside_tool import needed

from builder.cli import main

APPROVED = (
    "state: approved, on: 2026-02-10, by: components, because: tested, document: {title: data sheet, revision: A}"
)


@pytest.fixture
def kept(tmp_path, monkeypatch):
    needed("git")
    for name, value in ALONE.items():
        monkeypatch.setenv(name, value)
    monkeypatch.chdir(tmp_path)
    return GitRecords(tmp_path)


def told(*arguments):
    result = CliRunner().invoke(main, list(arguments))
    return result.exit_code, result.stdout, result.stderr


def test_changes_answers_a_table_with_what_differs_below(kept):
    first = kept.commit("one", x=appended(part(), APPROVED), y=other_part(), place=position())
    kept.write(x=appended(part(("3950", "3900")), APPROVED))
    assert told("changes") == (
        0,
        f"""\
Since {first[:10]} of 2026-03-02: 1 part and 1 position changed.

part         change  curve K  at °C  band K  at °C
Maker X-103  edited   −1.280    105  −1.302    105

position   change     worst K before    now  limit  trips      alternates
board/RT1  its parts           1.039  1.046  met    as before  Y-103: fits → fits with new firmware

Maker X-103: b_values[0].b_k: 3950 → 3900
board/RT1: changed with Maker X-103
""",
        "",
    )


def test_changes_answers_markdown_in_which_records_are_text(kept):
    first = kept.commit("one", x=part())
    kept.write(x=part(("shape: plain", 'shape: plain\nnotes: "| <b>@all</b> [x](http://y) `z`"')))
    assert told("changes", "--format", "markdown") == (
        0,
        f"""\
**Since {first[:10]} of 2026-03-02: 1 part and 0 positions changed.**

| part | change | curve K | at °C | band K | at °C |
| --- | --- | ---: | ---: | ---: | ---: |
| Maker X-103 | edited | 0.000 |  | 0.000 |  |

- Maker X-103: notes: nothing → &#124; &#60;b&#62;&#64;all&#60;/b&#62; &#91;x&#93;(http&#58;//y) &#96;z&#96;
""",
        "",
    )


def test_changes_answers_json_alone(kept):
    first = kept.commit("one", x=part(), y=other_part(), place=position())
    kept.write(y=other_part("Y-103", ("3960", "3700")))
    code, out, err = told("changes", "--format", "json")
    answer = json.loads(out)
    assert (code, err, answer["since"], answer["unread"]) == (0, "", first, [])
    (changed,) = answer["parts"]
    assert {name: changed[name] for name in ("part", "maker", "was", "change", "at_c", "fields", "file")} == {
        "part": "Y-103",
        "maker": "Maker",
        "was": None,
        "change": "edited",
        "at_c": 105.0,
        "fields": [{"field": "b_values[0].b_k", "before": 3960.0, "now": 3700.0}],
        "file": "parts/y.yaml",
    }
    (place,) = answer["positions"]
    assert (place["position"], place["change"], place["parts"]) == ("board/RT1", "its parts", ["Maker Y-103"])
    assert place["alternates"] == [{"part": "Y-103", "before": "fits", "now": "fits with new firmware"}]
    assert place["before"] == place["now"]
    assert set(place["now"]) == {"worst_k", "at_c", "meets_limit", "trips"}


@pytest.mark.parametrize("step_k", ["1", "5"])
def test_the_figures_of_changes_are_those_of_compare_between_the_two_states(kept, step_k):
    kept.commit("one", x=part())
    kept.write(x=part(("3950", "3900")))
    (changed,) = json.loads(told("changes", "--format", "json")[1])["parts"]
    kept.write(x=part(), z=part(("X-103", "Z-103"), ("3950", "3900")))
    answer = json.loads(told("compare", "X-103", "Z-103", "--step", step_k, "--format", "json")[1])
    (other,) = answer["others"]
    assert (changed["worst_k"], changed["at_c"]) == (other["worst_k"], other["worst_at_c"])


def test_changes_says_what_it_could_not_read_and_goes_on(kept):
    kept.commit("one", x=part(("b_k: 3950", "b_k: 39500")))
    kept.write(x=part())
    code, out, _ = told("changes")
    assert code == 0
    assert out.endswith(
        "Not readable before:\nparts/x.yaml:6: b_values[0].b_k: 39500 K is outside 1000 to 10000 K. "
        "Check the decimal point; data sheets print B in kelvin.\n"
    )


def test_changes_of_records_that_have_errors_shows_them_and_exits_1(kept):
    kept.commit("one", x=part(), y=other_part())
    kept.write(x=part(("b_k: 3950", "b_k: 39500")), y=other_part("Y-103", ("10k", "10.5k")))
    code, out, err = told("changes")
    assert code == 1
    assert "Maker X-103  not readable now" in out
    assert [line.split(":")[0] for line in err.splitlines()] == ["parts/x.yaml", "parts/y.yaml"]


@pytest.mark.parametrize("command", [("changes", "nowhere"), ("check", "--since", "nowhere")])
def test_a_revision_that_does_not_exist_exits_2_and_writes_nothing(kept, command):
    kept.commit("one", x=part())
    error = "nowhere is no revision of this repository. git log --oneline shows the revisions.\n"
    assert told(*command) == (2, "", error)


@pytest.mark.parametrize("command", [("changes",), ("check", "--since", "HEAD")])
def test_without_a_repository_they_exit_2(kept, command):
    kept.write(x=part())
    shutil.rmtree(".git")
    error = "parts is not in a git repository. Run this where the records are kept under git.\n"
    assert told(*command) == (2, "", error)


def test_check_since_adds_what_was_not_kept(kept):
    first = kept.commit("one", x=appended(part(), APPROVED))
    kept.write(x=part())
    code, out, err = told("check", "--since", "HEAD")
    assert (code, err) == (1, "")
    assert out == (
        "parts/x.yaml:11: standing: the entry approved on 2026-02-10 by components stood in revision "
        f"{first[:10]} and is gone. Restore it, and append what holds now as a new entry. [error: ledger-removed]\n"
        "1 part, 0 positions: 1 error, 0 warnings.\n"
    )
    assert told("check")[0] == 0


def test_check_since_tells_of_the_path_asked_for_only(kept):
    kept.commit("one", x=appended(part(), APPROVED), y=other_part())
    kept.write(x=part())
    assert told("check", "--since", "HEAD", "parts/y.yaml")[0] == 0
    assert told("check", "--since", "HEAD", "parts/x.yaml")[0] == 1


def test_check_since_a_commit_on_another_way_says_so(kept):
    kept.commit("one", x=part())
    second = kept.commit("two", x=appended(part(), APPROVED))
    kept.git("reset", "--quiet", "--hard", "HEAD~1")
    code, _, err = told("check", "--since", second)
    assert (code, err) == (
        1,
        f"Revision {second[:10]} is not among the commits that lead to this one, as far as this clone knows: what was "
        "entered there counts as removed here. Where a branch is behind, give git merge-base of the two.\n",
    )


def test_check_since_says_whose_ledger_it_could_not_read(kept):
    first = kept.commit("one", x=part(("b_k: 3950", "b_k: 39500")))
    kept.commit("two", x=part())
    assert told("check", "--since", first) == (
        0,
        "1 part, 0 positions: 0 errors, 0 warnings.\n",
        f"Not readable in revision {first[:10]}, so no ledger in it is compared: parts/x.yaml:6: b_values[0].b_k: "
        "39500 K is outside 1000 to 10000 K. Check the decimal point; data sheets print B in kelvin.\n",
    )
