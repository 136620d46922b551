"""Reports in a browser: complete without scripts and network, nothing cut, readable, tables that sort and filter."""

import contextlib
import json
import shutil
import subprocess

import pytest
from playwright.sync_api import sync_playwright

DESKTOP, PHONE = {"width": 1440, "height": 900}, {"width": 390, "height": 844}
# what fits within the margins of A4, in CSS pixels: 184 mm
UPRIGHT = {"width": 695, "height": 1000}

LONG = "CC(C)(C)OC(=O)N1CCC(CC(=O)OCCOCCOCCOCCOc2ccc(cc2)C(=O)Nc2ccccc2)CC1"
CAMPAIGN = f"""
title = 'A <b>title</b> & "quotes", עברית'
[bases]
library = ["LDA", "KOtBu", "DBU", "K2CO3"]
[electrophiles]
library = ["MeI", "BnBr", "benzaldehyde"]
[solvents]
library = ["THF", "DMF", "toluene"]
[[substrates.inline]]
name = 'ester <1> & "co"'
smiles = "CCOC(=O)Cc1ccccc1"
[[substrates.inline]]
name = "אסטר של חומצה"
smiles = "CCOC(=O)CC(=O)OCC"
[[substrates.inline]]
name = "{LONG}"
smiles = "{LONG}"
[[substrates.inline]]
name = "cyclohexanone"
smiles = "O=C1CCCCC1"
[conditions]
temperature_c = [0, 25]
"""
# butane has no acid that the model covers
UNKNOWN = """
title = "Nothing is covered"
[bases]
library = ["LDA"]
[electrophiles]
library = ["MeI"]
[solvents]
library = ["THF"]
[[substrates.inline]]
name = "an alkane"
smiles = "CCCC"
"""
REQUEST = "[plates]\nwells = 24\n[choice]\ndraws = 16\n[deck]\ninert = true\n"


def browser_path():
    for name in ("chromium", "chromium-browser", "google-chrome"):
        if found := shutil.which(name):
            return found
    raise FileNotFoundError("no chromium: install Debian's package `chromium`")


def run(binary, folder, *arguments):
    done = subprocess.run(
        [binary, *arguments, "--data", str(folder / "data")], cwd=folder, capture_output=True, text=True
    )
    assert done.returncode == 0, done.stderr
    return done.stdout


@pytest.fixture(scope="module")
def reports(binary, tmp_path_factory):
    """Paths of a job's report, a plan's and that of a job of unknown cells."""
    folder = tmp_path_factory.mktemp("reports")
    jobs = []
    for text in (CAMPAIGN, UNKNOWN):
        (folder / "campaign.toml").write_text(text, encoding="utf-8")
        run(binary, folder, "screen", "campaign.toml")
        jobs.append(json.loads(run(binary, folder, "jobs", "--json"))[0]["job"])
    (folder / "request.toml").write_text(REQUEST, encoding="utf-8")
    plan = json.loads(run(binary, folder, "plan", jobs[0], "--request", "request.toml", "--json"))
    for name, id in {"job": jobs[0], "plan": plan["id"], "unknown": jobs[1]}.items():
        run(binary, folder, "report", id, "--out", f"{name}.html")
    return folder


@pytest.fixture(scope="module")
def browser():
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=browser_path(), args=["--no-sandbox"])
        yield browser
        browser.close()


@contextlib.contextmanager
def opened(browser, path, viewport=DESKTOP, scripts=True, media="screen"):
    context = browser.new_context(viewport=viewport, java_script_enabled=scripts)
    page = context.new_page()
    requests, faults = [], []
    page.on("request", lambda request: requests.append(request.url))
    page.on("console", lambda message: faults.append(message.text) if message.type == "error" else None)
    page.on("pageerror", lambda error: faults.append(str(error)))
    page.emulate_media(media=media)
    page.goto(path.as_uri())
    yield page
    assert [url for url in requests if url != path.as_uri() and not url.startswith("data:")] == []
    assert faults == []
    context.close()


NAMES = ("job", "plan", "unknown")
every_report = pytest.mark.parametrize("name", NAMES)


@every_report
def test_no_address_leads_out_of_the_page(reports, name):
    text = (reports / f"{name}.html").read_text(encoding="utf-8")
    for word in ("src=", "url(http", "@import", "<iframe", "<object", "<embed"):
        assert word not in text


@every_report
def test_every_link_has_its_place(reports, browser, name):
    with opened(browser, reports / f"{name}.html") as page:
        links = page.eval_on_selector_all("a[href], use[href]", "all => all.map(a => a.getAttribute('href'))")
        assert len(links) > 5
        for link in links:
            assert link.startswith("#") and page.evaluate("id => !!document.getElementById(id)", link[1:]), link
        ids = page.eval_on_selector_all("[id]", "all => all.map(e => e.id)")
        assert len(ids) == len(set(ids))
        for anchor in page.query_selector_all("nav a"):
            anchor.click()
            assert page.url.endswith(anchor.get_attribute("href"))


@every_report
def test_it_is_complete_without_scripts(reports, browser, name):
    path = reports / f"{name}.html"
    words = "() => [...document.querySelectorAll('main, header, footer')].map(e => e.innerText).join(' ')"
    with opened(browser, path, scripts=False) as page:
        assert page.locator("button, .tools").count() == 0
        plain = page.locator("main").inner_text()
    with opened(browser, path) as page:
        page.eval_on_selector_all(".tools, th button", "all => all.forEach(e => e.remove())")
        assert page.locator("main").inner_text() == plain
        assert "take precedence over" in page.evaluate(words)


OVERFLOW = """printed => {
  const limit = document.documentElement.clientWidth + 1, faults = [];
  if (document.documentElement.scrollWidth > limit) faults.push('the page: ' + document.documentElement.scrollWidth);
  for (const e of document.querySelectorAll('body *')) {
    if (e.closest('.symbols, .skip') || e.closest('svg') && e.tagName !== 'svg') continue;
    const own = printed ? null : e.parentElement.closest('.box, .scroll');
    const r = e.getBoundingClientRect();
    if (!own && r.width > 0 && (r.right > limit || r.left < -1)) faults.push(e.tagName + '.' + e.className + ' ' + r.right);
    const s = getComputedStyle(e);
    const hides = s.overflowX === 'hidden' || s.overflowX === 'clip';
    if (e.tagName !== 'svg' && hides && e.scrollWidth > e.clientWidth + 1) faults.push('cut: ' + e.tagName + ' ' + e.textContent.slice(0, 40));
  }
  return faults;
}"""


@every_report
@pytest.mark.parametrize(
    "viewport, media",
    [(DESKTOP, "screen"), (PHONE, "screen"), (UPRIGHT, "print")],
    ids=["desktop", "phone", "paper"],
)
def test_nothing_overflows(reports, browser, name, viewport, media):
    with opened(browser, reports / f"{name}.html", viewport, media=media) as page:
        assert page.evaluate(OVERFLOW, media == "print") == []


# Words of a picture that leave it, or two that lie on one another.
CUT_LABELS = """() => {
  const faults = [];
  for (const svg of document.querySelectorAll('svg.chart, svg.plate')) {
    const frame = svg.getBoundingClientRect();
    const texts = [...svg.querySelectorAll('text')].map(t => [t.textContent, t.getBoundingClientRect()]);
    for (const [text, r] of texts)
      if (r.left < frame.left - 1 || r.right > frame.right + 1 || r.top < frame.top - 2 || r.bottom > frame.bottom + 2) faults.push('cut: ' + text);
    for (let i = 0; i < texts.length; i++) for (let j = 0; j < i; j++) {
      const [a, b] = [texts[i][1], texts[j][1]];
      const across = Math.min(a.right, b.right) - Math.max(a.left, b.left), down = Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top);
      if (across > 2 && down > 0.4 * Math.min(a.height, b.height)) faults.push(texts[i][0] + ' on ' + texts[j][0]);
    }
  }
  return faults;
}"""


@every_report
def test_no_word_of_a_picture_is_cut(reports, browser, name):
    with opened(browser, reports / f"{name}.html") as page:
        assert page.evaluate(CUT_LABELS) == []


# Contrast by WCAG 2.1 of every text with what lies below it: 4.5, and 3 for large letters. Text of pictures is held against
# the shape that is drawn before it.
CONTRAST = """() => {
  const parse = c => { const m = c.match(/[\\d.]+/g).map(Number); return { rgb: m.slice(0, 3), a: m.length > 3 ? m[3] : 1 }; };
  const lum = rgb => { const [r, g, b] = rgb.map(v => { v /= 255; return v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4; }); return 0.2126 * r + 0.7152 * g + 0.0722 * b; };
  const contrast = (a, b) => { const [x, y] = [lum(a), lum(b)].sort((p, q) => q - p); return (x + 0.05) / (y + 0.05); };
  const below = e => { for (; e; e = e.parentElement) { const c = parse(getComputedStyle(e).backgroundColor); if (c.a > 0.99) return c.rgb; } return [255, 255, 255]; };
  const faults = new Set(); let held = 0;
  const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
  while (walk.nextNode()) {
    const e = walk.currentNode.parentElement;
    if (!walk.currentNode.data.trim() || e.closest('script, style, .symbols, .skip, title') || !e.getClientRects().length) continue;
    const s = getComputedStyle(e), inSvg = !!e.closest('svg');
    const shape = inSvg && e.previousElementSibling;
    const fill = shape && getComputedStyle(shape).fill;
    const ground = shape && ['circle', 'rect'].includes(shape.tagName) && fill.startsWith('rgb') && parse(fill).a > 0.99 && e.parentElement.tagName === 'g'
      ? parse(fill).rgb : below(e);
    const large = parseFloat(s.fontSize) >= 24 || parseFloat(s.fontSize) >= 18.66 && Number(s.fontWeight) >= 700;
    const found = contrast(parse(inSvg ? s.fill : s.color).rgb, ground);
    held += 1;
    if (found < (large ? 3 : 4.5)) faults.add(e.tagName + '.' + (e.className.baseVal ?? e.className) + ' ' + found.toFixed(2));
  }
  return [held, [...faults]];
}"""


@every_report
def test_every_text_can_be_read(reports, browser, name):
    with opened(browser, reports / f"{name}.html") as page:
        held, faults = page.evaluate(CONTRAST)
        assert held > 50
        assert faults == []


def column(page, table, name):
    heads = [head.strip("↕↑↓ \n").strip() for head in table.locator("thead th").all_inner_texts()]
    at = heads.index(name) + 1
    cells = table.locator(f"tbody tr:not([hidden]) td:nth-child({at})")
    return table.locator(f"thead th:nth-child({at})"), cells


@pytest.mark.parametrize("name, label", [("job", "Best cell of each substrate"), ("plan", "Wells")])
def test_tables_sort_and_filter(reports, browser, name, label):
    with opened(browser, reports / f"{name}.html") as page:
        table = page.locator(f'.box[aria-label="{label}"] table')
        head, cells = column(page, table, "expected yield")
        values = lambda: [float(v) for v in cells.evaluate_all("all => all.map(c => c.dataset.v)")]
        head.locator("button").click()
        assert head.get_attribute("aria-sort") == "descending"
        assert values() == sorted(values(), reverse=True) and len(values()) > 2
        head.locator("button").press("Enter")
        assert head.get_attribute("aria-sort") == "ascending"
        assert values() == sorted(values())
        head, names = column(page, table, "substrate")
        head.click()
        assert page.locator(f'.box[aria-label="{label}"] th[aria-sort]').count() == 1
        everything = names.count()
        tools = page.locator(f'.tools:has(+ .box[aria-label="{label}"])')
        tools.locator("input").fill("CYCLOHEX")
        shown = names.all_inner_texts()
        assert 0 < len(shown) < everything and all("cyclohexanone" in one for one in shown)
        assert tools.locator("output").inner_text() == f"{len(shown)} of {everything} rows"
        tools.locator("input").fill("no such word")
        assert names.count() == 0
        tools.locator("input").fill("")
        assert names.count() == everything


def test_names_are_shown_as_they_were_given(reports, browser):
    with opened(browser, reports / "job.html") as page:
        assert page.locator("h1").inner_text() == 'A <b>title</b> & "quotes", עברית'
        assert page.locator("h1 b").count() == 0
        text = page.locator("main").inner_text()
        for name in ('ester <1> & "co"', "אסטר של חומצה", LONG):
            assert name in text


def test_what_is_unknown_says_so(reports, browser):
    with opened(browser, reports / "unknown.html") as page:
        text = page.locator("main").inner_text()
        assert "There is nothing to propose" in text and "unknown" in text


def test_a_stock_can_be_ticked_off(reports, browser):
    with opened(browser, reports / "plan.html") as page:
        boxes = page.locator("#stocks input[type=checkbox]")
        assert boxes.count() > 5
        boxes.first.check()
        assert boxes.first.is_checked()


def test_it_prints(reports, browser, tmp_path):
    for name in NAMES:
        with opened(browser, reports / f"{name}.html") as page:
            page.pdf(path=tmp_path / "it.pdf", prefer_css_page_size=True)
        pages = (tmp_path / "it.pdf").read_bytes().count(b"/Type /Page\n")
        assert 1 <= pages <= 40
