"""Start the page: `python -m meanlab`. Bound to this computer, nothing asked, nothing sent out."""

import argparse
import json
import os
import socket
import sys
import threading
import time
import tomllib
import webbrowser
from pathlib import Path
from typing import Any
from urllib.error import URLError
from urllib.request import ProxyHandler, build_opener

import platformdirs
import psutil

from meanlab import __version__

APP = Path(__file__).resolve().parent.parent / "app.py"
SETTINGS = APP.parent / ".streamlit" / "config.toml"
HOST = "localhost"
PORT = 8765
PORTS_TRIED = 20
SECONDS_TO_START = 60.0


def main(arguments: list[str] | None = None) -> int:
    """Start the page, or open the one that runs already; returns the exit code."""
    options = _parser().parse_args(arguments)
    running = _running_port(options.port)
    if running is not None:
        print(f"meanlab runs already at {address(running)}; opening it.")
        _open(running, options.browser)
        return 0
    port = options.port or _free_port()
    if port is None or _taken(port):
        print(f"Port {port or PORT} is used by another program. Start with --port and another number.", file=sys.stderr)
        return 1
    import_everything()
    _note_running(port)
    threading.Thread(target=_open_when_up, args=(port, options.browser), daemon=True).start()
    try:
        _serve(port)
    finally:
        _note_path(port).unlink(missing_ok=True)
    return 0


def address(port: int) -> str:
    """Return the address of the page on a port.

    >>> address(8765)
    'http://localhost:8765'
    """
    return f"http://{HOST}:{port}"


def settings() -> dict[str, Any]:
    """Return the settings in .streamlit/config.toml by their full names, so that they hold from any folder."""
    with SETTINGS.open("rb") as file:
        return dict(_flat(tomllib.load(file)))


def import_everything() -> None:
    """Import what the page needs and run it through once, before the first visitor comes."""
    from meanlab.page import warm_up

    warm_up()


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="python -m meanlab", description="Open the meanlab page in the browser.")
    parser.add_argument("--version", action="version", version=f"meanlab {__version__}")
    parser.add_argument("--port", type=_port, default=None, help=f"port of the page (default {PORT}, or the next free)")
    parser.add_argument("--no-browser", dest="browser", action="store_false", help="start without opening a browser")
    return parser


def _port(text: str) -> int:
    if not text.isascii() or not text.isdigit() or not 1024 <= int(text) <= 65535:
        raise argparse.ArgumentTypeError(f'"{text}" is no port; give a whole number from 1024 to 65535')
    return int(text)


def _flat(table: dict[str, Any], prefix: str = "") -> list[tuple[str, Any]]:
    return [
        pair
        for name, given in table.items()
        for pair in (_flat(given, f"{prefix}{name}.") if isinstance(given, dict) else [(f"{prefix}{name}", given)])
    ]


def _serve(port: int) -> None:
    from streamlit.web import bootstrap

    flags = settings() | {
        "server.port": port,
        "server.headless": True,  # the browser is opened here, with the address of the last page
        "logger.hideWelcomeMessage": True,
        "global.developmentMode": False,
    }
    bootstrap.load_config_options(flags)
    print(f"meanlab {__version__} runs at {address(port)}; end it with Ctrl+C.", flush=True)
    bootstrap.run(str(APP), False, [], flags)


def _running_port(wanted: int | None) -> int | None:
    """Return the port on which a meanlab of this user answers, None where there is none."""
    folder = _folder()
    notes = sorted(folder.glob("running-*.json")) if folder.is_dir() else []
    for note in notes:
        port = _noted_port(note)
        if port is not None and wanted in (None, port) and _answers(port):
            return port
    return None


def _noted_port(note: Path) -> int | None:
    try:
        said = json.loads(note.read_text(encoding="utf-8"))
        started = psutil.Process(int(said["process"])).create_time()
        return int(said["port"]) if abs(started - float(said["started"])) < 1 else None
    except (OSError, ValueError, KeyError, TypeError, psutil.Error):
        return None


def _note_running(port: int) -> None:
    said = {"port": port, "process": os.getpid(), "started": psutil.Process().create_time()}
    try:
        _note_path(port).parent.mkdir(parents=True, exist_ok=True)
        _note_path(port).write_text(json.dumps(said), encoding="utf-8")
    except OSError:
        pass  # a second start then finds the port taken and says so


def _note_path(port: int) -> Path:
    return _folder() / f"running-{port}.json"


def _folder() -> Path:
    return Path(platformdirs.user_data_dir("meanlab", appauthor=False))


def _answers(port: int) -> bool:
    try:
        with build_opener(ProxyHandler({})).open(f"{address(port)}/_stcore/health", timeout=2) as answer:
            return bool(answer.status == 200)
    except (URLError, OSError):
        return False


def _taken(port: int) -> bool:
    with socket.socket(socket.AF_INET, socket.SOCK_STREAM) as probe:
        return probe.connect_ex(("127.0.0.1", port)) == 0


def _free_port() -> int | None:
    return next((port for port in range(PORT, PORT + PORTS_TRIED) if not _taken(port)), None)


def _open_when_up(port: int, browser: bool) -> None:
    until = time.monotonic() + SECONDS_TO_START
    while browser and time.monotonic() < until:
        if _answers(port):
            _open(port, browser)
            return
        time.sleep(0.1)


def _open(port: int, browser: bool) -> None:
    """Open the page as it was left last; this computer's user is the one whose notebook it is."""
    if not browser:
        return
    from meanlab.core.complaints import NotebookComplaint
    from meanlab.notebook import WorkingStates

    try:
        key = WorkingStates().latest_key()
    except NotebookComplaint:  # the page itself says so
        key = None
    webbrowser.open(address(port) + (f"/?nb={key}" if key else ""))


if __name__ == "__main__":
    sys.exit(main())
