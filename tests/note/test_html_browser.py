"""The note as HTML in headless Chromium, under axe-core's rules, and through the Nu HTML checker.

``.ci/run`` installs all three; ``CHROMIUM`` and ``VNU_JAR`` say where the browser and the checker are.
"""

from __future__ import annotations

import json
import os
import subprocess
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field, replace
from pathlib import Path
from typing import Any

import pytest

from symcirc.complaints import Source
from symcirc.note.build import build_note
from symcirc.note.html import html
from symcirc.note.mathml import ROOM
from symcirc.note.model import Equation
from symcirc.note.widths import width
from symcirc.sheet import read_sheet
from symcirc.transfer.form import ZERO, Sum
from tests.note.sample import SAMPLE, WIDE

pytestmark = pytest.mark.browser

EXAMPLES = Path(__file__).parents[2] / "examples"
#: As root, and without asking for anything outside.
ARGUMENTS = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--disable-background-networking",
    "--disable-sync",
]
WIDTHS, SCHEMES = (1280, 390), ("light", "dark")


@dataclass
class Opened:
    """A page, and what it said, asked for and showed on its own since it was opened."""

    page: Any
    unasked: list[str] = field(default_factory=list)


@pytest.fixture(scope="module")
def browser() -> Iterator[Any]:
    from playwright.sync_api import sync_playwright

    with sync_playwright() as playwright:
        chromium = playwright.chromium.launch(
            executable_path=os.environ.get("CHROMIUM", "/usr/bin/chromium"), args=ARGUMENTS
        )
        yield chromium
        chromium.close()


@pytest.fixture(scope="module")
def file(tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("note") / "note.html"
    path.write_text(html(SAMPLE), encoding="utf-8")
    return path


@pytest.fixture(scope="module", params=["sample", "hive_mask"])
def note(request: pytest.FixtureRequest, file: Path) -> Path:
    """The sample, and the note of an example with all its pictures."""
    if request.param == "sample":
        return file
    sheet = EXAMPLES / f"{request.param}.stage"
    path = file.with_name(f"{request.param}.html")
    read = read_sheet(Source(sheet.name, sheet.read_text(encoding="utf-8")))
    path.write_text(html(build_note(read, "2026-12-01")), encoding="utf-8")
    return path


@contextmanager
def opened(browser: Any, file: Path, wide: int = 1280, scheme: str = "light") -> Iterator[Opened]:
    context = browser.new_context(viewport={"width": wide, "height": 844}, color_scheme=scheme)
    one = Opened(context.new_page())
    one.page.on("console", lambda message: one.unasked.append(message.text))
    one.page.on("pageerror", lambda error: one.unasked.append(str(error)))
    one.page.on("dialog", lambda dialog: one.unasked.append(dialog.message))
    one.page.on("request", lambda request: one.unasked.append(request.url))
    one.page.goto(file.as_uri())
    assert one.unasked == [file.as_uri()]
    one.unasked.clear()
    yield one
    context.close()


def every_size() -> pytest.MarkDecorator:
    cases = [pytest.param(w, s, id=f"{w}-{s}") for w in WIDTHS for s in SCHEMES]
    return pytest.mark.parametrize(("wide", "scheme"), cases)


def becomes_true(page: Any, expression: str) -> bool:
    """Wait up to 5 s; by asking again, since the page's policy lets nothing run in it."""
    for _ in range(100):
        if page.evaluate(expression):
            return True
        page.wait_for_timeout(50)
    return False


def unfold(page: Any) -> None:
    page.evaluate("document.querySelectorAll('details').forEach(one => { one.open = true })")


@every_size()
def test_page_fits_its_window_shows_every_formula_and_says_nothing(
    browser: Any, note: Path, wide: int, scheme: str
) -> None:
    with opened(browser, note, wide, scheme) as one:
        unfold(one.page)
        root = "document.documentElement"
        assert one.page.evaluate(f"{root}.scrollWidth") == one.page.evaluate(f"{root}.clientWidth") == wide
        sizes = one.page.evaluate(
            "[...document.querySelectorAll('math')].map(one => { const box = one.getBoundingClientRect();"
            " return [box.width, box.height, parseFloat(getComputedStyle(one).fontSize)] })"
        )
        assert len(sizes) == note.read_text(encoding="utf-8").count("<math") > 15
        assert all(w > 0.3 * letter and h > 0.4 * letter for w, h, letter in sizes)
        assert one.unasked == []


def test_fractions_roots_and_indices_are_laid_out_as_mathematics(browser: Any, file: Path) -> None:
    with opened(browser, file) as one:
        box = "one => one.getBoundingClientRect()"
        above, below = one.page.locator("#eq-1 mfrac").first.locator("> *").all()
        assert above.evaluate(box)["bottom"] <= below.evaluate(box)["top"]
        base, index, exponent = one.page.locator("#eq-3 msubsup").first.locator("> *").all()
        assert index.evaluate(box)["left"] >= base.evaluate(box)["right"] - 1
        assert exponent.evaluate(box)["bottom"] < index.evaluate(box)["bottom"]
        root = one.page.locator("#eq-5 msqrt").first
        assert root.evaluate(box)["width"] > root.locator("> *").first.evaluate(box)["width"] + 4


@every_size()
def test_accessibility_rules_are_passed(browser: Any, note: Path, wide: int, scheme: str) -> None:
    from axe_playwright_python.sync_playwright import Axe

    with opened(browser, note, wide, scheme) as one:
        unfold(one.page)
        found = Axe().run(one.page).response
        passed = {rule["id"] for rule in found["passes"]}
        assert {"color-contrast", "landmark-one-main", "svg-img-alt", "bypass", "list"} <= passed
        assert wide > 390 or "scrollable-region-focusable" in passed
        violations = [(rule["id"], node["html"]) for rule in found["violations"] for node in rule["nodes"]]
        assert violations == []


@pytest.mark.parametrize("scheme", SCHEMES)
def test_scheme_sets_the_paper_and_the_lines_of_pictures(browser: Any, file: Path, scheme: str) -> None:
    with opened(browser, file, scheme=scheme) as one:
        paper = one.page.evaluate("getComputedStyle(document.body).backgroundColor")
        stroke = one.page.evaluate("getComputedStyle(document.querySelector('svg')).stroke")
        light, dark = "rgb(253, 253, 251)", "rgb(21, 23, 26)"
        assert (paper, stroke == "rgb(229, 227, 221)") == (
            (light, False) if scheme == "light" else (dark, True)
        )


def test_wide_equation_scrolls_in_its_own_box_with_the_keyboard(browser: Any, file: Path) -> None:
    with opened(browser, file, 390) as one:
        box = one.page.locator("#eq-2 .wide")
        assert box.evaluate("one => one.scrollWidth > one.clientWidth")
        box.focus()
        one.page.keyboard.press("ArrowRight")
        assert becomes_true(one.page, "document.querySelector('#eq-2 .wide').scrollLeft > 0")


def test_first_stop_of_the_keyboard_leads_to_the_note(browser: Any, file: Path) -> None:
    with opened(browser, file) as one:
        one.page.keyboard.press("Tab")
        assert one.page.evaluate("document.activeElement.className") == "skip"
        assert one.page.evaluate("document.activeElement.getBoundingClientRect().left") >= 0
        one.page.keyboard.press("Enter")
        assert becomes_true(one.page, "document.activeElement.id === 'note'")


def is_seen(page: Any, anchor: str) -> bool:
    return bool(
        page.evaluate(
            f"document.querySelector('#{anchor} math').checkVisibility({{contentVisibilityAuto: true}})"
        )
    )


def test_step_unfolds_with_the_keyboard_and_a_reference_unfolds_it(browser: Any, file: Path) -> None:
    with opened(browser, file) as one:
        assert not is_seen(one.page, "eq-7")
        one.page.locator("summary").nth(1).focus()
        one.page.keyboard.press("Enter")
        assert is_seen(one.page, "eq-8")
        one.page.locator("a[href='#eq-7']").first.click()
        assert becomes_true(one.page, "document.querySelector('#eq-7').closest('details').open")
        assert is_seen(one.page, "eq-7")


def test_box_shows_every_step_at_once(browser: Any, file: Path) -> None:
    with opened(browser, file) as one:
        one.page.locator(".all input").check()
        assert all(is_seen(one.page, anchor) for anchor in ("eq-7", "eq-8", "eq-9"))


@pytest.mark.parametrize("scheme", SCHEMES)
def test_on_paper_every_step_is_shown_and_nothing_is_cut(browser: Any, note: Path, scheme: str) -> None:
    a4_less_margins = round((210 - 2 * 18) / 25.4 * 96)
    with opened(browser, note, a4_less_margins, scheme) as one:
        one.page.emulate_media(media="print", color_scheme=scheme)
        steps = one.page.locator("details .equation").evaluate_all("all => all.map(one => one.id)")
        assert len(steps) >= 3
        assert all(is_seen(one.page, anchor) for anchor in steps)
        right = one.page.evaluate(
            "Math.max(...[...document.querySelectorAll('math, td, th, svg, pre span, p')]"
            ".map(one => one.getBoundingClientRect().right))"
        )
        assert right <= a4_less_margins + 1
        assert one.page.evaluate("getComputedStyle(document.body).color") == "rgb(27, 29, 31)"
        assert one.page.pdf(format="A4").startswith(b"%PDF")


def test_widths_of_formulas_are_estimated_to_an_eighth(browser: Any, file: Path) -> None:
    shown = [side for one in SAMPLE.blocks if isinstance(one, Equation) for side in (one.left, one.right)]
    forms = [Sum(WIDE.terms[:4]), *(form for form in shown if 4 < width(form) < ROOM)]
    blocks = tuple(Equation(f"eq-{n}", n, form, "=", ZERO) for n, form in enumerate(forms))
    path = file.with_name("widths.html")
    path.write_text(html(replace(SAMPLE, blocks=blocks)), encoding="utf-8")
    with opened(browser, path) as one:
        measured = one.page.evaluate(
            "[...document.querySelectorAll('math')].map("
            "one => one.getBoundingClientRect().width / parseFloat(getComputedStyle(one).fontSize))"
        )
    equals_zero = 1.8
    assert len(forms) > 5
    assert [width(form) + equals_zero for form in forms] == pytest.approx(measured, rel=0.125)


def test_page_is_valid_for_the_nu_html_checker(note: Path) -> None:
    """It holds HTML, MathML and SVG against the schemas of the W3C and the WHATWG, and the style against CSS."""
    command = ["java", "-jar", os.environ["VNU_JAR"], "--format", "json", str(note)]
    done = subprocess.run(command, capture_output=True, text=True, timeout=120, check=False)
    messages = [message for message in json.loads(done.stderr)["messages"] if message["type"] != "info"]
    assert messages == []
    assert done.returncode == 0
