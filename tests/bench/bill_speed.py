"""How long `bom` takes over a bill of 10,000 lines, as CSV and as XLSX, beside a catalog of 1,000 parts."""

from __future__ import annotations

import csv
import io
import random
import tempfile
import time
from pathlib import Path

import openpyxl
from make_catalog import make_catalog

from builder.bills import boards, judgement, read_bill
from builder.records import read_catalog

LINES, PARTS, ROUNDS = 10_000, 1_000, 5
HEADINGS = ("Reference", "Quantity", "Manufacturer", "Manufacturer part number", "Own number", "Description")


def bill_rows(numbers: list[str]) -> list[tuple[object, ...]]:
    """A bill where one line in ten is a known part, one a known number with a slip, and the others are neither."""
    chance, rows = random.Random(1), [HEADINGS]
    for line in range(LINES):
        number = chance.choice(numbers)
        at = chance.randrange(len(number))
        shown = {0: number, 1: f"{number[:at]}7{number[at + 1 :]}"}.get(
            line % 10, f"RC-{chance.randrange(10**6):06d}-{line}"
        )
        rows.append((f"X{2 * line}, X{2 * line + 1}", 2, "Brackwater", shown, f"HS-{20000 + line}", "10 kΩ ±1 %, 0603"))
    return rows


def as_csv(rows: list[tuple[object, ...]]) -> bytes:
    out = io.StringIO()
    csv.writer(out).writerows(rows)
    return out.getvalue().encode()


def as_xlsx(rows: list[tuple[object, ...]]) -> bytes:
    book, out = openpyxl.Workbook(write_only=True), io.BytesIO()
    sheet = book.create_sheet("Bill")
    for row in rows:
        sheet.append(row)
    book.save(out)
    return out.getvalue()


def main() -> None:
    with tempfile.TemporaryDirectory() as folder:
        make_catalog(Path(folder), parts=PARTS, seed=1, curves=("b-value",), positions=20)
        catalog = read_catalog(Path(folder))
    rows = bill_rows([record.part.part for record in catalog.parts])
    print("| bill | reading, CPU s | judging, CPU s | findings |\n| --- | ---: | ---: | ---: |")
    for name, data in (("CSV", as_csv(rows)), ("XLSX", as_xlsx(rows))):
        times_s = []
        for _ in range(ROUNDS):
            start_s = time.process_time()
            bill = read_bill(data, name=name)
            read_s = time.process_time()
            found = judgement(bill, catalog, boards(catalog)[0]).findings
            times_s.append((read_s - start_s, time.process_time() - read_s))
        reading_s, judging_s = map(min, zip(*times_s, strict=True))
        print(f"| {name} | {reading_s:.2f} | {judging_s:.2f} | {len(found)} |")


if __name__ == "__main__":
    main()
