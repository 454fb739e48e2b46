"""How soon the Parts page of a site answers in Chromium: prints JSON, times in milliseconds."""

from __future__ import annotations

import json
import shutil
import statistics
import sys
from pathlib import Path

from playwright.sync_api import sync_playwright

TYPED = ("1", "10", "10k", "10k ", "10k 0", "10k 06", "10k 0603", "0603", "00", "")
ANSWER = """text => {
  const field = document.querySelector('.bd-parts-find input');
  const start = performance.now();
  field.value = text;
  field.dispatchEvent(new Event('input', {bubbles: true}));
  document.body.getBoundingClientRect();
  return performance.now() - start;
}"""


def main() -> None:
    page_file = Path(sys.argv[1], "parts", "index.html").resolve()
    arguments = ("--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=shutil.which("chromium"), args=list(arguments))
        page = browser.new_page()
        page.goto(page_file.as_uri())
        page.wait_for_selector(".bd-parts-find input")
        ready_ms = page.evaluate("performance.now()")
        times_ms = [page.evaluate(ANSWER, text) for text in TYPED * 3]
        browser.close()
    print(json.dumps({"ready_ms": ready_ms, "median_ms": statistics.median(times_ms), "longest_ms": max(times_ms)}))


if __name__ == "__main__":
    main()
