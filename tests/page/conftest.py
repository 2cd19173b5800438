"""One server and one browser for all tests of the page; each test has a context of its own, and no request leaves."""

import os
from collections.abc import Iterator
from urllib.parse import urlsplit

import pytest
from driving import QUIET, SCREEN, TWELVE, Server, at_home, browser_path
from playwright.sync_api import Browser, Page, sync_playwright


@pytest.fixture(scope="session")
def server(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Server]:
    """The server that all tests of a run share."""
    running = Server(tmp_path_factory.mktemp("bench"))
    running.start()
    yield running
    running.stop()
    assert "Traceback" not in running.log(), running.log()


@pytest.fixture(scope="session")
def browser() -> Iterator[Browser]:
    """The browser that all tests of a run share; without one they are skipped, under CI they fail."""
    path = browser_path()
    if path is None:
        reason = "No chromium, chrome or edge was found: the tests in the browser cannot run."
        if os.environ.get("CI"):
            pytest.fail(reason)
        pytest.skip(reason)
    with sync_playwright() as playwright:
        running = playwright.chromium.launch(executable_path=path, args=QUIET)
        yield running
        running.close()


@pytest.fixture
def page(browser: Browser, server: Server) -> Iterator[Page]:
    """An empty page in a context of its own; every request it makes stays on this computer."""
    context = browser.new_context(viewport=SCREEN, timezone_id="Europe/Vienna", locale="en-GB")
    context.grant_permissions(["clipboard-read", "clipboard-write"], origin=server.url)
    opened = context.new_page()
    requests: list[str] = []
    context.on("request", lambda request: requests.append(request.url))
    opened.goto(server.url)
    opened.wait_for_selector(".st-key-readings_text textarea")
    yield opened
    context.close()
    assert requests, "no request was seen: the record of requests does not work"
    foreign = [url for url in requests if urlsplit(url).scheme in ("http", "https", "ws", "wss") and not at_home(url)]
    assert foreign == []


@pytest.fixture
def twelve() -> str:
    """Twelve readings of nitrate with three places, one a line."""
    return TWELVE
