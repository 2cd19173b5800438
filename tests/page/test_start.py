"""`python -m meanlab`: one command, one server, this computer only."""

import socket
import subprocess
import sys

import psutil
import pytest
from driving import ROOT, Server

import meanlab.__main__ as start
from meanlab import __version__


def run(server: Server, *arguments: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "meanlab", *arguments],
        cwd=server.folder,
        env=server.environment | {"PYTHONPATH": str(ROOT), "BROWSER": "true"},
        capture_output=True,
        text=True,
        timeout=60,
        check=False,
    )


def test_the_version_is_said(server):
    """--version prints the name and the version, and starts nothing."""
    done = run(server, "--version")
    assert (done.returncode, done.stdout) == (0, f"meanlab {__version__}\n")


def test_a_second_start_opens_the_running_page(server):
    """A second start, from another folder, finds the running page and ends."""
    done = run(server)
    assert done.returncode == 0
    assert server.url in done.stdout
    assert server.answers()


def test_a_port_taken_by_another_program_is_said(server):
    """A port that something else uses is a sentence and exit code 1, not a second server."""
    with socket.socket() as other:
        other.bind(("127.0.0.1", 0))
        other.listen()
        port = other.getsockname()[1]
        done = run(server, "--port", str(port), "--no-browser")
    assert done.returncode == 1
    assert f"Port {port} is used by another program" in done.stderr


@pytest.mark.parametrize("given", ["0", "80", "99999", "abc", "-1"])
def test_a_port_that_is_none_is_refused(server, given):
    """Only whole numbers from 1024 to 65535 are ports for the page."""
    done = run(server, f"--port={given}")
    assert done.returncode == 2
    assert "is no port" in done.stderr


def test_the_server_listens_on_this_computer_only(server):
    """Every socket the server listens on is bound to the loopback address."""
    assert server.process is not None
    listening = [c for c in psutil.Process(server.process.pid).net_connections() if c.status == psutil.CONN_LISTEN]
    assert listening
    assert {connection.laddr.ip for connection in listening} <= {"127.0.0.1", "::1"}


def test_the_settings_hold_from_any_folder():
    """The start hands the server every setting of .streamlit/config.toml by its full name."""
    settings = start.settings()
    assert settings["server.address"] == "localhost"
    assert settings["browser.gatherUsageStats"] is False
    assert settings["server.maxUploadSize"] == 10
    assert settings["client.showErrorLinks"] is False


def test_what_the_first_result_needs_is_imported_before_the_first_visitor(server):
    """A start imports the numerical and drawing libraries before the server answers."""
    code = "import sys, meanlab.__main__ as m; m.import_everything(); print(*sys.modules)"
    done = subprocess.run(
        [sys.executable, "-c", code],
        cwd=ROOT,
        env=server.environment,
        capture_output=True,
        text=True,
        timeout=60,
        check=True,
    )
    assert {"scipy.special", "plotly", "sqlalchemy", "streamlit"} <= set(done.stdout.split())
