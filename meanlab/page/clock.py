"""Times as the visitor's clock shows them."""

from datetime import UTC, datetime, timedelta, timezone, tzinfo
from zoneinfo import ZoneInfo, ZoneInfoNotFoundError

import streamlit as st


def visitor_zone() -> tzinfo:
    """Return the time zone of the visitor's browser; UTC where it does not tell."""
    name = st.context.timezone
    try:
        if name:
            return ZoneInfo(name)
    except (ZoneInfoNotFoundError, ValueError):
        pass
    minutes = st.context.timezone_offset
    return UTC if minutes is None else timezone(timedelta(minutes=-minutes))


def saved_text(saved: datetime, zone: tzinfo, now: datetime) -> str:
    """Return when a page was saved: "Saved 14:02", with the day where it was not today.

    >>> from datetime import UTC
    >>> saved_text(datetime(2026, 12, 1, 14, 2, tzinfo=UTC), UTC, datetime(2026, 12, 1, 15, 0, tzinfo=UTC))
    'Saved 14:02'
    """
    local = saved.astimezone(zone)
    day = "" if local.date() == now.astimezone(zone).date() else f"{local:%Y-%m-%d} "
    return f"Saved {day}{local:%H:%M}"


def moment_text(time: str, zone: tzinfo) -> str:
    """Return a time (ISO 8601) as the clock of a zone shows it; a text that is none stays as it is.

    >>> moment_text("2026-12-01T13:02:11.5+00:00", timezone(timedelta(hours=1)))
    '2026-12-01 14:02'
    """
    try:
        return f"{datetime.fromisoformat(time).astimezone(zone):%Y-%m-%d %H:%M}"
    except (ValueError, OverflowError):
        return time
