"""A line to type into: foreign text is never markup, and the word `safe` is make safe in every one of them."""

from __future__ import annotations

from typing import ClassVar

from textual.binding import Binding, BindingType
from textual.message import Message
from textual.widgets import Input

from runbook.bench.style import MAKE_SAFE_WORD


class Field(Input):
    """An input that hands over what was typed and never quits, copies or pastes by accident."""

    DEFAULT_CSS = """
    Field { width: 1fr; height: 1; border: none; padding: 0; background: $surface; }
    Field:focus { border: none; background: $boost; }
    """

    BINDINGS: ClassVar[list[BindingType]] = [Binding("enter", "submit", "enter", show=False)]

    class Typed(Message):
        """The text was finished with Enter."""

        def __init__(self, field: Field, text: str) -> None:
            super().__init__()
            self.field = field
            """Where it was typed."""
            self.text = text
            """As typed."""

        @property
        def control(self) -> Field:
            """For `@on(Field.Typed, '#id')`."""
            return self.field

    def __init__(self, text: str = "", *, id: str, hidden: bool = False, hint: str = "") -> None:
        """A field that begins with `text`; `hidden` shows dots instead of what is typed."""
        super().__init__(value=text, id=id, password=hidden, placeholder=hint, select_on_focus=False, compact=True)

    async def action_submit(self) -> None:
        """Make safe where the word for it stands here, else hand over the text."""
        if self.value.strip().lower() == MAKE_SAFE_WORD:
            self.value = ""
            await self.run_action("app.make_safe")
            return
        self.post_message(self.Typed(self, self.value))
