"""Misprints in R–T tables: rows that do not belong, and the slips that explain them."""

from builder.misprints.examination import findings
from builder.misprints.table import Finding, Rated, Slip, Table

__all__ = ["Finding", "Rated", "Slip", "Table", "findings"]
