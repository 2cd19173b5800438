"""One server and one browser for all tests of the page; each test has a context of its own, and no request leaves."""

import os
import shutil
import signal
import socket
import subprocess
import sys
import time
from collections.abc import Iterator
from pathlib import Path
from urllib.parse import urlsplit
from urllib.request import urlopen

import pytest
from playwright.sync_api import Browser, Page, sync_playwright

ROOT = Path(__file__).resolve().parents[2]
BROWSERS = (
    "chromium",
    "chromium-browser",
    "google-chrome",
    "google-chrome-stable",
    "chrome",
    "msedge",
    "microsoft-edge",
)
WINDOWS_BROWSERS = (r"Google\Chrome\Application\chrome.exe", r"Microsoft\Edge\Application\msedge.exe")
QUIET = (
    "--no-sandbox",
    "--disable-gpu",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)
TWELVE = "5.012\n5.043\n5.028\n5.009\n5.051\n5.017\n5.026\n5.033\n4.998\n4.987\n5.021\n5.034"
SCREEN = {"width": 1366, "height": 650}
PUT = """(box, text) => {
  Object.getOwnPropertyDescriptor(HTMLTextAreaElement.prototype, "value").set.call(box, text);
  box.dispatchEvent(new Event("input", { bubbles: true }));
}"""
HOME = ("localhost", "127.0.0.1", "[::1]", "")


class Server:
    """A page server started as a technician starts it, with a data folder of its own."""

    def __init__(self, folder: Path) -> None:
        self.folder = folder
        self.port = _free_port()
        self.process: subprocess.Popen[bytes] | None = None

    @property
    def url(self) -> str:
        return f"http://localhost:{self.port}"

    @property
    def environment(self) -> dict[str, str]:
        named = {"MEANLAB_DATABASE_URL": f"sqlite:///{self.folder / 'notebook.db'}", "XDG_DATA_HOME": str(self.folder)}
        return os.environ | named | {"LOCALAPPDATA": str(self.folder)}

    def start(self) -> None:
        command = [sys.executable, "-m", "meanlab", "--port", str(self.port), "--no-browser"]
        with (self.folder / "log.txt").open("ab") as log:
            self.process = subprocess.Popen(command, cwd=ROOT, env=self.environment, stdout=log, stderr=log)
        until = time.monotonic() + 60
        while time.monotonic() < until and self.process.poll() is None:
            if self.answers():
                return
            time.sleep(0.1)
        pytest.fail(f"The server did not start: {self.log()}")

    def answers(self) -> bool:
        try:
            with urlopen(f"{self.url}/_stcore/health", timeout=2) as answer:
                return bool(answer.status == 200)
        except OSError:
            return False

    def stop(self) -> None:
        if self.process is None:
            return
        if os.name == "posix":
            self.process.send_signal(signal.SIGINT)
        else:
            self.process.terminate()
        try:
            self.process.wait(20)
        except subprocess.TimeoutExpired:
            self.process.kill()
            self.process.wait(20)
        self.process = None

    def log(self) -> str:
        return (self.folder / "log.txt").read_text(encoding="utf-8", errors="replace")


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
    path = _browser_path()
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
    foreign = [url for url in requests if urlsplit(url).scheme in ("http", "https", "ws", "wss") and not _at_home(url)]
    assert foreign == []


@pytest.fixture
def twelve() -> str:
    """Twelve readings of nitrate with three places, one a line."""
    return TWELVE


def paste(page: Page, text: str) -> None:
    """Put a text into the box as a paste does, and leave it."""
    box = page.locator(".st-key-readings_text textarea")
    box.focus()
    box.evaluate(PUT, text)
    box.blur()


def type_into(page: Page, key: str, text: str) -> None:
    """Type into a field, then leave it."""
    field = page.locator(f".st-key-{key} input")
    field.fill(text)
    field.press("Tab")


def _at_home(url: str) -> bool:
    return (urlsplit(url).hostname or "") in HOME


def _free_port() -> int:
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return int(probe.getsockname()[1])


def _browser_path() -> str | None:
    found = next((path for path in map(shutil.which, BROWSERS) if path), None)
    if found is None:
        folders = [os.environ.get(name, "") for name in ("PROGRAMFILES", "PROGRAMFILES(X86)", "LOCALAPPDATA")]
        places = [Path(folder) / name for folder in folders if folder for name in WINDOWS_BROWSERS]
        found = next((str(place) for place in places if place.exists()), None)
    return found
