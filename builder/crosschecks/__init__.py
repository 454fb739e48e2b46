"""Cross-checks: whether what a record states fits together."""

from builder.crosschecks.checked import CheckedCatalog, checked_catalog
from builder.crosschecks.rules import RULES, Rule

__all__ = ["RULES", "CheckedCatalog", "Rule", "checked_catalog"]
