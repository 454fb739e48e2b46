"""The reference that Beadroll's speed is measured against: MkDocs with Material and its search, alone.

As many Markdown pages as asked, outside the nav, each with a table of 20 rows, a table of 165 rows of five columns,
three images and 150 words.
"""

from __future__ import annotations

import argparse
import math
from collections.abc import Iterable, Sequence
from pathlib import Path
from random import Random

import numpy as np

CONFIG = """\
site_name: Reference
site_url: https://bench.example.com/
use_directory_urls: false
theme: {name: material, font: false}
markdown_extensions: [tables]
plugins: [search]
nav: [index.md]
not_in_nav: /parts/
"""
IMAGE = """\
<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 320 200"><path d="M10 10V190H310" fill="none" stroke="#000"/>\
<path d="{path}" fill="none" stroke="#1f4e5f"/></svg>
"""
SUMMARY_FIELDS = (
    "maker",
    "description",
    "body",
    "size code",
    "rated resistance",
    "rated temperature",
    "tolerance",
    "B25/50",
    "B25/85",
    "B25/100",
    "operating range",
    "largest power",
    "dissipation factor",
    "time constant",
    "medium",
    "qualification",
    "lifecycle",
    "document",
    "revision",
    "standing",
)
VOCABULARY = (
    "resistance temperature table part maker position board range limit error curve band tolerance review lot sensor "
    "circuit divider firmware reading alternate revision document measured stated printed falls rises holds within "
    "outside between every after before against because where which the a of and to in is for with from at on"
)
TEXT_WORDS = 150
SENTENCE_WORDS = 15


def table(header: Sequence[str], rows: Iterable[Sequence[str]]) -> str:
    """A pipe table."""
    lines = [header, ["---"] * len(header), *rows]
    return "".join(f"| {' | '.join(cells)} |\n" for cells in lines)


def curve_rows(random: Random) -> list[list[str]]:
    """165 rows of temperature, resistance in kΩ, its two limits and its temperature coefficient, as data sheets print them."""
    b_k = random.uniform(3200, 4600)
    t_c = np.arange(-40.0, 125.0)
    t_k = t_c + 273.15
    r_kohm = 10 ** random.uniform(0, 2.5) * np.exp(b_k * (1 / t_k - 1 / 298.15))
    columns = np.stack([t_c, r_kohm, 0.98 * r_kohm, 1.02 * r_kohm, -100 * b_k / t_k**2], axis=1).tolist()
    return [[f"{t:.0f}", f"{r:.5g}", f"{low:.5g}", f"{high:.5g}", f"{alpha:.2f}"] for t, r, low, high, alpha in columns]


def sentences(random: Random) -> str:
    """A paragraph of 150 words."""
    words = random.choices(VOCABULARY.split(), k=TEXT_WORDS)
    starts = range(0, TEXT_WORDS, SENTENCE_WORDS)
    return " ".join(" ".join(words[i : i + SENTENCE_WORDS]).capitalize() + "." for i in starts) + "\n"


def page_text(seed: int, index: int) -> str:
    """One part's page."""
    random = Random(f"{seed}/page/{index}")
    summary = [[field, f"stated as {random.randint(1, 9999)}"] for field in SUMMARY_FIELDS]
    images = [f"![Figure {n}](../images/figure-{n}.svg)\n" for n in (1, 2, 3)]
    curve = table(["°C", "kΩ", "min kΩ", "max kΩ", "%/K"], curve_rows(random))
    return "\n".join([f"# Part {index:05d}\n", table(["field", "value"], summary), sentences(random), *images, curve])


def image(n: int) -> str:
    """A small falling line; the same three serve all pages, so that the reference is not slowed by copying."""
    points = " ".join(f"{x},{190 - 180 * math.exp(-n * x / 200):.1f}" for x in range(10, 311, 4))
    return IMAGE.format(path=f"M{points}")


def make_reference(folder: Path, *, pages: int, seed: int) -> None:
    """Write the reference's mkdocs.yml and its docs."""
    for name in ("images", "parts"):
        (folder / "docs" / name).mkdir(parents=True)
    (folder / "mkdocs.yml").write_text(CONFIG, "utf-8")
    (folder / "docs" / "index.md").write_text("# Reference\n", "utf-8")
    for n in (1, 2, 3):
        (folder / "docs" / "images" / f"figure-{n}.svg").write_text(image(n), "utf-8")
    for index in range(pages):
        (folder / "docs" / "parts" / f"part-{index:05d}.md").write_text(page_text(seed, index), "utf-8")


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("folder", type=Path, metavar="OUT", help="a folder without docs")
    parser.add_argument("--pages", type=int, default=1000)
    parser.add_argument("--seed", type=int, default=1)
    chosen = parser.parse_args()
    if (chosen.folder / "docs").exists():
        parser.error(f"{chosen.folder} has docs already. Name another folder.")
    make_reference(chosen.folder, pages=chosen.pages, seed=chosen.seed)


if __name__ == "__main__":
    main()
