"""What the page remembers: every session key with its default, kept at each change and brought back by its address.

The only file that says session_state. Widgets take their value from here: their key is the name of a field.
"""

from collections.abc import Mapping
from copy import deepcopy
from datetime import UTC, datetime
from hashlib import sha256
from typing import Any

import streamlit as st
from streamlit.runtime.scriptrunner import get_script_run_ctx

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Entry
from meanlab.page import cache
from meanlab.page.fields import BENCH_FIELDS, FIELDS, PICKS, READINGS_FIELDS, STAYING
from meanlab.page.question_times import LEFT_OUT, READINGS, from_words
from meanlab.page.working import (
    Reopened,
    Working,
    alike,
    as_kept,
    bring_back,
    digests,
    empty,
    note_times,
    nothing_typed,
    replaced,
    snapshot,
    times_stand,
)

MOST_COMPARED = 1_000  # entries looked at to tell a further look from other readings
MOST_KEPT_CHARACTERS = 10_000_000
ADDRESS = "nb"
_WORKING = "working"
_FILES = "files"


def begin() -> Working:
    """Bring the page back or take in what was typed since the last run, and keep it before anything is computed."""
    if _WORKING not in st.session_state:
        st.session_state[_FILES] = {}
        st.session_state[_WORKING] = _brought_back()
    now = working()
    drawn, now.drawn = now.drawn, None
    for name in FIELDS:
        if name in st.session_state and (drawn is None or name in drawn):
            _take_in(now, name, st.session_state[name])
        else:  # a widget that is not drawn any more goes back to an older value
            st.session_state[name] = now.fields[name]
    note_times(now, datetime.now(UTC))
    keep()
    return now


def end() -> None:
    """Note which widgets stand on the page, and keep it as it is now."""
    run = get_script_run_ctx()
    working().drawn = None if run is None else run.shared.widget_user_keys_this_run.snapshot()
    keep()


def working() -> Working:
    """Return the page of this visitor."""
    found = st.session_state[_WORKING]
    assert isinstance(found, Working)
    return found


def value(name: str) -> Any:
    """Return the value of a field."""
    return working().fields[name]


def put(name: str, given: Any) -> None:
    """Set a field, in a callback: before the widgets of the next run are made."""
    working().fields[name] = given
    st.session_state[name] = given


def note(key: str, given: Any) -> None:
    """Set what a widget outside the fields holds, in a callback."""
    st.session_state[key] = given


def taken(key: str) -> bool:
    """Tell whether a callback asked for something, and forget that it did."""
    asked_for = bool(st.session_state.get(key))
    st.session_state[key] = False
    return asked_for


def file_bytes() -> bytes | None:
    """Return the content of the file in use, None where the readings are typed."""
    file = working().file
    return None if file is None else st.session_state[_FILES].get(file["digest"])


def find_file(digest: str) -> bytes | None:
    """Return a file that this page, or any page of the bench, still keeps; by its SHA-256."""
    here: bytes | None = st.session_state[_FILES].get(digest)
    return cache.working_states().find_file(digest) if here is None else here


def use_file(name: str, content: bytes) -> None:
    """Take the readings from a file from now on."""
    _set_aside("a file was opened")
    _forget_picks()
    put("readings_text", "")
    _take_file(name, content)
    _forget_looks()


def widget(key: str) -> Any:
    """Return what a widget holds at this moment, in a callback before the fields are taken in."""
    return st.session_state.get(key)


def clear() -> None:
    """Take readings and question away, what stands in the closed expander too; both can be put back."""
    _set_aside("readings and question were cleared", with_question=True)
    _empty_page({})


def open_set(name: str, fields: Mapping[str, Any], file: tuple[str, bytes] | None = None) -> None:
    """Open a sample set: its readings and its question in place of everything on the page."""
    _set_aside(f'the sample set "{name}" was opened', with_question=True)
    _empty_page(fields)
    if file is not None:
        _take_file(*file)


def open_entry(entry: Entry, again: Reopened, own: bool) -> None:
    """Bring readings and question of an entry back in place of everything on the page.

    The parts of the question were set when the entry says so; ``own`` tells that it stands in this bench's notebook.
    """
    open_set("", again.fields, again.file)
    now = working()
    if now.previous is not None:
        now.previous["cause"] = f"entry {entry.number} was opened"
    now.left_out = {place: dict(said) for place, said in again.left_out.items()}
    marks = [_mark(text) for text in again.entries[:MOST_COMPARED]]
    now.first, now.looks = {"parts": dict(again.first_parts), "entries": marks}, entry.analysis.question.look
    now.notice = again.notice
    times_stand(now, from_words(entry.set_times))
    if own:
        saved_as(entry)


def saved_as(entry: Entry) -> None:
    """Note as which entry the result of the page was saved."""
    now = working()
    fingerprint = entry.analysis.provenance.fingerprint
    now.entry = {"number": entry.number, "key": entry.key, "time": entry.time, "fingerprint": fingerprint}


def put_back() -> None:
    """Put back what the last clear, replace or sample set took away; what stood there can be put back in turn."""
    now = working()
    before = now.previous
    if before is None:
        return
    now.previous = snapshot(now, "the previous readings were put back", before["with_question"])
    for name, given in before["fields"].items():
        if name in FIELDS:
            put(name, given)
    now.file, now.left_out = before["file"], before["left_out"]
    now.first, now.looks = before.get("first"), before.get("looks", 1)
    times = before.get("set_times", {})
    if not before["with_question"]:
        times = now.set_times | {name: times[name] for name in (READINGS, LEFT_OUT) if name in times}
    times_stand(now, times)


def leave_out(place: int, text: str, cause: str) -> None:
    """Leave a reading out by hand, with its cause."""
    working().left_out[str(place)] = {"text": text, "cause": cause}


def take_back(place: int) -> None:
    """Count a reading again that was left out."""
    working().left_out.pop(str(place), None)


def start_afresh() -> None:
    """Begin an empty page under an address of its own; the one before stays under its address."""
    st.query_params.pop(ADDRESS, None)
    st.session_state[_FILES] = {}
    now = st.session_state[_WORKING] = empty(*_bench())
    for name in FIELDS:
        put(name, now.fields[name])


def saw_result(parts: Mapping[str, Any], entries: tuple[str, ...]) -> Working:
    """Note that a result is shown: with which parts of the question, and whether the readings grew since the last.

    Other readings begin a new count; a correction does not; readings added to the ones before are a further look.
    """
    now = working()
    marks = [_mark(entry) for entry in entries]
    before = None if now.first is None else now.first["entries"]
    if before is None or not alike(before, marks):
        now.first, now.looks = {"parts": dict(parts), "entries": marks}, 1
        return now
    if len(marks) > len(before) and marks[: len(before)] == before:
        now.looks += 1
    now.first = {"parts": now.first["parts"], "entries": marks} if now.first else None
    return now


def keep() -> None:
    """Keep the page as it is now, where something changed; a failure is said on the page, which works on."""
    now = working()
    if not cache.kept_on_this_address():
        now.trouble = ""
        return
    if len(now.fields["readings_text"]) > MOST_KEPT_CHARACTERS:
        now.trouble = "Not saved: the text is longer than 10 MB."
        return
    content = as_kept(now)
    mark = sha256(repr(content).encode()).hexdigest()
    if mark == now.last_kept or (not now.key and nothing_typed(now)):
        return
    try:
        states = cache.working_states()
        key = now.key or states.new_key()
        for digest in digests(now):
            if digest in st.session_state[_FILES]:
                states.keep_file(key, st.session_state[_FILES][digest])
        now.saved = states.keep(key, content, digests(now))
    except NotebookComplaint as complaint:
        now.trouble = f"Not saved. {complaint}"
        return
    now.key, now.last_kept, now.trouble = key, mark, ""
    st.query_params[ADDRESS] = key


def _brought_back() -> Working:
    key = st.query_params.get(ADDRESS, "")
    now = empty() if key else empty(*_bench())
    if not key or not cache.kept_on_this_address():
        return now
    try:
        states = cache.working_states()
        kept = states.load(key)
        if kept is None:
            st.query_params.pop(ADDRESS, None)
            now = empty(*_bench())
            now.notice = "Nothing is kept under this address; this is an empty page."
            return now
        bring_back(now, kept)
        now.key = key
        for digest in digests(now):
            content = states.load_file(key, digest)
            if content is not None:
                st.session_state[_FILES][digest] = content
    except NotebookComplaint as complaint:
        now.trouble = str(complaint)
    return now


def _take_in(now: Working, name: str, given: Any) -> None:
    before = now.fields[name]
    if given == before:
        return
    if name == "readings_text" and given.strip():
        if now.file is not None:
            _set_aside("readings were pasted in place of a file")
            now.file = None
            now.left_out, now.first = {}, None
            _forget_picks()
        elif replaced(before, given):
            _set_aside("the readings were replaced")
            now.left_out = {}
            _forget_picks()
    elif name == "readings_text" and before.strip():
        _set_aside("the readings were cleared")
        now.left_out = {}
        _forget_looks()
    now.fields[name] = given


def _forget_picks() -> None:
    """Forget what was chosen in other readings: their decimal sign, column, rows and preparations."""
    for pick in PICKS:
        put(pick, deepcopy(FIELDS[pick]))


def _set_aside(cause: str, with_question: bool = False) -> None:
    now = working()
    now.notice = ""
    if now.fields["readings_text"].strip() or now.file is not None:
        now.previous = snapshot(now, cause, with_question)


def _empty_page(fields: Mapping[str, Any]) -> None:
    """Take everything off the page and put these fields on it."""
    _empty_readings()
    for key, default in FIELDS.items():
        if key not in STAYING:
            put(key, deepcopy(fields.get(key, default)))


def _empty_readings() -> None:
    for name in READINGS_FIELDS:
        put(name, deepcopy(FIELDS[name]))
    now = working()
    now.file, now.left_out = None, {}
    _forget_looks()


def _take_file(name: str, content: bytes) -> None:
    digest = sha256(content).hexdigest()
    st.session_state[_FILES][digest] = content
    working().file = {"name": name, "digest": digest}


def _bench() -> tuple[dict[str, str], str]:
    """Return the fields that a new page begins with as they were at the last entry, and the unit of that entry."""
    if not cache.kept_on_this_address():
        return {}, ""
    try:
        kept = cache.notebook().bench_defaults()
    except NotebookComplaint:  # said where the page is to be kept
        return {}, ""
    begun = {field: kept[name] for name, field in BENCH_FIELDS.items() if kept[name] and name != "unit"}
    return begun, kept["unit"]


def _mark(text: str) -> str:
    return sha256(text.encode("utf-8", "surrogatepass")).hexdigest()[:12]


def _forget_looks() -> None:
    now = working()
    now.first, now.looks = None, 1
