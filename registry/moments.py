"""Times as changes carry them: UTC, ISO 8601 with microseconds."""

from __future__ import annotations

from datetime import UTC, datetime

__all__ = ["format_time", "now_utc", "show_time"]


def format_time(moment: datetime) -> str:
    """A UTC time as changes carry it.

    Examples
    --------
    >>> format_time(datetime(2026, 12, 1, tzinfo=UTC))
    '2026-12-01T00:00:00.000000Z'
    """
    # not strftime, which on some systems writes years before 1000 without their zeros
    return moment.replace(tzinfo=None).isoformat(timespec="microseconds") + "Z"


def now_utc() -> str:
    """The time now, as changes carry it."""
    return format_time(datetime.now(UTC))


def show_time(recorded_at: str) -> str:
    """The time of a change as a person reads it, to the second.

    Examples
    --------
    >>> show_time("2026-12-01T12:34:56.789012Z")
    '2026-12-01T12:34:56Z'
    """
    return f"{recorded_at[:19]}Z"
