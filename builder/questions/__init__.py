"""A new record asked for field by field: the models ask, check each answer and word what is wrong with it."""

from builder.questions.interview import Interview
from builder.questions.new_files import NotWritten, record_path, write_new
from builder.questions.refusals import refusals
from builder.questions.table_draft import table_draft
from builder.questions.trial import proven_files

__all__ = ["Interview", "NotWritten", "proven_files", "record_path", "refusals", "table_draft", "write_new"]
