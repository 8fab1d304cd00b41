"""The record in a browser: `python -m tests.browser [record.html]` looks at it at the width of a phone, a laptop and a sheet of A4.

Told, with exit status 1: a console message, a request for anything but the page, words past the edge of the page or cut off, words over
one another.  Needs `pip install playwright` and a Chromium (Debian's `chromium`); where they are not there it fails, it does not pass.
Pictures go to the directory named by --pictures.
"""

from __future__ import annotations

import argparse
import shutil
import sys
import tempfile
from itertools import product
from pathlib import Path
from typing import Any

from guys import read_scenario, record
from guys.studies.recording import record as solve

SCENARIO = Path(__file__).parent.parent / "scenarios" / "quarry-relay-mast.toml"
SIZES = {"phone": (390, 844), "laptop": (1280, 800), "A4": (794, 1123)}
FAULTS = """
() => {
  const faults = [], boxes = [];
  const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
  const scrolls = e => e.closest('.scroll, .drawing, pre');
  for (let node = walk.nextNode(); node; node = walk.nextNode()) {
    if (!node.textContent.trim() || !node.parentElement.checkVisibility()) continue;
    const range = document.createRange();
    range.selectNodeContents(node);
    for (const r of range.getClientRects()) {
      if (r.width < 1) continue;
      const words = node.textContent.trim().slice(0, 60), hold = scrolls(node.parentElement);
      const edge = hold ? hold.getBoundingClientRect().left + hold.scrollWidth : document.documentElement.clientWidth;
      if (r.right > edge + 1 || r.left < -1) faults.push(`past the edge: ${words}`);
      if (node.parentElement.tagName !== 'CODE') boxes.push([r.left, r.top, r.right, r.bottom, words]);
    }
  }
  boxes.sort((a, b) => a[1] - b[1]);
  for (let i = 0; i < boxes.length; i++)
    for (let j = i + 1; j < boxes.length && boxes[j][1] < boxes[i][3] - 3; j++) {
      const [a, b] = [boxes[i], boxes[j]];
      const wide = Math.min(a[2], b[2]) - Math.max(a[0], b[0]), high = Math.min(a[3], b[3]) - Math.max(a[1], b[1]);
      if (wide > 1.5 && high > 3) faults.push(`over one another: ${a[4]} | ${b[4]}`);
    }
  for (const e of document.querySelectorAll('*'))
    if (['hidden', 'clip'].includes(getComputedStyle(e).overflowX) && e.scrollWidth > e.clientWidth + 1 && !e.closest('svg'))
      faults.push(`cut off: ${e.tagName} ${e.textContent.trim().slice(0, 60)}`);
  if (document.documentElement.scrollWidth > document.documentElement.clientWidth) faults.push('the page scrolls sideways');
  return [...new Set(faults)];
}
"""


def faults_of(page_file: Path, pictures: Path | None) -> list[str]:
    """What is wrong with the page, in words."""
    from playwright.sync_api import sync_playwright

    found: list[str] = []
    with sync_playwright() as play:
        chromium = shutil.which("chromium") or shutil.which("chromium-browser")
        browser = play.chromium.launch(executable_path=chromium, args=["--no-sandbox"])
        for (name, (wide, high)), scheme in product(SIZES.items(), ("light", "dark")):
            page = browser.new_page(viewport={"width": wide, "height": high}, color_scheme=scheme)
            said = looked_at(page, page_file.resolve().as_uri())
            found += [f"{name}, {scheme}: {fault}" for fault in said]
            if pictures is not None:
                pictures.mkdir(parents=True, exist_ok=True)
                page.screenshot(path=str(pictures / f"record-{name}-{scheme}.png"), full_page=True)
            page.close()
        browser.close()
    return found


def looked_at(page: Any, address: str) -> list[str]:
    """What one window says and shows wrong."""
    said: list[str] = []
    page.on("console", lambda message: said.append(f"console: {message.text}"))
    page.on("pageerror", lambda error: said.append(str(error)))
    page.on("request", lambda request: request.url == address or said.append(f"asks for {request.url}"))
    page.goto(address)
    page.evaluate("document.querySelectorAll('details').forEach(d => d.open = true)")
    return [*said, *page.evaluate(FAULTS)]


def main() -> int:
    """Exit status 1 where something is wrong."""
    parser = argparse.ArgumentParser()
    parser.add_argument("page", nargs="?", type=Path)
    parser.add_argument("--pictures", type=Path)
    wanted = parser.parse_args()
    with tempfile.TemporaryDirectory() as directory:
        page = wanted.page
        if page is None:
            page = Path(directory) / "record.html"
            page.write_text(record.html(solve(read_scenario(str(SCENARIO)))), encoding="utf-8")
        found = faults_of(page, wanted.pictures)
    print("\n".join(found) or f"nothing wrong at {', '.join(SIZES)}")
    return 1 if found else 0


if __name__ == "__main__":
    sys.exit(main())
