"""One guard around each part of the page: a plain sentence instead of a traceback, and nothing typed is lost."""

import html
import logging
import traceback
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

import streamlit as st
from streamlit.runtime.scriptrunner_utils.exceptions import ScriptControlException

from meanlab.core.complaints import Complaint

_LOG = logging.getLogger("meanlab.page")


@contextmanager
def guarded(part: str) -> Iterator[None]:
    """Draw a part of the page; a complaint or a failure of ours becomes one sentence in its place."""
    try:
        yield
    except ScriptControlException:
        raise
    except Complaint as complaint:
        say(str(complaint))
    except MemoryError:
        _LOG.exception("out of memory in %s", part)
        say(f"There is not enough memory for this ({part}). What you typed is kept; try with fewer readings.")
    except Exception as failure:
        if _state_moved(failure):
            _LOG.warning("the session changed while %s was drawn", part)
            say(f"This part ({part}) is drawn again at the next change.", "notice")
            return
        _LOG.exception("unexpected failure in %s", part)
        say(
            f"This part ({part}) could not be drawn: a fault of meanlab, written to the server's log. "
            "What you typed is kept; change an input to try again."
        )


def _state_moved(failure: Exception) -> bool:
    """Tell whether Streamlit's own session state was changed by another thread while it was read.

    Seen where a browser leaves or the server ends in the middle of a run (Streamlit 1.67, session_state.py `_keys`).
    """
    frames = traceback.extract_tb(failure.__traceback__)
    inside = bool(frames) and Path(frames[-1].filename).parts[-2:] == ("state", "session_state.py")
    return isinstance(failure, RuntimeError) and inside


def say(sentence: str, kind: str = "complaint") -> None:
    """Show a sentence, with nothing in it taken for markup."""
    role = "alert" if kind == "complaint" else "status"
    st.html(f'<p class="ml-{kind}" role="{role}">{html.escape(sentence)}</p>')
