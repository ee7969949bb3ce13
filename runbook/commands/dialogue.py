"""Asking on a terminal: one question a line, a wrong answer asked again with what is wrong, nothing lost on leaving.

Questions go to stderr and answers come from stdin, so that stdout stays the answer: the path of the file.
"""

from __future__ import annotations

import sys
from collections.abc import Iterator
from pathlib import Path

from runbook.commands.arguments import iso_date
from runbook.errors import InputUnusable, Problem
from runbook.procedure.dialogue.demonstration import Place, demonstration_form
from runbook.procedure.dialogue.form import AnswerRefused, Form, Question, Slot
from runbook.procedure.dialogue.vessel import vessel_form
from runbook.procedure.reader import read_apparatus

BACK = "<"
"""Typed instead of an answer: the question before it once more."""


def can_ask() -> bool:
    """Whether somebody sits there to be asked."""
    return sys.stdin.isatty() and sys.stderr.isatty()


def vessel() -> tuple[str, bool]:
    """(text of an apparatus file, every question was answered)."""
    _say(
        "A cell with a window, a loading cap V1, a let-down valve V2 on top and two gauges.\n"
        "For another kind of vessel answer what fits, and change the file by hand."
    )
    form = vessel_form()
    done = ask(form)
    return form.text(), done


def demonstration(path: Path) -> tuple[str, bool]:
    """(text of a procedure file at `path`, every question was answered). Raises RunbookError for a vessel unread."""
    beside = sorted(one.name for one in (path.parent / "apparatus").glob("*.yaml"))
    if not beside:
        raise InputUnusable(f"there is no vessel in {path.parent / 'apparatus'}: run 'runbook new apparatus' first")
    first = _first(tuple(beside))
    if not ask(first):
        return demonstration_form(Place(f"apparatus/{beside[0]}", None, iso_date(None))).text(), False
    name, fluid = first.answers["vessel"], first.answers["fluid"].strip('"')
    form = demonstration_form(_place(path.parent, f"apparatus/{name}", fluid))
    done = ask(form)
    return form.text(), done


def _first(beside: tuple[str, ...]) -> Form:
    """What has to be known before the rest can be asked."""
    from runbook.fluids.catalogue import find

    def judge(text: str) -> tuple[Problem, ...]:
        fluid = text.splitlines()[1].strip('"')
        try:
            find(fluid)
        except InputUnusable as error:
            return (Problem("your answers", 2, 1, str(error)),)
        return ()

    one = beside[0] if len(beside) == 1 else ""
    which = f"Which vessel: {', '.join(beside)}?" + (f" (Enter: {one})" if one else "")
    questions = (
        Question(which, beside[0], (Slot("vessel", beside[0], "word", beside),), otherwise=one),
        Question("Which fluid? (Enter: CO2)", "CO2", (Slot("fluid", "CO2", "text"),), otherwise="CO2"),
    )
    return Form("‹vessel›\n‹fluid›\n", questions, judge)


def _place(folder: Path, named: str, fluid: str) -> Place:
    """What the vessel and the fluid say before anything is asked."""
    from runbook.assess.choice.loading import ice
    from runbook.assess.choice.sight import Choice
    from runbook.assess.choice.standard import Wanted, hottest_target

    apparatus = read_apparatus(folder / named)
    hot = 303.15
    wanted = Wanted(fluid, hot, 291.15, 100.0, None, hottest_target(apparatus, hot))
    choice = Choice(apparatus, str(folder / named), wanted, "vanishes")
    best = choice.bounds().best_kg or choice.fluid.critical_density * choice.volume
    return Place(
        apparatus_file=named,
        apparatus=apparatus,
        today=iso_date(None),
        charge=f"{best * 1e3:.1f} g ± {choice.half * 1e3:.1f} g",
        released=not choice.fluid.data.hazards.release_forbidden,
        dry_ice=ice(choice, best) is not None,
        fluid=choice.fluid.name,
    )


def ask(form: Form) -> bool:
    """Ask all that is left; True where the last question was answered, False where the person left before."""
    at, questions = 0, form.questions
    _say(f"Ctrl-D leaves and keeps what was answered; {BACK} goes back to the question before.")
    lines = _typed()
    while at < len(questions):
        question = questions[at]
        if not form.asked(question):
            at += 1
            continue
        _say(f"\n{question.text}\n  for example: {question.example}")
        sys.stderr.write("> ")
        sys.stderr.flush()
        given = next(lines, None)
        if given is None:
            _say("")
            return False
        if given.strip() == BACK:
            at = _before(form, at)
            continue
        try:
            form.take(question, given)
        except AnswerRefused as why:
            _say(f"  {why}")
            continue
        at += 1
    return True


def _before(form: Form, at: int) -> int:
    """The question before, with its answer taken back."""
    for earlier in range(at - 1, -1, -1):
        if form.asked(form.questions[earlier]):
            form.forget(form.questions[earlier])
            return earlier
    return at


def _typed() -> Iterator[str]:
    """Lines as they are typed, until Ctrl-D or Ctrl-C."""
    while True:
        try:
            line = sys.stdin.readline()
        except KeyboardInterrupt:
            return
        if not line:
            return
        yield line.rstrip("\n")


def _say(text: str) -> None:
    print(text, file=sys.stderr)
