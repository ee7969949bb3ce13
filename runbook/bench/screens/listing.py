"""The list a session begins with: try it without a vessel, open runs, loaded vessels, procedures."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from typing import ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.content import Content
from textual.widget import Widget
from textual.widgets import OptionList
from textual.widgets.option_list import Option

from runbook.bench.place import Keys, Place
from runbook.bench.rows import Row, printable, wrapped
from runbook.bench.widgets.lines import Lines


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of the list."""

    kind: str
    """'rehearse', 'bench', 'resume' or 'vessel'."""
    title: str
    """What it is; foreign text."""
    detail: str
    """Where it lies or how it stands; foreign text."""
    path: str
    """The procedure, or the journal of an open run; empty for a vessel."""


HEADINGS = {
    "rehearse": "TRY IT WITHOUT A VESSEL",
    "resume": "OPEN RUNS, to take up again",
    "vessel": "LOADED VESSELS",
    "bench": "PROCEDURES, at the vessel",
}
"""In this order: what a newcomer needs, then what must not be forgotten."""


class ListScreen(Place[Entry | None]):
    """The chosen entry; None: leave."""

    DEFAULT_CSS = """
    ListScreen OptionList { height: 1fr; border: none; padding: 0 1; background: $background; }
    ListScreen OptionList:focus { border: none; }
    ListScreen OptionList > .option-list--option-disabled { color: $text; }
    ListScreen #said { padding: 0 1; color: $text-warning; }
    """
    HEADING = "RUNBOOK  guides a demonstration with a sealed charge, step by step"
    KEYS: ClassVar[Keys] = (("Up Down", "choose"), ("Enter", "open"), ("F2", "keys"), ("Esc", "leave"))
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("escape", "leave", show=False),
        Binding("f2", "keys", show=False),
    ]

    def __init__(self, entries: tuple[Entry, ...], said: tuple[str, ...] = ()) -> None:
        """These entries; `said` stands beneath (a journal that cannot be read, an empty folder)."""
        super().__init__()
        self._entries = entries
        self._said = said

    def body(self) -> Iterable[Widget]:
        """The list, with headings that cannot be chosen."""
        yield OptionList(*self._options(), id="list", markup=False)
        yield Lines(self._warnings, id="said")

    def on_mount(self) -> None:
        """The first thing that can be opened."""
        listed = self.query_one(OptionList)
        listed.focus()
        listed.action_first()
        # What takes time waits until this stands.
        self.bench.stands()

    def add(self, entries: tuple[Entry, ...], said: tuple[str, ...] = ()) -> None:
        """What was found after the list was up; the choice stays where it is."""
        listed = self.query_one(OptionList)
        at = listed.highlighted
        chosen = listed.get_option_at_index(at).id if at is not None else None
        self._entries = (*self._entries, *entries)
        self._said = (*self._said, *said)
        listed.clear_options()
        listed.add_options(self._options())
        listed.highlighted = listed.get_option_index(chosen) if chosen is not None else at
        self.query_one("#said", Lines).refresh(layout=True)

    def _options(self) -> list[Option]:
        found = []
        for kind, heading in HEADINGS.items():
            of_kind = [(i, entry) for i, entry in enumerate(self._entries) if entry.kind == kind]
            if not of_kind:
                continue
            found.append(Option(Content.styled(heading, "bold"), disabled=True))
            for i, entry in of_kind:
                words = Content.assemble(f"  {printable(entry.title)}  ", (printable(entry.detail), "dim"))
                found.append(Option(words, id=str(i), disabled=kind == "vessel"))
        return found

    def _warnings(self, width: int) -> list[Row]:
        return [line for said in self._said for line in wrapped(said, width)]

    @on(OptionList.OptionSelected)
    def _chosen(self, event: OptionList.OptionSelected) -> None:
        event.stop()
        if event.option.id is not None:
            self.dismiss(self._entries[int(event.option.id)])

    def action_keys(self) -> None:
        """What every key does."""
        from runbook.bench.screens.pages import KeysScreen

        self.app.push_screen(KeysScreen())

    def action_leave(self) -> None:
        """Out; nothing is open here."""
        self.dismiss(None)
