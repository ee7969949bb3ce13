"""The screens' clock is the wall's: in tests that wall stands in Greenwich."""

from __future__ import annotations

import time
from collections.abc import Iterator

import pytest


@pytest.fixture(autouse=True)
def greenwich(monkeypatch: pytest.MonkeyPatch) -> Iterator[None]:
    """UTC, whatever the machine's own time zone."""
    monkeypatch.setenv("TZ", "UTC")
    # Windows has no tzset; there the goldens are compared on a machine in UTC.
    tzset = getattr(time, "tzset", lambda: None)
    tzset()
    yield
    monkeypatch.undo()
    tzset()
