"""A table whose texts stay texts: nothing in a cell is taken for markup."""

import html
from collections.abc import Iterable, Sequence

import streamlit as st


def draw(headings: Sequence[str], rows: Iterable[Sequence[str]], height: int | None = None) -> None:
    """Draw a table; with a height in pixels it scrolls inside."""
    st.html(table_html(headings, rows, height))


def table_html(headings: Sequence[str], rows: Iterable[Sequence[str]], height: int | None = None) -> str:
    """Return a table as HTML with every text escaped.

    >>> "<td>&lt;b&gt;</td>" in table_html(["a"], [["<b>"]])
    True
    """
    head = "".join(f'<th scope="col">{html.escape(text)}</th>' for text in headings)
    body = "".join("<tr>" + "".join(f"<td>{html.escape(text)}</td>" for text in row) + "</tr>" for row in rows)
    style = f' style="max-height:{height}px"' if height else ""
    return f'<div class="ml-scroll" tabindex="0"{style}><table class="ml-list"><tr>{head}</tr>{body}</table></div>'


def sentences(texts: Iterable[str]) -> None:
    """Draw sentences, one a line."""
    lines = "".join(f"<p>{html.escape(text)}</p>" for text in texts if text)
    if lines:
        st.html(f'<div class="ml-text">{lines}</div>')


def heading(text: str) -> None:
    """Draw the small heading of a block."""
    st.html(f'<h3 class="ml-h">{html.escape(text)}</h3>')
