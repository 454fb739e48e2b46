"""Files of documents beside a record: found, and known by their SHA-256."""

import hashlib
from pathlib import Path

from factory import part

HASH = hashlib.sha256(b"x").hexdigest()


def test_a_file_without_its_hash_is_told_with_the_hash_to_add(records):
    (problem,) = records({"part.yaml": part("revision: C", "file: x.pdf"), "x.pdf": "x"}).problems
    assert (problem.rule, problem.severity) == ("hash-missing", "warning")
    assert str(problem) == (
        "parts/part.yaml:10: documents[0].sha256: is missing, so nobody would notice another file in its place. "
        f"Add sha256: {HASH}"
    )
    assert records({"part.yaml": part("revision: C", f"file: x.pdf, sha256: {HASH}")}).problems == ()


def test_a_record_knows_the_files_of_its_documents(records):
    files = {"a/part.yaml": part("revision: C", f"file: x.pdf, sha256: {HASH}"), "a/x.pdf": "x"}
    (record,) = records(files).parts
    assert [(name, file.path, file.sha256) for name, file in record.files.items()] == [
        ("x.pdf", Path("parts/a/x.pdf"), HASH)
    ]


def test_a_hash_without_a_file_is_not_looked_at(messages):
    assert messages(part("revision: C", f"sha256: {HASH}")) == []


def test_figures_of_a_document_are_fields_of_the_record(messages):
    assert messages(part("revision: C", "figures: [rated, b_values, limits]")) == []
    assert messages(part("revision: C", "figures: [rated, b_valus]")) == [
        'parts/part.yaml:10: documents[0].figures[1]: "b_valus" is none of rated, b_values, steinhart_hart, r_t_table, accuracy, '
        "limits, qualification. Did you mean b_values?"
    ]
