"""The account says when gauge and model parted, and what it may have been."""

from __future__ import annotations

from pathlib import Path

from runbook.answers import Agreement, Answer, Explanation
from runbook.run.clock import FakeClock
from runbook.run.events import Answered, Event, RunOpened, event_to_plain
from runbook.run.journal import Journal, read
from runbook.run.record import record_lines
from tests.run.plans import AGREES, PEOPLE, ROOM, answer, line, plan

OFF = Agreement("disagrees", "PG1", ROOM + 62.6e5, 1.2e5, ROOM + 60.1e5, 0.4e5, "nothing")
GAUGE = Explanation("gauge offset", 2.4e5, "Pa", 0.9, False, "re-zero")


def account(folder: Path, *answers: Answer) -> list[str]:
    """Of a run in which these answers came."""
    made = plan(line(1))
    clock = FakeClock()
    journal = Journal.create(folder / "run.jsonl")
    opened = RunOpened(made, PEOPLE, "", "", (("runbook", "0"),), False, 0, "2031-03-02")
    events: list[Event] = [opened, *(Answered(one) for one in answers)]
    for event in events:
        journal.append(*event_to_plain(event), clock.now())
        clock.advance(60.0)
    journal.close()
    return " ".join(" ".join(record_lines(read(folder / "run.jsonl").records)).split()).split("PG1 62.6")[1:]


def test_a_disagreement_stands_in_the_account_with_its_first_explanation(tmp_path: Path) -> None:
    """Both figures, both U, what it may be and the test."""
    found = account(tmp_path, answer("a", agreement=OFF, explanations=(GAUGE,)))
    assert len(found) == 1
    assert "±1.2, computed 60.1 ±0.4: disagrees: PG1 shows 2.4 bar too much? tap PG1, check its zero" in found[0]


def test_it_stands_there_once_until_they_agree_again(tmp_path: Path) -> None:
    """Every answer repeats it; the account does not."""
    off = answer("a", agreement=OFF, explanations=(GAUGE,))
    assert len(account(tmp_path, off, off, answer("b", agreement=AGREES), off)) == 2


def test_agreement_is_no_news(tmp_path: Path) -> None:
    """Nor is 'cannot tell', which a coarse gauge says all day."""
    coarse = Agreement("cannot tell", "PG1", ROOM + 62.6e5, 3.2e5, ROOM + 62.0e5, 0.4e5, "nothing")
    assert account(tmp_path, answer("a"), answer("b", agreement=coarse, explanations=(GAUGE,))) == []
