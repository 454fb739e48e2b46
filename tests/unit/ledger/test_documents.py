"""Which revision of a document is the newest, and what rests on which."""

import pytest
from ledger_records import catalog, entry, part, place

from builder.ledger import entries, figure_documents, named_document, replaced_since, replacement
from builder.records.part import DocumentRevision


def sheet(revision, dated=None, title="data sheet", **more):
    return {"title": title, "revision": revision, **({"dated": dated} if dated else {}), **more}


def newest(*documents):
    found = part(documents=list(documents)).part
    newer = replacement(found, found.documents[0])
    return newer.revision if newer else found.documents[0].revision


@pytest.mark.parametrize(
    ("documents", "revision"),
    [
        ([sheet("B", "2025-01-07"), sheet("C", "2026-02-03")], "C"),
        ([sheet("C", "2026-02-03"), sheet("B", "2025-01-07")], "C"),
        ([sheet("B", "2026-02-03"), sheet("C", "2026-02-03")], "C"),
        ([sheet("C", "2026-02-03"), sheet("B")], "B"),
        ([sheet("B"), sheet("C")], "C"),
        ([sheet("B"), sheet("9", title="notice"), sheet("C", title="Data Sheet")], "C"),
        ([sheet("B"), sheet("C", title="notice")], "B"),
    ],
)
def test_the_newest_revision_of_a_title_is_the_one_of_the_latest_date_else_the_last(documents, revision):
    assert newest(*documents) == revision


def test_a_revision_is_found_by_its_title_and_letter_in_any_case():
    own = part(documents=[sheet("B"), sheet("C"), sheet(None, title="letter")]).part
    for title, revision, place_in_list in (("Data sheet", "c", 1), ("letter", None, 2)):
        assert named_document(own, DocumentRevision(title=title, revision=revision)) is own.documents[place_in_list]
    for title, revision in (("data sheet", "D"), ("sheet", "C"), ("data sheet", None)):
        assert named_document(own, DocumentRevision(title=title, revision=revision)) is None


def on(revision):
    return {"title": "data sheet", "revision": revision}


@pytest.mark.parametrize(
    ("standing", "revisions"),
    [
        ([entry("approved", document=on("B"))], ["C"]),
        ([entry("restricted", document=on("b"))], ["C"]),
        ([entry("approved", document=on("C"))], [None]),
        ([entry("approved", document=on("A"))], [None]),
        ([entry("approved")], [None]),
        ([entry("proposed", document=on("B"))], [None]),
        ([entry("withdrawn", document=on("B"))], [None]),
        ([entry("approved", document=on("B")), entry("approved", document=on("C"))], [None, None]),
    ],
)
def test_an_approval_that_holds_rests_on_a_replaced_revision_until_an_entry_names_the_newest(standing, revisions):
    documents = [sheet("B"), sheet("C")]
    own = part("PX-1", *standing, documents=documents)
    assert [getattr(replaced_since(e), "revision", None) for e in entries(catalog(own))] == revisions
    at = catalog(part("PX-1", documents=documents), place(PX_1=standing))
    assert [getattr(replaced_since(e), "revision", None) for e in entries(at)] == revisions


def read_from(*documents, **figures):
    own = part(documents=list(documents), **figures).part
    return {name: (d.title, d.revision) for name, d in figure_documents(own).items()}


def test_figures_rest_on_the_newest_revision_of_the_first_document():
    first = ("data sheet", "C")
    assert read_from(sheet("B"), sheet("C"), sheet("2", title="table")) == {"rated": first, "b_values": first}


def test_figures_that_a_document_names_rest_on_that_one():
    table = sheet("2", title="table", figures=["r_t_table", "limits"])
    found = read_from(sheet("C"), table, limits={"max_power_mw": 50}, r_t_table={"rows": [[0, 3], [25, 1]]})
    assert found == dict.fromkeys(("rated", "b_values"), ("data sheet", "C")) | dict.fromkeys(
        ("r_t_table", "limits"), ("table", "2")
    )


def test_figures_that_were_not_read_again_rest_on_the_revision_that_was_replaced():
    found = read_from(sheet("B", figures=["rated", "b_values"]), sheet("C", figures=["rated"]))
    assert found == {"rated": ("data sheet", "C"), "b_values": ("data sheet", "B")}


def test_without_documents_nothing_is_known():
    assert read_from() == {}


def test_what_the_record_does_not_state_rests_on_nothing():
    everything = ["rated", "b_values", "steinhart_hart", "r_t_table", "accuracy", "limits", "qualification"]
    assert set(read_from(sheet("C", figures=everything))) == {"rated", "b_values"}
