"""The look of the page, written in page.css beside this file."""

from functools import lru_cache
from pathlib import Path

import streamlit as st

_SHEET = Path(__file__).with_name("page.css")


def apply() -> None:
    """Put the style sheet on the page."""
    st.html(f"<style>{_css()}</style>")


@lru_cache(maxsize=1)
def _css() -> str:
    return _SHEET.read_text(encoding="utf-8")
