"""Records of parts and positions whose figures are clean, with ledgers as a test wants them."""

from __future__ import annotations

DOCUMENTS = "[{title: data sheet, revision: B, dated: 2025-01-07}, {title: data sheet, revision: C, dated: 2026-02-03}]"
ON_C = "document: {title: data sheet, revision: C}"
APPROVED = f"state: approved, on: 2026-03-02, by: us, because: tested, {ON_C}"
WITHDRAWN = "state: withdrawn, on: 2026-04-01, by: us, because: no longer made"


def standing(*entries: str) -> str:
    """A standing whose first entry stands on the line below, the others one a line."""
    return "standing:\n" + "".join(f"  - {{{entry}}}\n" for entry in entries)


def part(*entries: str, number: str = "PX-1", documents: str = DOCUMENTS, more: str = "") -> str:
    """A part's record; its first entry stands on line 10."""
    return (
        f"part: {number}\nmaker: Pellworm\nbody: {{form: leaded}}\nrated: {{resistance_ohm: 10k, tolerance_pct: 1}}\n"
        "b_values:\n  - {between_c: [25, 85], b_k: 3977, tolerance_pct: 1}\nlimits: {operating_c: [0, 85]}\n"
        f"documents: {documents}\n{standing(*entries)}{more}"
        if entries
        else f"{part('', number=number, documents=documents).partition('standing')[0]}{more}"
    )


def position(*alternates: str, fitted: str = "PX-1") -> str:
    """A position's record; `alternates` are lines below that field, the first of them on line 11."""
    listed = "alternates:\n" + "".join(f"  {line}\n" for line in alternates) if alternates else ""
    return (
        "position: box/RT1\nboard: Box\npurpose: air\nrange_c: [0, 60]\nlimit_k: 2\n"
        "circuit: {thermistor: low side, fixed: {resistance_ohm: 10k}, supply_v: 3.3}\nadc: {bits: 12}\n"
        f"firmware: {{method: curve}}\nfitted: {fitted}\n{listed}"
    )


def alternate(number: str, *entries: str) -> list[str]:
    """The lines of one alternate; its first entry stands two lines below its number."""
    return [f"- part: {number}", "  standing:", *(f"    - {{{entry}}}" for entry in entries)]
