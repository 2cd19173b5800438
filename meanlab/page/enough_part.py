"""Enough readings? What these readings could show, and how many a question needs, before there is any reading."""

from collections.abc import Callable, Mapping
from types import MappingProxyType

import streamlit as st

from meanlab.core.complaints import Complaint
from meanlab.core.results import Plan
from meanlab.page import asked, cache, pictures, state, tables
from meanlab.page.cache import Outcome
from meanlab.page.guard import say
from meanlab.wording import enough_sentence
from meanlab.wording.numbers import level_text, significant, unit_text

SIDES: Mapping[str, str] = MappingProxyType({"two-sided": "either way", "greater": "upwards", "less": "downwards"})
POWERS = ("80 %", "90 %", "95 %", "99 %")


def draw(found: Outcome | None) -> None:
    """Draw what the readings at hand could have shown, and the planning of further ones."""
    if found is not None:
        tables.heading("These readings")
        words, curve = st.columns([2, 3], gap="medium")
        with words:
            tables.sentences([enough_sentence(found.analysis)])
        with curve:
            pictures.missed(found.analysis)
    tables.heading("Planning")
    fields, result = st.columns([2, 3], gap="medium")
    with fields:
        _fields()
    with result:
        _planned(found)


def _fields() -> None:
    st.selectbox("How many readings to show", tuple(KINDS), key="plan_kind")
    kind = state.value("plan_kind")
    left, right = st.columns(2, gap="small")
    if kind == "a difference that matters":
        left.text_input("Difference", key="plan_difference", help="The true difference that must not be missed.")
    elif kind == "agreement within ± E":
        left.text_input("Limit E", key="plan_limit")
        st.text_input("True difference to allow for", key="plan_true", placeholder="0")
    else:
        left.text_input("Half-width of the interval", key="plan_half_width")
    right.text_input("s of one reading", key="plan_s", placeholder="that of the readings above")
    if kind != "an interval of ± half-width":
        st.selectbox("With a probability of", POWERS, key="plan_power")


def _planned(found: Outcome | None) -> None:
    fields = state.working().fields
    sign = _sign(fields) if found is None else found.texts.numbers.sign
    wanted = WANTED[fields["plan_kind"]]
    if not fields[wanted].strip():
        tables.sentences(["Type the number on the left; the count of readings stands here. No reading is needed yet."])
        return
    s = _scatter(fields["plan_s"], found, sign)
    if s is None:
        tables.sentences(["Type s, the standard deviation of one reading as earlier work shows it."])
        return
    try:
        plan = KINDS[fields["plan_kind"]](fields, s, sign)
    except Complaint as complaint:
        say(str(complaint))
        return
    _say(plan, fields, sign)


def _sign(fields: Mapping[str, str]) -> str:
    """The decimal sign of what is typed here, while there are no readings."""
    return "," if any("," in fields[name] for name in (*WANTED.values(), "plan_s")) else "."


def _scatter(text: str, found: Outcome | None, sign: str) -> float | None:
    if text.strip():
        return float(asked.number(text, "s of one reading", "plan_s", sign))
    return None if found is None else found.analysis.power.planning_s


def _detection(fields: Mapping[str, str], s: float, sign: str) -> Plan:
    difference = float(asked.number(fields["plan_difference"], "difference", "plan_difference", sign))
    uncertainty, _ = asked.target_uncertainty(fields, sign)
    return cache.plan_detection(
        difference,
        s,
        fields["alternative"],
        _alpha(fields, sign),
        _power(fields),
        bool(fields["sigma"].strip()),
        uncertainty,
    )


def _agreement(fields: Mapping[str, str], s: float, sign: str) -> Plan:
    limit = float(asked.number(fields["plan_limit"], "limit E", "plan_limit", sign))
    true = float(asked.number(fields["plan_true"] or "0", "true difference", "plan_true", sign))
    uncertainty, _ = asked.target_uncertainty(fields, sign)
    return cache.plan_agreement(limit, s, true, _alpha(fields, sign), _power(fields), uncertainty)


def _interval(fields: Mapping[str, str], s: float, sign: str) -> Plan:
    half_width = float(asked.number(fields["plan_half_width"], "half-width", "plan_half_width", sign))
    return cache.plan_interval(half_width, s, 1 - _alpha(fields, sign))


def _alpha(fields: Mapping[str, str], sign: str) -> float:
    return float(asked.significance(fields["significance"], sign))


def _power(fields: Mapping[str, str]) -> float:
    return float(asked.significance(fields["plan_power"]))


def _say(plan: Plan, fields: Mapping[str, str], sign: str) -> None:
    unit = fields["unit"].strip()
    if plan.readings is None:
        tables.sentences([plan.reason])
    elif fields["plan_kind"] == "an interval of ± half-width":
        reached = "" if plan.achieved is None else unit_text(significant(plan.achieved, 3, sign), unit)
        tables.sentences(
            [f"{plan.readings} readings: where s comes out as typed, the interval is ± {reached}.", plan.reason]
        )
    else:
        power = "" if plan.achieved is None else level_text(round(plan.achieved, 3), sign)
        asked_as = (
            "" if fields["plan_kind"] != "a difference that matters" else f", asked {SIDES[fields['alternative']]}"
        )
        risk = f"level {fields['significance']}{asked_as}"
        tables.sentences(
            [f"{plan.readings} readings; they show it with a probability of {power} ({risk}).", plan.reason]
        )
    if plan.curve:
        pictures.course(plan, fields["plan_kind"], unit, sign)


KINDS: Mapping[str, Callable[[Mapping[str, str], float, str], Plan]] = MappingProxyType(
    {
        "a difference that matters": _detection,
        "agreement within ± E": _agreement,
        "an interval of ± half-width": _interval,
    }
)
WANTED: Mapping[str, str] = MappingProxyType(
    {
        "a difference that matters": "plan_difference",
        "agreement within ± E": "plan_limit",
        "an interval of ± half-width": "plan_half_width",
    }
)
