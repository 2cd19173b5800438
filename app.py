"""Start file of the page: `streamlit run app.py` (or `python -m meanlab`)."""

import streamlit as st

from meanlab.page import show

st.set_page_config(page_title="meanlab", page_icon=None, layout="wide")
show()
