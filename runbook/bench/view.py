"""What the run screen shows, band by band, as words and numbers that are ready to be painted.

Between the standing of a run and the widgets, so that a band can be tested as text without a run, and so that
no widget ever works out anything. Nothing here is a judgement: each word comes from the run's own sentences.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from runbook.drawing import Chart, Filling, Ruler


@dataclass(frozen=True, slots=True)
class HeaderView:
    """The first row."""

    title: str
    place: str
    """Part and step."""
    record: str
    """How far the record has come, or that it is not kept."""
    clock: str
    rehearsal: str = ""
    """Empty at the vessel; else what says that nothing here is real, with its speed."""


@dataclass(frozen=True, slots=True)
class DoView:
    """DO: what to do now."""

    warning: str
    """Signal word and the warning; empty where there is none."""
    instruction: str
    who: str
    loud: bool = False
    """The way back stands here instead of the step."""


@dataclass(frozen=True, slots=True)
class AskView:
    """ON?: whether the run may go on."""

    state: str
    """'yes', 'not yet' or 'blocked'."""
    word: str
    items: tuple[tuple[str, str], ...]
    """(what, what clears it or nothing), the first the one to read."""
    key: str
    """The key that goes with it."""


@dataclass(frozen=True, slots=True)
class AloneView:
    """ALONE: what happens if nobody does anything."""

    words: str
    verdict: str
    at_rest: bool


@dataclass(frozen=True, slots=True)
class CeilingView:
    """CEILING: how far it is to the limit that governs."""

    now: str
    worst: str
    ceiling: str
    ruler: Ruler
    distances: tuple[str, ...]
    """How far: in pressure, in kelvin, in minutes."""
    state: str
    """'clear', 'narrow' or 'blocked'."""


@dataclass(frozen=True, slots=True)
class SeeView:
    """SEE: what the class should see."""

    words: tuple[str, ...]
    source: str
    """'computed', 'written' or both."""
    if_not: str


@dataclass(frozen=True, slots=True)
class AgreeView:
    """AGREE?: whether readings and computation agree."""

    state: str
    """'yes', 'not yet' (cannot tell) or 'blocked' (disagrees)."""
    pair: str
    proves: str
    age: str


@dataclass(frozen=True, slots=True)
class PictureView:
    """What the pictures show."""

    filling: Filling
    lying: bool
    chart: Chart | None
    words: str
    """The same in words, for those who cannot see the pictures."""


@dataclass(frozen=True, slots=True)
class RunView:
    """The whole run screen."""

    header: HeaderView
    do: DoView
    ask: AskView
    alone: AloneView
    ceiling: CeilingView
    see: SeeView
    agree: AgreeView
    pictures: PictureView
    keys: tuple[tuple[str, str], ...] = field(default=())
    """(key, what it does), make safe first."""
