"""A sample set opens in one click, shows its pictures, and what stood there before can be put back."""

from driving import paste, type_into
from playwright.sync_api import Page, expect

TEXTS_OF_CHARTS = """() => [...document.querySelectorAll(".st-key-panel .js-plotly-plot")].map((chart) => {
  const frame = chart.getBoundingClientRect();
  return [...chart.querySelectorAll("svg text")].filter((text) => text.textContent.trim()).map((text) => {
    const box = text.getBoundingClientRect();
    return [text.textContent, box.left, box.top, box.right, box.bottom,
            box.left >= frame.left - 1 && box.right <= frame.right + 1];
  });
})"""


def open_set(page: Page, title: str) -> None:
    page.get_by_role("button", name="Sample sets").click()
    page.get_by_role("button", name=title).click()


def collisions(page: Page) -> list[str]:
    """Return every text in a chart that overlaps another or leaves the chart, as the browser has drawn them."""
    found = []
    for texts in page.evaluate(TEXTS_OF_CHARTS):
        for place, (text, left, top, right, bottom, inside) in enumerate(texts):
            found += [] if inside else [f"{text} outside"]
            found += [
                f"{text} on {other[0]}"
                for other in texts[:place]
                if left < other[3] and other[1] < right and top < other[4] - 1 and other[2] < bottom - 1
            ]
    return found


def test_a_set_opens_in_one_click_and_can_be_taken_back(page, twelve):
    """Readings and question of the set replace what was there; one click brings all of it back."""
    paste(page, twelve)
    type_into(page, "target", "5.000")
    expect(page.locator(".st-key-conclusion")).to_contain_text("12 ")
    open_set(page, "Reference material with U and k")
    expect(page.locator(".st-key-conclusion")).to_contain_text("certified value 24,6 mg/kg")
    expect(page.locator(".ml-verdict")).to_have_text("cannot tell")
    expect(page.get_by_role("button", name="Reference material with U and k")).to_have_count(0)
    page.get_by_role("button", name="Put back the previous readings").click()
    expect(page.locator(".st-key-conclusion")).to_contain_text("5.000")
    expect(page.locator(".st-key-target input")).to_have_value("5.000")


def test_the_pictures_of_a_set_keep_their_labels_apart(page):
    """In the browser too no label lies on another, for a curve, for bars and for a workbook with a limit."""
    for title, verdict in (
        ("Twenty skewed readings", "cannot tell"),
        ("Readings below a limit", "falls below"),
        ("Workbook with several columns", "differs, by less than 14 µS/cm"),
    ):
        open_set(page, title)
        expect(page.locator(".ml-verdict")).to_have_text(verdict)
        expect(page.locator(".st-key-panel .js-plotly-plot")).to_have_count(2, timeout=20_000)
        page.wait_for_timeout(600)
        assert collisions(page) == []
        box = page.locator(".st-key-panel").bounding_box()
        assert box["y"] + box["height"] <= 560


def test_each_picture_says_itself_in_a_sentence(page):
    """Both charts carry their alternative text."""
    open_set(page, "Upper limit, one side asked")
    for sentence in ("Sampling distribution, t, 7 degrees of freedom", "Readings on their scale: 8 readings"):
        expect(
            page.locator(f'.st-key-panel [aria-label^="{sentence}"], .st-key-panel [alt^="{sentence}"]')
        ).to_have_count(1)
