"""Opens reports in a real browser, on screens and on paper, in light and dark: browser.py [--keep FOLDER] FILE...

It asserts what can go wrong: something wider than the screen or the page, words too pale to read, anything fetched, any complaint of the
browser, pages that are missing or empty. With --keep the pictures and pages are left in a folder for a person to look at.
"""

import argparse
import base64
import io
import json
import pathlib
import sys
import tempfile
import unicodedata

import pypdf
from selenium import webdriver
from selenium.webdriver.chrome.service import Service

FLAGS = [
    "--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
    "--disable-component-update", "--disable-sync", "--hide-scrollbars",
]
SCREENS = {"phone": (360, 740), "tablet": (820, 1180), "laptop": (1366, 768)}
# Paper in inches, and what its margins (13 mm each) leave for the text, in CSS pixels of 1/96 inch.
PAPERS = {"a4": (8.27, 11.69, 695), "letter": (8.5, 11.0, 717)}
HEADINGS = [
    "Summary", "The data judged", "Findings", "Doubts", "Segments", "First run", "Not checked", "Sign-off", "Cautions",
    "Version and files read",
]
# WCAG 2.1, 1.4.3: the least contrast of text.
LEAST_CONTRAST = 4.5

# What stands outside the screen though nothing lets a person move it there.
OUTSIDE = """
const wide = document.documentElement.clientWidth;
const found = document.documentElement.scrollWidth > wide ? ["the page is " + document.documentElement.scrollWidth + " wide"] : [];
for (const element of document.querySelectorAll("h1, h2, h3, p, li, dt, dd, figcaption, caption, td, th, svg")) {
  if (arguments[0] && element.closest(".wide")) continue;
  const box = element.getBoundingClientRect();
  if (box.width > 0 && box.right > wide + 1) found.push(element.tagName + " ends at " + box.right + ": " + element.textContent.slice(0, 40));
}
return found;
"""

# Words in HTML and in drawings whose colour is too near to what is behind them.
PALE = """
const canvas = document.createElement("canvas").getContext("2d", { willReadFrequently: true });
const rgb = (colour) => { canvas.clearRect(0, 0, 1, 1); canvas.fillStyle = colour; canvas.fillRect(0, 0, 1, 1);
  return [...canvas.getImageData(0, 0, 1, 1).data]; };
const light = ([r, g, b]) => { const l = [r, g, b].map((c) => { c /= 255; return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4; });
  return 0.2126 * l[0] + 0.7152 * l[1] + 0.0722 * l[2]; };
const behind = (element) => { for (let at = element; at; at = at.parentElement) { const colour = rgb(getComputedStyle(at).backgroundColor);
  if (colour[3] > 0) return colour; } return [255, 255, 255, 255]; };
const found = [];
for (const element of document.querySelectorAll("body *")) {
  const own = [...element.childNodes].some((node) => node.nodeType === 3 && node.textContent.trim());
  if (!own || element.classList.contains("on")) continue;
  const style = getComputedStyle(element);
  const [a, b] = [light(rgb(element.namespaceURI.endsWith("svg") ? style.fill : style.color)), light(behind(element))];
  const contrast = (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05);
  if (contrast < arguments[0]) found.push(contrast.toFixed(1) + ": " + element.tagName + " " + element.textContent.slice(0, 40));
}
return found;
"""


class Browser:
    def __init__(self):
        self.profile = tempfile.TemporaryDirectory()
        options = webdriver.ChromeOptions()
        options.binary_location = "/usr/bin/chromium"
        for flag in [*FLAGS, f"--user-data-dir={self.profile.name}"]:
            options.add_argument(flag)
        options.set_capability("goog:loggingPrefs", {"browser": "ALL", "performance": "ALL"})
        self.driver = webdriver.Chrome(options=options, service=Service("/usr/bin/chromedriver"))
        # What the browser's own first page asks for is no report's.
        self.driver.get("about:blank")
        self.told()

    def __enter__(self):
        return self

    def __exit__(self, *_):
        self.driver.quit()
        self.profile.cleanup()

    def ask(self, command, **what):
        return self.driver.execute_cdp_cmd(command, what)

    def show(self, width, height, scheme, medium=""):
        self.ask("Emulation.setDeviceMetricsOverride", width=width, height=height, deviceScaleFactor=1, mobile=False)
        self.ask("Emulation.setEmulatedMedia", media=medium, features=[{"name": "prefers-color-scheme", "value": scheme}])

    def told(self):
        """Complaints of the browser, and what the page asked for."""
        found = [f"the browser says: {entry['message']}" for entry in self.driver.get_log("browser")]
        for entry in self.driver.get_log("performance"):
            message = json.loads(entry["message"])["message"]
            if message["method"] == "Network.requestWillBeSent":
                address = message["params"]["request"]["url"]
                if not address.startswith("file:///") or not address.split("#")[0].endswith(".html"):
                    found.append(f"it asks for {address}")
        return found


def complaints(browser, path, keep):
    browser.driver.get(path.resolve().as_uri())
    found = []
    backgrounds = {}
    for scheme in ["light", "dark"]:
        for name, (width, height) in SCREENS.items():
            browser.show(width, height, scheme)
            found += [f"{name}, {scheme}: {what}" for what in browser.driver.execute_script(OUTSIDE, True)]
            if keep:
                tall = browser.driver.execute_script("return document.documentElement.scrollHeight")
                for part, top in enumerate(range(0, tall, 1600)):
                    clip = {"x": 0, "y": top, "width": width, "height": min(1600, tall - top), "scale": 1}
                    shot = browser.ask("Page.captureScreenshot", clip=clip, captureBeyondViewport=True)["data"]
                    (keep / f"{path.stem}-{name}-{scheme}-{part + 1}.png").write_bytes(base64.b64decode(shot))
        found += [f"{scheme}: too pale, {what}" for what in browser.driver.execute_script(PALE, LEAST_CONTRAST)]
        backgrounds[scheme] = browser.driver.execute_script("return getComputedStyle(document.documentElement).backgroundColor")
    if backgrounds["light"] == backgrounds["dark"]:
        found.append("light and dark look alike")
    for name, (width, height, room) in PAPERS.items():
        # Somebody who works in the dark still prints on white.
        browser.show(room, 1000, "dark", "print")
        found += [f"{name}: {what}" for what in browser.driver.execute_script(OUTSIDE, False)]
        if browser.driver.execute_script("return getComputedStyle(document.documentElement).backgroundColor") != "rgb(255, 255, 255)":
            found.append(f"{name}: it prints on a dark page")
        printed = base64.b64decode(browser.ask("Page.printToPDF", paperWidth=width, paperHeight=height, printBackground=False)["data"])
        if keep:
            (keep / f"{path.stem}-{name}.pdf").write_bytes(printed)
        found += [f"{name}: {what}" for what in on_paper(printed, width, height)]
    return found + browser.told()


def on_paper(printed, width, height):
    pages = pypdf.PdfReader(io.BytesIO(printed)).pages
    # Letters that the font joins are told apart again.
    texts = [unicodedata.normalize("NFKC", page.extract_text()) for page in pages]
    found = []
    if not 4 <= len(pages) <= 40:
        found.append(f"{len(pages)} pages")
    for number, (page, text) in enumerate(zip(pages, texts), 1):
        if len(text) < 150:
            found.append(f"page {number} is nearly empty")
        last = [line.strip() for line in text.splitlines() if line.strip()][-1]
        if last in HEADINGS:
            found.append(f"\"{last}\" is left behind on page {number}")
        if f"{number} of {len(pages)}" not in text:
            found.append(f"page {number} does not say which it is")
        if abs(float(page.mediabox.width) - 72 * width) > 1 or abs(float(page.mediabox.height) - 72 * height) > 1:
            found.append(f"page {number} has another size")
    lines = {line.strip() for text in texts for line in text.splitlines()}
    found += [f"\"{heading}\" is missing" for heading in HEADINGS if heading not in lines]
    if not any(word in texts[0] for word in ["NOT READY", "READY TO SIGN"]):
        found.append("the first page does not give the verdict")
    return found


def spoilt(text):
    """A report with something of every kind that is to be found."""
    policy = text[text.index("<meta http-equiv"):]
    policy = policy[: policy.index(">") + 1]
    bad = "<p style='min-width: 3000px'>wide</p><p style='color: #999; background: #aaa'>pale</p><img src='https://127.0.0.1:9/x.png'>"
    return text.replace(policy, "").replace("<main>", f"<main>{bad}<script>console.error('loud')</script>").replace(">Cautions</h2>", "></h2>")


def main():
    arguments = argparse.ArgumentParser()
    arguments.add_argument("--keep", type=pathlib.Path)
    arguments.add_argument("reports", nargs="+", type=pathlib.Path)
    asked = arguments.parse_args()
    if asked.keep:
        asked.keep.mkdir(parents=True, exist_ok=True)
    bad = 0
    with Browser() as browser, tempfile.TemporaryDirectory() as folder:
        # What it is to find, it finds.
        broken = pathlib.Path(folder) / "spoilt.html"
        broken.write_text(spoilt(asked.reports[0].read_text(encoding="utf-8")), encoding="utf-8")
        found = "\n".join(complaints(browser, broken, None))
        for what in ["phone, light: P ends at", "too pale", "it asks for https:", "loud", "\"Cautions\" is missing", "a4: P ends at"]:
            assert what in found, f"{what} was not found in a spoilt report:\n{found}"
        for path in asked.reports:
            found = complaints(browser, path, asked.keep)
            for what in found:
                print(f"{path}: {what}")
            bad += bool(found)
    print(f"{len(asked.reports) - bad} passed, {bad} failed")
    return bad


if __name__ == "__main__":
    sys.exit(1 if main() else 0)
