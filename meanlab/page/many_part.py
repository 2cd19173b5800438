"""Many samples: a table of them, judged by the question above, the few that matter on top."""

import numpy as np
import pandas as pd
import streamlit as st

from meanlab.page import many_choice, many_files, many_list, many_opening, many_run, many_table, pictures, state, tables
from meanlab.page.cache import Outcome
from meanlab.page.guard import say
from meanlab.page.many_run import Ran
from meanlab.pictures import Drawing
from meanlab.pictures.many import Compared, many_picture
from meanlab.wording.names import short_noun
from meanlab.wording.numbers import level_text

ASK = (
    "Open a table here, or paste one above: one reading a row with the name of its sample beside it, or one sample a "
    "row with its replicates across. Every sample is asked the question above."
)


def draw(found: Outcome | None) -> None:
    """Draw the part: table, columns, run, result."""
    with st.container(key="many"):
        many_table.ask()
        content = many_table.in_use()
        if content is None:
            tables.sentences([ASK])
            return
        choice = many_choice.draw(content)
        if choice is None:
            say("Choose the columns with the readings and with the names of the samples.", "status")
            return
        ran = many_run.draw(content, choice)
        if ran is not None:
            _result(ran)


def _result(ran: Ran) -> None:
    for remark in ran.results.attrs.get("remarks", [])[:3]:
        say(remark, "notice")
    tables.sentences([summary(ran)])
    if state.widget(many_opening.TROUBLE):
        say(state.widget(many_opening.TROUBLE))
    places = many_list.draw(ran)
    pictures.draw(_picture(ran, places), "many")
    many_files.draw(ran, many_list.chosen_of(ran))


def summary(ran: Ran) -> str:
    """Return how many samples differ, counted after Holm, with the family named."""
    alpha, p = ran.question.alpha, ran.results["p"]
    family, alone = int(p.notna().sum()), int((p < alpha).sum())
    differing = int(np.sum(ran.outcomes == "differs"))
    return (
        f"{ran.words['differs'].capitalize()}: {differing:,} of {len(ran.results):,} samples, after Holm's adjustment "
        f"(family: the {family:,} samples with a p-value; α = {level_text(alpha, ran.sign)} for the whole family). "
        f"One by one it would be {alone:,}, and up to about {round(alpha * family):,} even if every mean were at its "
        "target."
    )


def _picture(ran: Ran, places: np.ndarray) -> Drawing | None:
    results = ran.results.iloc[places]
    targets = ran.targets[places]
    columns = (results["difference"], results["low"] - targets, results["high"] - targets, results["p"])
    samples = [
        Compared(
            ran.opened.name(int(place)),
            float(difference),
            None if pd.isna(low) else float(low),
            None if pd.isna(high) else float(high),
            str(ran.outcomes[place]),
        )
        for place, difference, low, high, p in zip(places, *columns, strict=True)
        if not pd.isna(p) and not pd.isna(difference)
    ]
    limit, noun = ran.question.number("equivalence_limit"), short_noun(ran.question.target_kind)
    return many_picture(samples, limit, ran.sign, ran.question.unit, noun, ran.words)
