"""The opener of the sample sets."""

import streamlit as st


def draw() -> None:
    """Draw the opener."""
    with st.popover("Sample sets", key="sample_sets"):
        pass
