"""The page of every demo in headless Chromium: silent, off the network, clean to axe-core, reached by keyboard.

Wants Debian's chromium, and the packages of the extra `browser`.
"""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner

from eoscore.cli import command
from eoscore.cli.demo import demo_names, demo_text

pytest.importorskip("matplotlib", reason="the extra `plot` is not installed")
playwright = pytest.importorskip("playwright.sync_api", reason="the extra `browser` is not installed")
axe = pytest.importorskip("axe_playwright_python", reason="the extra `browser` is not installed")

CHROMIUM = Path("/usr/bin/chromium")
FLAGS = ["--headless", "--no-sandbox", "--disable-gpu", "--no-first-run", "--disable-background-networking"]
FLAGS += ["--disable-quic", "--disable-component-update", "--disable-sync"]

if not CHROMIUM.exists():
    pytest.skip("there is no chromium at /usr/bin/chromium", allow_module_level=True)

# What no demo shows: formulas, words in place of numbers, a map over two names, a wide table, a text to be escaped.
FORMULAS = """\
# Formulas <and words> in place of numbers
gas strontium {
    isotope Sr-84
    a_s = 123 a0
}

trap bowl {
    P = 2 W
    f = 120(2) Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2)
}

trap film {
    A = 1e-21 J/m
    V(x, y) = A*sqrt(x^2 + 2*y^2)
}

find f_0, kappa_T, shift_int for strontium in bowl with N = 2e5, T = 100 nK
find f_0 for strontium in bowl over N = geometric(1e4, 1e6, 8), T = even(50 nK, 500 nK, 8)
find T_c for strontium in film over N = [1e4, 1e5], A = [1e-21 J/m, 2e-21 J/m]
derive T_c, f_0, C_N, rho for strontium in bowl with N = 2e5
derive g, U for strontium in film with N = 1e4, T = 400 nK
"""
TEXTS = {name: demo_text(name) for name in demo_names()} | {"formulas": FORMULAS}


@pytest.fixture(scope="module")
def browser():
    with playwright.sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=str(CHROMIUM), args=FLAGS)
        yield browser
        browser.close()


@pytest.fixture(scope="module", params=TEXTS)
def page(request, tmp_path_factory):
    folder = tmp_path_factory.mktemp(request.param)
    source, target = folder / f"{request.param}.tarn", folder / f"{request.param}.html"
    source.write_text(TEXTS[request.param])
    shown = CliRunner().invoke(command, ["report", str(source), "--out", str(target)], standalone_mode=False)
    assert shown.return_value in (0, 3), shown.output
    return target


@pytest.fixture
def tab(browser, page):
    """A tab with the page, and everything that the page said or asked for."""
    tab = browser.new_page()
    tab.heard = []
    tab.on("console", lambda message: tab.heard.append(message.text))
    tab.on("pageerror", lambda error: tab.heard.append(str(error)))
    tab.on("request", lambda request: tab.heard.append(request.url))
    tab.goto(page.as_uri())
    yield tab
    tab.close()


def test_the_page_opens_silently_and_asks_for_itself_alone(tab, page):
    assert tab.heard == [page.as_uri()]
    assert page.stat().st_size < 3_000_000


@pytest.mark.parametrize(("scheme", "rules"), [("light", ""), ("dark", "'color-contrast'")])
def test_axe_finds_nothing(tab, scheme, rules):
    """All rules by day, and by night the one that colours have to do with; the folds are open.

    A picture is one image with a title: its thousands of strokes would only make axe slow.
    """
    tab.emulate_media(color_scheme=scheme)
    tab.evaluate("document.querySelectorAll('details').forEach(each => each.open = true)")
    tab.evaluate("document.querySelectorAll('svg > :not(title)').forEach(each => each.remove())")
    tab.evaluate(next(Path(axe.__file__).parent.rglob("axe.min.js")).read_text())
    found = tab.evaluate(f"axe.run({{runOnly: [{rules}]}})" if rules else "axe.run()")["violations"]
    assert {each["id"]: each["nodes"][0]["html"] for each in found} == {}


def test_every_link_leads_to_something_that_is_seen(tab):
    lost = """[...document.querySelectorAll('a')].filter(link => {
        const target = document.querySelector(link.getAttribute('href'));
        return !target || target.getBoundingClientRect().height === 0;
    }).map(link => link.outerHTML)"""
    assert tab.evaluate(lost) == []


def test_a_followed_link_arrives(tab):
    tab.click("nav a[href='#source']")
    assert tab.url.endswith("#source")
    assert tab.evaluate("document.querySelector('#source').getBoundingClientRect().top < innerHeight")


def test_the_keyboard_reaches_everything_in_order(tab):
    reachable = (
        "[...document.querySelectorAll('a, summary, [tabindex=\"0\"]')].filter(e => e.checkVisibility())"
    )
    wanted = tab.evaluate(f"{reachable}.length")
    reached = []
    for _ in range(wanted):
        tab.keyboard.press("Tab")
        reached.append(tab.evaluate(f"{reachable}.indexOf(document.activeElement)"))
    assert reached == list(range(wanted))


def test_a_narrow_page_does_not_scroll_sideways(tab):
    """1280 pixels at 200 % zoom are 640, and WCAG 2.2 (1.4.10) asks for 320."""
    for width in (640, 320):
        tab.set_viewport_size({"width": width, "height": 800})
        assert tab.evaluate("document.documentElement.scrollWidth") <= width


def test_paper_is_white_by_night_too(tab):
    tab.emulate_media(media="print", color_scheme="dark")
    assert tab.evaluate("getComputedStyle(document.body).backgroundColor") == "rgb(255, 255, 255)"
    assert tab.evaluate("getComputedStyle(document.querySelector('figure svg')).filter") == "none"


def test_pictures_and_rows_are_whole_on_paper(tab):
    tab.emulate_media(media="print")
    assert tab.evaluate("getComputedStyle(document.querySelector('nav')).display") == "none"
    cut = (
        "[...document.querySelectorAll('figure, tr')].every(e => getComputedStyle(e).breakInside === 'avoid')"
    )
    assert tab.evaluate(cut)
