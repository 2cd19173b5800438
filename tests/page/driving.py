"""The page as a technician starts and drives it: the server, the browser's place, pasting and typing."""

import os
import shutil
import signal
import socket
import subprocess
import sys
import time
from pathlib import Path
from urllib.parse import urlsplit
from urllib.request import urlopen

import pytest
from playwright.sync_api import Page

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
        self.port = free_port()
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


def at_home(url: str) -> bool:
    return (urlsplit(url).hostname or "") in HOME


def free_port() -> int:
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return int(probe.getsockname()[1])


def browser_path() -> str | None:
    found = next((path for path in map(shutil.which, BROWSERS) if path), None)
    if found is None:
        folders = [os.environ.get(name, "") for name in ("PROGRAMFILES", "PROGRAMFILES(X86)", "LOCALAPPDATA")]
        places = [Path(folder) / name for folder in folders if folder for name in WINDOWS_BROWSERS]
        found = next((str(place) for place in places if place.exists()), None)
    return found
