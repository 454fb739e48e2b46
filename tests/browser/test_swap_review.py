"""Reviews of swaps on paper: two sheets each, the decision on the second."""

from __future__ import annotations

import re
from pathlib import Path

from playwright.sync_api import Browser

MARGIN = "12mm"


def test_every_review_of_the_demo_prints_on_two_sheets(demo_site: Path, chromium: Browser) -> None:
    reviews = sorted(demo_site.glob("positions/*/*/*.html"))
    assert len(reviews) > 10
    page = chromium.new_page()
    for review in reviews:
        page.goto(review.as_uri())
        margins = {"top": MARGIN, "right": MARGIN, "bottom": MARGIN, "left": MARGIN}
        printed = page.pdf(format="A4", margin=margins)
        sheets = len(re.findall(rb"/Type\s*/Page\b", printed))
        assert sheets == 2, (review, sheets)
    page.close()
