"""The question: target, kind of target, level, the side asked, and one closed expander for what else is known."""

import html

import streamlit as st

from meanlab.checks.units import units_that_differ
from meanlab.core.question import TARGET_KINDS
from meanlab.page import asked, readings, state
from meanlab.page.guard import say
from meanlab.wording.names import ALTERNATIVE_QUESTIONS

LEVELS = ("10 %", "5 %", "2.5 %", "1 %", "0.1 %")
PROCEDURES = {
    "rule": "by the rule (see Checks)",
    "z": "z (known σ)",
    "t": "Student's t",
    "guarded_t": "guarded t",
    "signed_rank": "signed rank",
    "sign": "sign",
}
SIGMA_HELP = (
    "The standard deviation of one reading as earlier records show it; leave empty if these readings are all there is. "
    "Its origin is printed with the result."
)

UNITS_HELP = (
    "n counts what was prepared independently: choose what one reading is, or type it. Injections or repeats of one "
    "preparation are no independent readings; where the file names the preparations, choose their column above."
)


def draw() -> None:
    """Draw the lower half of the left column; unit and name that the heading gave stand in their fields, in grey."""
    found = readings.intake()
    unit, name = ("", "") if found is None else (found.unit or "", found.name or "")
    left, right = st.columns([3, 2], gap="small")
    left.text_input("Target", key="target", placeholder="e.g. 5.000")
    right.text_input("Unit", key="unit", placeholder=unit or _hint(state.working().last_unit))
    if units_that_differ(unit, state.value("unit")):
        say(f'The heading gives the readings in "{unit}": write the target in that unit; nothing is converted.')
    left, right = st.columns([3, 2], gap="small")
    left.selectbox("The target is a", TARGET_KINDS, key="target_kind", on_change=_side_follows_kind)
    right.selectbox(
        "α",
        LEVELS,
        key="significance",
        accept_new_options=True,
        help="Significance level: the risk of a false alarm when the true mean is at the target.",
    )
    left, right = st.columns(2, gap="small")
    left.selectbox(
        "The true mean …",
        tuple(ALTERNATIVE_QUESTIONS),
        format_func=ALTERNATIVE_QUESTIONS.__getitem__,
        key="alternative",
        help="What is asked of the true mean against the target. A limit asks its own side. Set it before measuring.",
    )
    right.selectbox("One reading is", asked.UNITS, key="units_are", accept_new_options=True, help=UNITS_HELP)
    left, right = st.columns(2, gap="small")
    left.text_input("Quantity", key="quantity", placeholder=name or "e.g. Nitrate")
    right.text_input("Material", key="material", placeholder="e.g. control solution")
    with st.expander("Known σ · U of the target · limit E · conditions", key="more"):
        _conditions()
        _target_uncertainty()
        _known_sigma()
        _limits()
        _procedure()
    with st.container(key="in_force"):
        in_force = asked.in_force(state.working().fields)
        if in_force:
            st.html(f'<p class="ml-counts">{html.escape(in_force)}</p>')


def _hint(last_unit: str) -> str:
    return f"last: {last_unit}" if last_unit else "e.g. mg/L"


def _side_follows_kind() -> None:
    kind = state.widget("target_kind")
    side = asked.SIDE_OF_KIND.get(kind)
    if side is not None:
        state.put("alternative", side)
    elif state.value("target_kind") in asked.SIDE_OF_KIND:
        state.put("alternative", "two-sided")


def _conditions() -> None:
    st.selectbox(
        "Conditions",
        asked.CONDITIONS,
        key="conditions",
        help="Repeatability: one run, one analyst, one instrument. Intermediate precision: several days or analysts.",
    )
    st.checkbox(
        "Typed in the order of measurement",
        key="run_order",
        help="Ticked, drift and dependence between neighbours are looked for.",
    )


def _target_uncertainty() -> None:
    if state.value("target_kind") == "historical level":
        left, right = st.columns(2, gap="small")
        left.text_input("Level from m values", key="historical_count", placeholder="empty: exact")
        right.text_input("their s", key="certificate_value")
        return
    left, right = st.columns([2, 3], gap="small")
    left.text_input(
        "U of the target",
        key="certificate_value",
        help="From the certificate, in the unit of the readings; empty: the target is taken as exact.",
    )
    right.selectbox("U is", asked.MEANINGS, key="certificate_meaning")
    if state.value("certificate_meaning") == "expanded U with k":
        left, right = st.columns([2, 3], gap="small")
        left.text_input("k", key="certificate_k", placeholder="as certified")
        right.text_input("degrees of freedom", key="certificate_df", placeholder="if certified")
    elif state.value("certificate_meaning") == "standard uncertainty u":
        st.text_input("degrees of freedom", key="certificate_df", placeholder="if certified")


def _known_sigma() -> None:
    left, middle, right = st.columns([2, 3, 2], gap="small")
    left.text_input("Known σ", key="sigma", help=SIGMA_HELP)
    middle.text_input("from", key="sigma_origin", placeholder="e.g. chart 2025")
    right.text_input("its df", key="sigma_df", help="Degrees of freedom behind σ; empty: taken as exactly known.")
    st.text_input(
        "The laboratory's own u",
        key="own_uncertainty",
        help="Standard uncertainty from your budget (calibration, recovery) that repeating does not show.",
    )


def _limits() -> None:
    left, right = st.columns([2, 3], gap="small")
    left.text_input(
        "Limit E",
        key="limit",
        help="Agreement is claimed only where the mean is shown to lie within target ± E. Set it before measuring.",
    )
    right.text_input(
        "Difference that matters",
        key="matters",
        help="The smallest true difference that must not be missed.",
    )
    st.checkbox(
        "Side and limits fixed before",
        key="fixed_before",
        help="Tick where the side asked and the limits were fixed before measuring. Otherwise what is changed after a "
        "result was shown is said in the sentence.",
    )


def _procedure() -> None:
    left, right = st.columns([3, 2], gap="small")
    left.selectbox(
        "Procedure",
        tuple(PROCEDURES),
        format_func=PROCEDURES.__getitem__,
        key="procedure",
        help="Leave it to the rule unless a written method sets the procedure.",
    )
    right.selectbox("Speaks of the", ("mean", "median"), key="parameter")
    st.text_input(
        "Resolution",
        key="resolution",
        help="The step of the instrument's display, where the digits typed do not show it.",
    )
