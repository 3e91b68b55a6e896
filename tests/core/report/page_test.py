#!/usr/bin/env python3
# SPDX-License-Identifier: MIT
"""Opens pages of the invented study in a headless browser and reads them back.

    page_test.py SAMPLE_PAGE_PROGRAM [AXE_SCRIPT]

Ends with 0 when every check holds, 1 with the first that does not, 77 when there is no browser here.
"""
import json
import math
import pathlib
import shutil
import subprocess
import sys
import tempfile

try:
    from selenium import webdriver
    from selenium.webdriver.chrome.options import Options
    from selenium.webdriver.chrome.service import Service
except ImportError:
    print("no selenium here: skipped")
    sys.exit(77)

DRIVER = shutil.which("chromedriver")
FLAGS = ("--headless --no-sandbox --disable-gpu --disable-quic --no-first-run --disable-background-networking "
         "--disable-component-update --disable-sync --window-size=1250,1400").split()


class Browser:
    def __init__(self, scripts=True):
        self.profile = tempfile.mkdtemp(prefix="headband-page-")
        options = Options()
        for flag in FLAGS:
            options.add_argument(flag)
        options.add_argument("--user-data-dir=" + self.profile)
        if not scripts:
            options.add_experimental_option("prefs", {"profile.managed_default_content_settings.javascript": 2})
        options.set_capability("goog:loggingPrefs", {"browser": "ALL", "performance": "ALL"})
        self.driver = webdriver.Chrome(service=Service(DRIVER), options=options)

    def __enter__(self):
        return self

    def __exit__(self, *_):
        self.driver.quit()
        shutil.rmtree(self.profile, ignore_errors=True)

    def open(self, path):
        """Opens a page; returns the addresses it asked for beyond itself."""
        self.driver.get("about:blank")
        self.driver.get_log("performance")
        self.driver.get(path.as_uri())
        asked = []
        for entry in self.driver.get_log("performance"):
            message = json.loads(entry["message"])["message"]
            if message["method"] == "Network.requestWillBeSent" and message["params"]["documentURL"] == path.as_uri():
                asked.append(message["params"]["request"]["url"])
        return [url for url in asked if url != path.as_uri()]

    def run(self, script, *arguments):
        return self.driver.execute_script(script, *arguments)

    def complaints(self):
        return self.driver.get_log("browser")


def check(holds, what):
    if not holds:
        print("FAILED: " + what)
        sys.exit(1)


def same(a, b, tolerance):
    if a is None or b is None:
        return a is None and b is None
    return math.isclose(a, b, rel_tol=tolerance, abs_tol=1e-12)


READ = """
const found = {};
for (const f of document.querySelectorAll('figure.figure')) {
  const block = JSON.parse(f.querySelector('script.plot-data').textContent);
  found[f.id] = { block, x: Array.from(f.uplot.data[0]), y: f.uplot.data.slice(1).map((a) => Array.from(a)),
                  labels: f.uplot.series.slice(1).map((s) => s.label) };
}
return found;
"""


def check_series(browser, expected, family):
    figures = browser.run(READ)
    checked = 0
    for figure, curves in expected.items():
        check(figure in figures, f"figure {figure} is missing; there are {sorted(figures)}")
        data = figures[figure]
        block = data["block"]
        in_x, in_y = block["x"]["units"][family], block["y"]["units"][family]
        names = [curve["name"].replace("\u00a0", " ") for curve in block["curves"]]
        check([label.replace("\u00a0", " ") for label in data["labels"]] == names, f"{figure}: drawn {data['labels']}, written {names}")
        for name, points in curves.items():
            check(name in names, f"{figure}: no curve {name} among {names}")
            at = names.index(name)
            for x, y in points:
                rows = [i for i, value in enumerate(block["abscissa"]) if same(value, x, 1e-9)]
                check(len(rows) == 1, f"{figure}, {name}: x = {x} stands {len(rows)} times")
                row = rows[0]
                check(same(block["curves"][at]["y"][row], y, 1e-15), f"{figure}, {name}: {block['curves'][at]['y'][row]} for {y}")
                check(same(data["x"][row], x * in_x["scale"] + in_x["offset"], 1e-12), f"{figure}, {name}: drawn x")
                drawn = None if y is None else y * in_y["scale"] + in_y["offset"]
                check(same(data["y"][at][row], drawn, 1e-12), f"{figure}, {name}: drawn {data['y'][at][row]} for {drawn}")
                checked += 1
    return checked


def check_barriers(browser, axe, page):
    """No finding of axe-core on the page as it stands."""
    if not axe:
        return
    browser.run(axe)
    violations = browser.driver.execute_async_script(
        "axe.run(document, {}).then((r) => arguments[0](r.violations.map((v) => "
        "v.id + ': ' + v.nodes.map((n) => n.html.slice(0, 160) + ' ' + n.failureSummary).join(' | '))))")
    check(not violations, f"{page}: axe found {len(violations)}:\n" + "\n".join(violations))


def main():
    program = pathlib.Path(sys.argv[1]).resolve()
    axe = pathlib.Path(sys.argv[2]).read_text(encoding="utf-8") if len(sys.argv) > 2 else None
    if DRIVER is None:
        print("no chromedriver here: skipped")
        return 77
    with tempfile.TemporaryDirectory(prefix="headband-page-") as folder:
        folder = pathlib.Path(folder)
        subprocess.run([str(program), str(folder)], check=True)
        expected = json.loads((folder / "expected.json").read_text(encoding="utf-8"))

        with Browser() as browser:
            for page in ("band.html", "band-us.html", "surge.html", "flow.html", "hostile.html"):
                asked = browser.open(folder / page)
                check(not asked, f"{page} asked for {asked}")
                check(browser.run("return document.documentElement.dataset.ready") == "yes", f"{page} is not ready")
                check(browser.run("return document.querySelectorAll('figure.is-live canvas').length") ==
                      browser.run("return document.querySelectorAll('figure').length"), f"{page}: a plot is not drawn")
                complaints = browser.complaints()
                check(not complaints, f"{page}: {complaints}")
                wide = browser.run("return document.documentElement.scrollWidth - document.documentElement.clientWidth")
                check(wide <= 0, f"{page} is {wide} px wider than its window")
                check_barriers(browser, axe, page)

            # In the dark, and on a narrow screen.
            browser.driver.execute_cdp_cmd("Emulation.setEmulatedMedia",
                                           {"features": [{"name": "prefers-color-scheme", "value": "dark"}]})
            browser.open(folder / "band.html")
            paper = browser.run("return getComputedStyle(document.body).backgroundColor")
            check(max(int(part) for part in paper.strip("rgb()").split(",")) < 64, f"the dark page is {paper}")
            check_barriers(browser, axe, "band.html in the dark")
            browser.driver.execute_cdp_cmd("Emulation.setEmulatedMedia", {"features": []})
            browser.driver.execute_cdp_cmd("Emulation.setDeviceMetricsOverride",
                                           {"width": 390, "height": 800, "deviceScaleFactor": 2, "mobile": False})
            browser.open(folder / "band.html")
            wide = browser.run("return document.documentElement.scrollWidth - document.documentElement.clientWidth")
            check(wide <= 0, f"band.html is {wide} px wider than a narrow screen")
            browser.driver.execute_cdp_cmd("Emulation.clearDeviceMetricsOverride", {})

            browser.open(folder / "band.html")
            points = check_series(browser, expected, "si")
            check(points >= 5 * 25, f"only {points} points were compared")
            browser.run("document.getElementById('units-us').click()")
            check_series(browser, expected, "us")
            check(browser.run("const text = document.body.innerText.replaceAll('\u00a0', ' '); return text.includes('psi g') && !text.includes('bar g')"),
                  "the switch to US units leaves SI units on the page")

            # The reading line by keyboard, the switch of a curve, the zoom.
            browser.open(folder / "band.html")
            figure = "document.getElementById('history-pressure')"
            slider = browser.run(f"return {figure}.querySelector('input[type=range]')")
            slider.send_keys("\ue014" * 3)  # arrow right
            said = browser.run(f"return {figure}.querySelector('input[type=range]').getAttribute('aria-valuetext')")
            check("valve chamber" in said and "bar g" in said, f"the reading line says {said}")
            check(browser.run(f"return {figure}.uplot.cursor.idx") == 3, "three arrows do not reach the third step")
            browser.run(f"{figure}.querySelector('.curves input').click()")
            check(browser.run(f"return {figure}.uplot.series[1].show") is False, "the box does not hide its curve")
            browser.run(f"{figure}.querySelector('.reading button').click()")
            reach = browser.run(f"const s = {figure}.uplot.scales.x; return s.max - s.min")
            check(same(reach, 0.5 * 400 * 0.0194287, 1e-6), f"closer shows {reach} s")
            browser.run(f"{figure}.querySelectorAll('.reading button')[2].click()")
            whole = browser.run(f"const s = {figure}.uplot.scales.x; return s.max - s.min")
            check(same(whole, 400 * 0.0194287, 1e-9), f"whole shows {whole} s")

            # Bands over time stand behind the lines; the limits fit a window of 1100 px.
            heads = "document.getElementById('history-head')"
            names = browser.run(f"return [...{heads}.querySelectorAll('.curves label')].map((l) => l.firstChild.nextSibling.nextSibling.data)")
            check(names[0] == "valve chamber" and names[3] == "valve chamber, 2.5\u00a0%", f"the curves are called {names}")
            check(browser.run(f"return {heads}.uplot.bands.length") == 3, "three places, three bands over time")
            browser.driver.set_window_size(1100, 1400)
            wide = browser.run("const t = document.querySelector('#limits .scroll'); return [t.scrollWidth, t.clientWidth]")
            check(wide[0] <= wide[1] + 1, f"the table of limits is {wide[0]} px wide in a room of {wide[1]} px")
            browser.driver.set_window_size(1250, 1400)

            # A hostile title stays text.
            browser.open(folder / "hostile.html")
            hostile = "</script><script>alert(1)</script>"
            check(browser.run("return document.querySelector('h1').textContent") == hostile, "the title is not shown as text")
            check(browser.run("return document.querySelectorAll('script:not([type])').length") == 2, "a script came in from outside")
            check(browser.run("return document.querySelectorAll('img').length") == 0, "a picture came in from outside")
            check(browser.run("return document.querySelector('pre').textContent") ==
                  "</pre>" + hostile + "\n# --> <!-- " + hostile, "the case text is not verbatim")

            # Print: pictures instead of canvases, light colours.
            browser.open(folder / "band.html")
            browser.driver.execute_cdp_cmd("Emulation.setEmulatedMedia", {"media": "print"})
            check(browser.run("return Array.from(document.querySelectorAll('canvas')).every((c) => c.getClientRects().length === 0)"),
                  "a canvas would be printed")
            check(browser.run("return Array.from(document.querySelectorAll('.picture')).every((p) => p.getClientRects().length === 1)"),
                  "a picture would not be printed")
            browser.driver.execute_cdp_cmd("Emulation.setEmulatedMedia", {"media": ""})

        with Browser(scripts=False) as browser:
            check(not browser.open(folder / "band.html"), "a request without scripts")
            page = browser.driver.page_source
            check('data-ready="yes"' not in page, "scripts ran though they are off")
            pictures = browser.driver.find_elements("css selector", ".picture .si svg")
            check(len(pictures) >= 10 and all(p.is_displayed() for p in pictures), "pictures are not shown without scripts")
            check(not any(p.is_displayed() for p in browser.driver.find_elements("css selector", ".picture .us svg")),
                  "both families are shown at once")
            browser.driver.find_element("id", "units-us").click()
            check(all(p.is_displayed() for p in browser.driver.find_elements("css selector", ".picture .us svg")),
                  "the unit switch needs scripts")
    print(f"{points} points read back, all pages quiet")
    return 0


if __name__ == "__main__":
    sys.exit(main())
