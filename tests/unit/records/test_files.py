"""Files and folders: what is read, what is refused, and what is told about it."""

import hashlib
import os
from pathlib import Path

import pytest
from factory import CSV, PART, POSITION, WITH_CSV, part, position

from builder.records import read_catalog

EMPTY = "the file is empty. Write a record that begins with part: or position:, or remove the file."
NO_FIELDS = "the file holds no fields. Begin the record with part: or position:."
LEADS_OUT = "leads out of the records folder."
NO_FILE = "is no file, or a link that leads to none. Put the record itself here."


@pytest.mark.parametrize("text", ["", "  \n\n", "# a remark\n", "---\n", "null\n"])
def test_a_file_without_a_record_is_called_empty(messages, text):
    assert messages(text) == [f"parts/part.yaml:1: {EMPTY}"]


@pytest.mark.parametrize("text", ["- a\n- b\n", "hello\n", "12\n", "[]\n"])
def test_a_file_of_something_else_holds_no_fields(messages, text):
    assert messages(text) == [f"parts/part.yaml:1: {NO_FIELDS}"]


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (PART + "position: x\n", "the file has both part: and position:. Keep one record in a file."),
        (part("part:", "Part:"), "the file has neither part: nor position:, so it is no record. Did you mean part?"),
        (position("position:", "positon:"), "the file has neither part: nor position:, so it is no record. Did you mean position?"),
        ("foo: 1\n", "the file has neither part: nor position:, so it is no record. Add one of the two."),
    ],
)  # fmt: skip
def test_a_record_is_either_a_part_or_a_position(messages, text, message):
    assert messages(text) == [f"parts/part.yaml:1: {message}"]


LATIN = part("Tarnbrook", "Tärnbrook").encode("latin-1")


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (LATIN, "2: byte 0xE4 is not UTF-8. Save the file as UTF-8."),
        (PART.encode("utf-16"), "1: the file is UTF-16. Save the file as UTF-8."),
        (
            PART.encode("utf-16-le"),
            "1: the character U+0000 cannot stand in a record. Delete it, or save the file as UTF-8.",
        ),
        (
            PART.encode() + b"#" * 10_000_000,
            "1: the file is larger than 1 MB. Move it out of the records, if it is none, or give fewer rows.",
        ),
    ],
)
def test_a_file_that_is_not_utf_8_or_too_large_is_told(messages, content, message):
    assert messages(content) == [f"parts/part.yaml:{message}"]


def test_a_byte_order_mark_and_a_large_remark_are_accepted(messages):
    assert messages({"a.yaml": "\ufeff" + PART, "b.yaml": f"{part('TB3A', 'X')}# {'x' * 900_000}\n"}) == []


@pytest.mark.parametrize("name", ["part.yml", "part.YAML", "part.YML"])
def test_a_file_that_is_nearly_named_as_a_record_is_a_warning(records, name):
    (problem,) = records({name: PART}).problems
    assert (str(problem), problem.severity) == (
        f"parts/{name}:1: is not read: the name of a record ends in .yaml. Rename the file.",
        "warning",
    )


@pytest.mark.parametrize("name", ["part.json", ".part.yaml", ".git/part.yaml", "part.yaml~", "README.md"])
def test_other_and_hidden_files_are_left_alone(records, name):
    catalog = records({name: "{"})
    assert (catalog.parts, catalog.problems) == ((), ())


def test_what_cannot_be_printed_in_a_file_name_is_spelled_out(messages):
    name = os.fsdecode(b"a\nb\x1b[31m\xff.yaml")
    assert messages({name: "[]\n"}) == [f"parts/a\\nb\\x1b[31m\\udcff.yaml:1: {NO_FIELDS}"]


def test_a_folder_that_is_not_there_is_told(tmp_path):
    (problem,) = read_catalog(tmp_path / "nowhere").problems
    assert problem.message == "there is no such folder. Name the folder of the records with --records."


@pytest.mark.parametrize("made", ["record", "csv", "folder", "document"])
def test_what_the_system_refuses_to_read_is_told(records, monkeypatch, made):
    # Permissions do not stop root, so the refusal is made here.
    def refuse(path, *_, **__):
        raise PermissionError(13, "Permission denied", str(path))

    files = {"part.yaml": WITH_CSV, "table.csv": CSV, "sub/x.txt": "x"}
    name = {
        "record": "parts/part.yaml",
        "csv": "parts/table.csv",
        "folder": "parts/sub",
        "document": "parts/sheet.pdf",
    }[made]
    if made == "document":
        files = {"part.yaml": part("revision: C", f"file: sheet.pdf, sha256: {'a' * 64}"), "sheet.pdf": "x"}
    records(files)
    read_bytes, scandir = Path.read_bytes, os.scandir
    monkeypatch.setattr(Path, "read_bytes", lambda path: refuse(path) if path == Path(name) else read_bytes(path))
    monkeypatch.setattr(os, "scandir", lambda path: refuse(path) if Path(path) == Path(name) else scandir(path))
    assert [str(p) for p in read_catalog(Path("parts")).problems] == [
        f"{name}:1: cannot be read: Permission denied. Check that it is there, and its permissions."
    ]


BESIDE = {
    "not there": ("t.csv", "there is no file t.csv beside the record. Check the name, or remove the field."),
    "a folder": ("sub", "there is no file sub beside the record. Check the name, or remove the field."),
    "the folder itself": (".", "there is no file . beside the record. Check the name, or remove the field."),
    "out of the folder": ("../../x.csv", f"../../x.csv {LEADS_OUT} Put the file beside the record."),
    "absolute": ("/etc/passwd", f"/etc/passwd {LEADS_OUT} Put the file beside the record."),
    "very long": ("a" * 5000, f"there is no file {'a' * 59}… beside the record. Check the name, or remove the field."),
    "empty": ("", "is empty. Write something, or remove the field."),
    "zero byte": ("a\\0b", '"a\\x00b" holds U+0000, which cannot be seen. Type the text anew.'),
    "link out": ("out.csv", f"out.csv {LEADS_OUT} Put the file beside the record."),
    "loop of links": ("loop.csv", "there is no file loop.csv beside the record. Check the name, or remove the field."),
}


@pytest.fixture
def outside(tmp_path):
    """A record, a table and a folder that lie beside the records folder, with links to them."""
    (tmp_path / "out").mkdir()
    (tmp_path / "out" / "part.yaml").write_text(PART)
    (tmp_path / "out" / "t.csv").write_text(CSV)
    (tmp_path / "parts" / "sub").mkdir(parents=True)
    (tmp_path / "parts" / "out.csv").symlink_to("../out/t.csv")
    (tmp_path / "parts" / "loop.csv").symlink_to("loop.csv")


@pytest.mark.parametrize(("name", "message"), BESIDE.values(), ids=BESIDE)
@pytest.mark.usefixtures("outside")
def test_the_file_of_a_table_lies_beside_its_record(messages, name, message):
    assert messages(f'{PART}r_t_table: {{file: "{name}"}}\n') == [f"parts/part.yaml:13: r_t_table.file: {message}"]


@pytest.mark.parametrize(("name", "message"), BESIDE.values(), ids=BESIDE)
@pytest.mark.usefixtures("outside")
def test_the_file_of_a_document_lies_beside_its_record(messages, name, message):
    assert messages(part("revision: C", f'file: "{name}"')) == [f"parts/part.yaml:10: documents[0].file: {message}"]


def test_a_document_has_the_hash_that_is_stated(messages):
    right, wrong = hashlib.sha256(b"x").hexdigest(), "0" * 64
    assert messages({"part.yaml": part("revision: C", f"file: x.pdf, sha256: {right}"), "x.pdf": "x"}) == []
    assert messages({"part.yaml": part("revision: C", f'file: x.pdf, sha256: "{wrong}"'), "x.pdf": "x"}) == [
        "parts/part.yaml:10: documents[0].sha256: is not that of the file beside the record. "
        "Was the document replaced? Then add its revision as a new entry."
    ]


LINKS = {
    "file out": ("a.yaml", "../out/part.yaml", [f"parts/a.yaml:1: {LEADS_OUT} Put the file itself here."]),
    "folder out": ("a", "../out", [f"parts/a:1: {LEADS_OUT} Put the file itself here."]),
    "loop": ("a.yaml", "a.yaml", [f"parts/a.yaml:1: {NO_FILE}"]),
    "to nothing": ("a.yaml", "nothing.yaml", [f"parts/a.yaml:1: {NO_FILE}"]),
    "folder loop": ("sub/up", "..", []),
    "other file out": ("sheet.pdf", "../out/t.csv", []),
    "folder inside": ("again", "sub", []),
}


@pytest.mark.parametrize(("name", "target", "expected"), LINKS.values(), ids=LINKS)
@pytest.mark.usefixtures("outside")
def test_a_link_is_followed_only_inside_the_records_folder(records, name, target, expected):
    Path("parts", name).symlink_to(target)
    catalog = records({"sub/part.yaml": PART})
    assert [str(problem) for problem in catalog.problems] == expected
    assert [record.source.below for record in catalog.parts] == ["sub/part.yaml"]


def test_a_link_to_another_record_is_a_second_record(messages, tmp_path):
    (tmp_path / "parts").mkdir()
    (tmp_path / "parts" / "b.yaml").symlink_to("part.yaml")
    assert messages(PART) == [
        "parts/part.yaml:1: part: Tarnbrook Ceramics TB3A-103F38 has a record already, parts/b.yaml. Keep one of the two."
    ]


def test_a_device_or_a_folder_named_like_a_record_is_not_opened(records, tmp_path):
    (tmp_path / "parts" / "folder.yaml").mkdir(parents=True)
    os.mkfifo(tmp_path / "parts" / "pipe.yaml")
    assert [str(p) for p in records({}).problems] == [f"parts/pipe.yaml:1: {NO_FILE}"]


def test_problems_of_several_files_come_in_the_order_of_files_and_lines(messages):
    files = {
        "b/part.yaml": part("form: chip", "form: x").replace("3435", "x"),
        "a.yaml": "",
        "position.yaml": POSITION.replace("limit_k: 1.0\n", ""),
        "c.yaml": WITH_CSV.replace("table.csv", "c.csv"),
        "c.csv": "t_c,r_ohm\n25,x\n0,y\n",
    }
    told = messages(files)
    places = [(message.split(":")[0], int(message.split(":")[1])) for message in told]
    assert places == sorted(places)
    assert [f"{file.removeprefix('parts/')}:{line}" for file, line in places] == [
        "a.yaml:1", "b/part.yaml:3", "b/part.yaml:6", "c.csv:2", "c.csv:3", "position.yaml:1"
    ]  # fmt: skip
    assert len(set(told)) == len(told)
