"""The page in a real browser: what is read out, units, keyboard, contrast, and that nothing is asked for."""

from __future__ import annotations

import json
import shutil
from collections.abc import Iterator
from fractions import Fraction
from pathlib import Path

import numpy as np
import pytest
from selenium import webdriver
from selenium.webdriver.chrome.service import Service
from selenium.webdriver.common.action_chains import ActionChains
from selenium.webdriver.common.by import By
from selenium.webdriver.common.keys import Keys
from selenium.webdriver.remote.webelement import WebElement
from selenium.webdriver.support.ui import Select
from slopewell.reports.page import Sheet, page
from slopewell.reports.view import number_text
from slopewell.sheets import table_sheet
from slopewell.table import Table
from slopewell.units import ratio, unit_system

DRIVER, BROWSER = shutil.which("chromedriver"), shutil.which("chromium") or shutil.which("google-chrome")
pytestmark = pytest.mark.skipif(
    not (DRIVER and BROWSER),
    reason="there is no Chromium with its driver here (packages chromium, chromium-driver)",
)
FLAGS = (
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-dev-shm-usage",
)
LEAST_CONTRAST = 4.5
"""For text of ordinary size: W3C, Web Content Accessibility Guidelines 2.2, success criterion 1.4.3."""
CONTRASTS = """
const channel = (c) => (c /= 255) <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
const light = (c) => 0.2126 * channel(c[0]) + 0.7152 * channel(c[1]) + 0.0722 * channel(c[2]);
const colour = (text) => text.startsWith("rgb") ? text.match(/[\\d.]+/g).map(Number) : null;
const found = [];
for (const node of document.querySelectorAll("body *")) {
  const own = [...node.childNodes].some((n) => n.nodeType === 3 && n.textContent.trim());
  if (!own || !node.offsetParent || node.closest("script")) continue;
  let behind = node;
  let back = null;
  while (behind && !back) {
    const c = colour(getComputedStyle(behind).backgroundColor);
    if (c && (c.length === 3 || c[3] === 1)) back = c;
    behind = behind.parentElement;
  }
  const front = colour(getComputedStyle(node).color);
  const [a, b] = [light(front), light(back)].sort((x, y) => y - x);
  found.push([(a + 0.05) / (b + 0.05), node.className + ": " + node.textContent.slice(0, 40)]);
}
return found;
"""


PANELS = """
const panels = [...document.querySelectorAll(".plot")];
return panels.map((panel) => [panel.offsetHeight, panel.querySelector("svg").clientHeight]);
"""


@pytest.fixture(scope="module")
def browser(tmp_path_factory: pytest.TempPathFactory) -> Iterator[webdriver.Chrome]:
    options = webdriver.ChromeOptions()
    options.binary_location = str(BROWSER)
    for flag in (*FLAGS, f"--user-data-dir={tmp_path_factory.mktemp('browser')}", "--window-size=1200,1000"):
        options.add_argument(flag)
    options.set_capability("goog:loggingPrefs", {"browser": "ALL", "performance": "ALL"})
    driver = webdriver.Chrome(options=options, service=Service(executable_path=DRIVER))
    yield driver
    driver.quit()


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("pages")


@pytest.fixture
def of_document(browser: webdriver.Chrome, folder: Path, sheet: Sheet) -> webdriver.Chrome:
    return opened(browser, folder / "document.html", sheet)


@pytest.fixture
def of_table(browser: webdriver.Chrome, folder: Path, table: Table) -> webdriver.Chrome:
    return opened(browser, folder / "table.html", table_sheet(table, "beads.json", {}))


def opened(browser: webdriver.Chrome, path: Path, shown: Sheet) -> webdriver.Chrome:
    path.write_text(page(shown), encoding="utf-8")
    browser.get_log("browser")
    browser.get_log("performance")
    browser.get(path.as_uri())
    return browser


def slider(browser: webdriver.Chrome) -> WebElement:
    return browser.find_element(By.CSS_SELECTOR, "#pair-0 input[type=range]")


def readout(browser: webdriver.Chrome) -> list[str]:
    return [bold.text for bold in browser.find_elements(By.CSS_SELECTOR, "#pair-0 output b")]


def test_the_page_asks_for_nothing_and_logs_nothing(of_document: webdriver.Chrome) -> None:
    slider(of_document).send_keys(Keys.ARROW_RIGHT)
    assert of_document.get_log("browser") == []
    messages = [json.loads(entry["message"])["message"] for entry in of_document.get_log("performance")]
    sent = [m["params"] for m in messages if m["method"] == "Network.requestWillBeSent"]
    page_itself = of_document.current_url
    asked = {each["request"]["url"] for each in sent if each["documentURL"] == page_itself}
    assert {url for url in asked if not url.startswith("data:")} == {page_itself}


def test_arrow_keys_read_out_the_rows_of_the_table(of_table: webdriver.Chrome, table: Table) -> None:
    rows = table.interactions[0]
    place = slider(of_table)
    place.send_keys(Keys.HOME)
    for _ in range(3):
        place.send_keys(Keys.ARROW_RIGHT)
    separation, energy, force = readout(of_table)
    row = int(np.flatnonzero([f"{number_text(r)} nm" == separation for r in rows.separation])[0])
    assert energy == f"{number_text(rows.energy[row])} kJ/mol"
    assert force == f"{number_text(rows.force[row])} kJ/mol/nm (repulsion)"
    place.send_keys(Keys.ARROW_RIGHT)
    assert readout(of_table)[0] == f"{number_text(rows.separation[row + 1])} nm"


def test_what_is_read_out_is_said_to_screen_readers(of_table: webdriver.Chrome) -> None:
    place = slider(of_table)
    place.send_keys(Keys.END)
    separation, energy, force = readout(of_table)
    assert place.get_attribute("aria-valuetext") == f"separation {separation}, energy {energy}, force {force}"


def test_pointing_reads_out_the_nearest_row(of_table: webdriver.Chrome, table: Table) -> None:
    plot = of_table.find_element(By.CSS_SELECTOR, "#pair-0 .plot")
    ActionChains(of_table).move_to_element(plot).perform()
    shown = table_sheet(table, "", {}).drawings[0]
    middle = sum(shown.view.separation) / 2
    step = table.interactions[0].separation[1] - table.interactions[0].separation[0]
    assert float(readout(of_table)[0].split()[0]) == pytest.approx(middle, abs=2 * step)
    assert of_table.find_element(By.CSS_SELECTOR, "#pair-0 .energy .dot").is_displayed()


@pytest.mark.parametrize(
    ("choice", "energy", "length"),
    [(1, "eV", "angstrom"), (2, "kcal/mol", "angstrom"), (3, "hartree", "bohr")],
)
def test_units_are_switched_by_the_exact_factors(
    choice: int, energy: str, length: str, of_document: webdriver.Chrome, sheet: Sheet
) -> None:
    own, target = sheet.drawings[0].units, unit_system(energy, length)
    Select(of_document.find_element(By.ID, "units")).select_by_index(choice)
    for shown in of_document.find_elements(By.CSS_SELECTOR, "#pair-0 .facts data.quantity"):
        powers = [int(power) for power in shown.get_attribute("data-powers").split(",")]
        factor: Fraction = ratio(own.energy, target.energy) ** powers[0] * ratio(own.length, target.length) ** powers[1]
        value = Fraction(shown.get_attribute("value")) * factor
        digits = int(shown.get_attribute("data-digits") or 6)
        assert shown.text.split()[0] == number_text(float(value), digits)
    ticks = of_document.find_elements(By.CSS_SELECTOR, "#pair-0 .tick")
    assert {tick.get_attribute("class") for tick in ticks if tick.is_displayed()} == {f"tick u{choice}"}


def test_what_was_read_out_changes_its_unit_too(of_table: webdriver.Chrome) -> None:
    slider(of_table).send_keys(Keys.HOME)
    Select(of_table.find_element(By.ID, "units")).select_by_index(1)
    assert [text.split()[1] for text in readout(of_table)] == ["Å", "eV", "eV/Å"]


def test_the_keyboard_reaches_units_index_curves_and_findings(of_document: webdriver.Chrome) -> None:
    reached = []
    for _ in range(40):
        ActionChains(of_document).send_keys(Keys.TAB).perform()
        focus = of_document.switch_to.active_element
        reached.append(focus.get_attribute("id") or focus.get_attribute("href") or focus.tag_name)
    assert "units" in reached
    assert "pair-0-place" in reached
    assert any(each.endswith("#pair-1") for each in reached)
    assert any("finding" in each for each in reached)


@pytest.mark.parametrize("scheme", ["light", "dark"])
def test_text_stands_out_from_its_background(scheme: str, of_document: webdriver.Chrome) -> None:
    emulated = {"features": [{"name": "prefers-color-scheme", "value": scheme}]}
    of_document.execute_cdp_cmd("Emulation.setEmulatedMedia", emulated)
    found = of_document.execute_script(CONTRASTS)
    of_document.execute_cdp_cmd("Emulation.setEmulatedMedia", {"features": []})
    assert len(found) > 50
    assert [each for each in found if each[0] < LEAST_CONTRAST] == []


def test_a_phone_has_no_sideways_scrolling(of_document: webdriver.Chrome) -> None:
    size = {"width": 360, "height": 780, "deviceScaleFactor": 1, "mobile": True}
    of_document.execute_cdp_cmd("Emulation.setDeviceMetricsOverride", size)
    widths = of_document.execute_script("return [document.documentElement.scrollWidth, window.innerWidth]")
    of_document.execute_cdp_cmd("Emulation.clearDeviceMetricsOverride", {})
    assert widths[0] <= widths[1] == 360


def test_curves_are_inside_their_panels_on_paper(of_document: webdriver.Chrome) -> None:
    of_document.execute_cdp_cmd("Emulation.setEmulatedMedia", {"media": "print"})
    heights = of_document.execute_script(PANELS)
    hidden = not of_document.find_element(By.ID, "units").is_displayed()
    of_document.execute_cdp_cmd("Emulation.setEmulatedMedia", {"media": ""})
    assert hidden
    assert all(plot > 60 and abs(plot - drawn) <= 2 for plot, drawn in heights)
