"""Who takes part: a name for each role and a signing number of their own, in the order of the roles."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import ClassVar

from textual import on
from textual.binding import Binding, BindingType
from textual.containers import Horizontal, VerticalScroll
from textual.widget import Widget
from textual.widgets import Input

from runbook.bench.place import Keys, Place
from runbook.bench.rows import EMPTY, Row, wrapped
from runbook.bench.widgets.field import Field
from runbook.bench.widgets.lines import Lines
from runbook.errors import InputUnusable
from runbook.run.opening import Participant


class PeopleScreen(Place[tuple[Participant, ...] | None]):
    """The people, once they can take every role; None: back."""

    DEFAULT_CSS = """
    PeopleScreen .person { height: 1; padding: 0 1; }
    PeopleScreen .person Lines { width: 22; }
    PeopleScreen .name { width: 30; margin: 0 2 0 0; }
    PeopleScreen .number { width: 14; }
    """
    HEADING = "BRIEFING: WHO IS HERE"
    KEYS: ClassVar[Keys] = (("Enter", "next field; in the last: go on"), ("Tab", "next"), ("Esc", "back"))
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "back", show=False, priority=True)]

    def __init__(self, roles: tuple[str, ...], wrong: Callable[[tuple[Participant, ...]], None]) -> None:
        """One row a role; `wrong(people)` raises InputUnusable where they cannot take part so."""
        super().__init__()
        self._roles = roles
        self._wrong = wrong
        self._said = ""

    def body(self) -> Iterable[Widget]:
        """Rows of role, name, number."""
        yield Lines(self._above)
        with VerticalScroll(can_focus=False):
            for i, role in enumerate(self._roles):
                draft = self.bench.drafts.get(f"person {role}", "")
                with Horizontal(classes="person"):
                    yield Lines(lambda width, role=role: wrapped(role, width, "strong"))  # type: ignore[misc] # the default binds the role
                    yield _with_class(Field(draft, id=f"name-{i}", hint="name"), "name")
                    yield _with_class(Field("", id=f"number-{i}", hidden=True, hint="number"), "number")
        yield Lines(self._below, id="said")

    def _above(self, width: int) -> list[Row]:
        words = (
            " For each role a name and a number of at least three digits that only that person knows. One person may "
            "have two roles, with the same name and number, but never both ends of one hold point. The number attests "
            "a signature; it proves no identity."
        )
        return [EMPTY, *wrapped(words, width - 1), EMPTY]

    def _below(self, width: int) -> list[Row]:
        return [EMPTY, *wrapped(f" {self._said}", width - 1, "blocked")] if self._said else []

    def on_mount(self) -> None:
        """Into the first name."""
        self.query_one("#name-0", Field).focus()

    @on(Input.Changed)
    def _changed(self, event: Input.Changed) -> None:
        kind, _, at = (event.input.id or "").partition("-")
        if kind == "name":
            self.bench.drafts[f"person {self._roles[int(at)]}"] = event.value

    @on(Field.Typed)
    def _typed(self, event: Field.Typed) -> None:
        event.stop()
        last = event.field.id == f"number-{len(self._roles) - 1}"
        if not last:
            self.focus_next()
            return
        try:
            people = self.people()
            self._wrong(people)
        except InputUnusable as error:
            self._said = str(error)
            self.query_one("#said", Lines).refresh(layout=True)
            return
        self.dismiss(people)

    def people(self) -> tuple[Participant, ...]:
        """As typed; the same name in two rows is one person with two roles. Raises InputUnusable."""
        found: dict[str, Participant] = {}
        for i, role in enumerate(self._roles):
            name = self.query_one(f"#name-{i}", Field).value.strip()
            number = self.query_one(f"#number-{i}", Field).value.strip()
            before = found.get(name)
            if before is not None and number not in ("", before.number):
                raise InputUnusable(f"{name} stands here with two numbers: one person has one")
            found[name] = (
                Participant(name, (role,), number)
                if before is None
                else Participant(name, (*before.roles, role), before.number)
            )
        return tuple(found.values())

    def action_back(self) -> None:
        """Back to the numbers; the names stay."""
        self.dismiss(None)


def _with_class(field: Field, name: str) -> Field:
    field.add_class(name)
    return field
