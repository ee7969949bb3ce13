"""How a step is worded: one act, its verb first, its limits in numbers.

After the writing guides for technical procedures (DOE-STD-1029-92) and ANSI Z535.6 for warnings. A sentence that
breaks them is a warning or an advice: only a person can say whether it still reads well.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from typing import Final

from runbook.apparatus.model import Apparatus
from runbook.procedure.document import Route
from runbook.procedure.lines import Found, lines_of, texts_of
from runbook.procedure.model import DoStep, Procedure, QuickStep, StepWarning

_VERBS: Final = """add adjust align allow apply ask attach begin bleed blow boil bring brush call carry catch check
chill clamp clean clear close collect compare confirm connect cool count cover darken detach dim dip disconnect do
drain drive drop dry empty evacuate explain fill find fit fix flush follow freeze give go guide hand hang have heat
hook immerse insert install keep lay lead leave let lift light listen load lock look loosen lower make mark measure
melt mount move note observe open pack pass place plug point pour press prove pull pump purge push put raise reach
read record refill release remove repeat replace report reset return rinse rotate screw seal seat send set shade shake
shine show shut slide slip spread squeeze stand start steady step stir stop store swap sweep switch tag take tap tare
tell test tie tighten tilt touch trip try turn twist unclip undo unlock unplug unscrew unwrap use vent ventilate
verify wait warm warn wash watch wear weigh wind wipe wrap write zero"""
VERBS: Final = frozenset(_VERBS.split())
"""Verbs a step may begin with."""
_NO_ACT: Final = frozenset({"let", "wait", "watch", "step", "leave"})
"""Verbs that go on with the act before them."""
_CONDITIONS: Final = ("if", "when", "while", "until", "once", "where", "before", "after", "with", "do", "never")
_MODAL: Final = re.compile(
    r"\b(should|must|shall|may|is to|are to)\b(\s+not)?\s+(be\b|have\b|[a-z]+ed\b)", re.IGNORECASE
)
_VAGUE: Final = re.compile(
    r"\b(approximately|sufficient(ly)?|adequate(ly)?|normal(ly)?|as required|as necessary|carefully|properly|"
    r"slowly|gently|quickly|a while)\b",
    re.IGNORECASE,
)
_TAIL: Final = re.compile(r"\S\s+(if|when|unless)\s", re.IGNORECASE)
_ELSEWHERE: Final = re.compile(r"\bsee (the )?(warning|caution|note|above|below|page|step)\b", re.IGNORECASE)
_EXCEPT: Final = re.compile(r"\ball\b[^.]*\bexcept\b|\bnot\b[^.]*\bunless\b", re.IGNORECASE)
_MIXED: Final = re.compile(r"^(if|when|while|until|once)\b([^,]*)", re.IGNORECASE)
_LONGEST: Final = 25
"""Words of one sentence."""


def wording(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'verb first', 'one act', 'active voice', 'number instead', 'condition first', 'named by exception',
    'and with or' and 'long sentence'."""
    del apparatus
    for route, text in texts_of(procedure):
        for i, sentence in enumerate(_sentences(text)):
            # The first says what to do; what follows may say why.
            yield from _one(route, sentence, is_step=route[-1] == "do", first=i == 0)


def messages(procedure: Procedure, apparatus: Apparatus) -> Iterator[Found]:
    """Rules 'warning parts' and 'too many dangers'."""
    del apparatus
    words: list[tuple[Route, StepWarning]] = []
    for line in lines_of(procedure):
        if isinstance(line.step, DoStep | QuickStep) and line.step.warning is not None:
            words.append(((*line.route, "warning"), line.step.warning))
    for route, one in words:
        for key, text in (("hazard", one.hazard), ("could", one.could), ("avoid", one.avoid)):
            if _ELSEWHERE.search(text):
                yield Found("warning parts", (*route, key), "a warning is repeated where it counts, never referred to")
        if one.word == "NOTICE" and re.search(r"\b(injur|burn|kill|suffocat|death|hurt)", one.could, re.IGNORECASE):
            yield Found(
                "warning parts", (*route, "word"), "NOTICE is for what hurts nobody: CAUTION, WARNING or DANGER"
            )
        if not _is_act(one.avoid):
            yield Found(
                "warning parts", (*route, "avoid"), "say how to avoid it as an order: Wear, Keep, Do not", "warning"
            )
    dangers = [route for route, one in words if one.word == "DANGER"]
    if len(dangers) > 1 and len(dangers) > 0.1 * len(words):
        yield Found(
            "too many dangers", (*dangers[-1], "word"), "DANGER is for the most extreme situations alone", "advice"
        )


def _one(route: Route, sentence: str, is_step: bool, first: bool) -> Iterator[Found]:
    if first and not _is_act(sentence):
        yield Found(
            "verb first",
            route,
            f"begin with what to do, as an order: '{sentence.split()[0]}' is no such verb",
            "warning",
        )
    doubled = re.search(r"(?:,| and| then|;)\s+([a-z]+)\s+(?:the|it|[A-Z])", sentence)
    if is_step and doubled is not None and doubled[1] in VERBS - _NO_ACT:
        yield Found(
            "one act", route, f"two acts in one step ('{doubled[1]}' begins the second): make two steps", "advice"
        )
    if _MODAL.search(sentence):
        yield Found(
            "active voice", route, "say what to do, not what should be: 'Shut V3', not 'V3 should be shut'", "warning"
        )
    vague = _VAGUE.search(sentence)
    if vague is not None and not re.search(r"[0-9]", sentence):
        yield Found("number instead", route, f"'{vague[0]}' is for nobody to check: give a number", "warning")
    if is_step and _TAIL.search(sentence):
        yield Found("condition first", route, "put the condition before the act: 'If ..., shut V2'", "advice")
    if _EXCEPT.search(sentence):
        yield Found("named by exception", route, "name what is meant, not all but what is not", "warning")
    condition = _MIXED.match(sentence)
    if condition is not None and re.search(r"\band\b", condition[2]) and re.search(r"\bor\b", condition[2]):
        yield Found("and with or", route, "'and' and 'or' in one condition can be read two ways: split it", "warning")
    if len(sentence.split()) > _LONGEST:
        yield Found("long sentence", route, f"more than {_LONGEST} words: split it", "advice")


def _sentences(text: str) -> list[str]:
    """Its sentences; a point inside a number ends none."""
    return [s for s in re.split(r"(?<=[.!?])\s+", text.strip()) if re.search(r"\w", s)]


def _is_act(sentence: str) -> bool:
    first = re.split(r"[\s,]", sentence.strip().lower(), maxsplit=1)[0].strip(".!:")
    return first in VERBS or first in _CONDITIONS
