"""The client of the computing process: whatever is not a clean answer in time is unknown."""

from __future__ import annotations

import asyncio
from pathlib import Path

import pytest

from runbook.answers import Answer, BindRequest, Question, Unanswered
from runbook.errors import EngineLost, FileProblems
from runbook.run.engine import ChildEngine

READY = "print(json.dumps({'ready': {'versions': {'fake': '1'}}}), flush=True)"
ANSWER = (
    "{'key': q['key'], 'now': [], 'ahead': [], 'left_alone': {'at_rest': True, 'known': True, 'futures': []},"
    " 'agreement': {'verdict': 'no reading', 'tag': None, 'read': None, 'read_U': None, 'computed': None,"
    " 'computed_U': None, 'proves': 'nothing'}, 'charge': None, 'charge_proved': False, 'valid': True,"
    " 'good_for_s': None, 'phases': ['A'], 'pressure': None, 'pressure_U': None, 'region': None,"
    " 'liquid_height': None, 'distance': {'pressure': None, 'temperature': None, 'seconds': None, 'rate': None},"
    " 'sights': []}"
)


def fake(tmp_path: Path, body: str, answer_s: float = 5.0, start: str = READY) -> ChildEngine:
    """An engine whose child runs `body` for each question q."""
    script = tmp_path / "child.py"
    script.write_text(
        f"import json, os, sys, time\n{start}\nfor line in sys.stdin:\n    q = json.loads(line)\n    {body}\n", "utf-8"
    )
    return ChildEngine(command=(str(script),), answer_s=answer_s, start_s=20.0)


def question(key: str = "k") -> Question:
    """Any question."""
    return Question(key, 0, 1, "open", (), "none", None, ())


async def asked(engine: ChildEngine) -> Answer | Unanswered:
    """One answer; the engine is ended."""
    try:
        return await engine.ask(question())
    finally:
        await engine.close()


async def test_a_clean_answer_comes_back(tmp_path: Path) -> None:
    """The same data that was sent."""
    found = await asked(fake(tmp_path, f"print(json.dumps({{'key': q['key'], 'answer': {ANSWER}}}), flush=True)"))
    assert isinstance(found, Answer)


@pytest.mark.parametrize(
    ("body", "said"),
    [
        ("print('hello', flush=True)", "no answer"),
        ("print('[1]', flush=True)", "no answer"),
        ("print(json.dumps({'key': 'other'}), flush=True)", "another question"),
        ("print(json.dumps({'key': q['key'], 'answer': {'key': 'k'}}), flush=True)", "none"),
        ("os._exit(3)", "ended"),
        ("raise RuntimeError('broken')", "ended"),
        ("print(json.dumps({'key': q['key'], 'why': 'no idea'}), flush=True)", "no idea"),
    ],
)
async def test_anything_else_is_unknown(tmp_path: Path, body: str, said: str) -> None:
    """Printing, raising, dying, answering something else: unanswered, with the reason, and no exception."""
    found = await asked(fake(tmp_path, body))
    assert isinstance(found, Unanswered)
    assert said in found.why


async def test_a_hung_child_is_killed_at_its_deadline(tmp_path: Path) -> None:
    """The deadline is the engine's, not the child's."""
    found = await asked(fake(tmp_path, "time.sleep(60)", answer_s=0.2))
    assert isinstance(found, Unanswered)
    assert "has not answered" in found.why


async def test_a_killed_child_is_started_again(tmp_path: Path) -> None:
    """The next question finds a new process."""
    once = tmp_path / "once"
    body = (
        f"(open({str(once)!r}, 'w'), os._exit(1)) if not os.path.exists({str(once)!r}) else "
        f"print(json.dumps({{'key': q['key'], 'answer': {ANSWER}}}), flush=True)"
    )
    engine = fake(tmp_path, body)
    assert isinstance(await engine.ask(question()), Unanswered)
    assert isinstance(await engine.ask(question()), Answer)
    await engine.close()


async def test_a_child_that_never_gets_ready_is_lost(tmp_path: Path) -> None:
    """Not being ready in time is said as such."""
    engine = fake(tmp_path, "pass", start="time.sleep(60)")
    engine.start_s = 0.2
    with pytest.raises(EngineLost):
        await engine.warm()
    await engine.close()


async def test_a_long_reply_is_no_trouble(tmp_path: Path) -> None:
    """A reply of a megabyte arrives whole."""
    body = f"print(json.dumps({{'pad': 'x' * 1000000, 'key': q['key'], 'answer': {ANSWER}}}), flush=True)"
    assert isinstance(await asked(fake(tmp_path, body)), Answer)


async def test_the_real_child_binds_and_answers() -> None:
    """End to end with the property library, in a process of its own."""
    engine = ChildEngine()
    path = Path(__file__).parents[2] / "procedures" / "co2-critical-point.yaml"
    try:
        bound = await engine.bind(BindRequest(procedure_path=str(path), on="2031-03-02"))
        assert bound.plan.vessel == "VC-2"
        assert dict(bound.versions)["CoolProp"].startswith("8.")
        found = await engine.ask(question())
        assert isinstance(found, Answer)
        with pytest.raises(FileProblems):
            await engine.bind(BindRequest(procedure_path=str(path.parent / "none.yaml"), on="2031-03-02"))
    finally:
        await engine.close()


async def test_a_cancelled_question_leaves_no_half_reply(tmp_path: Path) -> None:
    """A question given up kills the child, so that its late reply is never taken for the next one's."""
    engine = fake(tmp_path, "time.sleep(0.4); print(json.dumps({'key': q['key'], 'why': 'late'}), flush=True)")
    await engine.warm()
    task = asyncio.ensure_future(engine.ask(question("first")))
    await asyncio.sleep(0)
    await asyncio.sleep(0)
    task.cancel()
    with pytest.raises(asyncio.CancelledError):
        await task
    found = await engine.ask(question("second"))
    assert isinstance(found, Unanswered)
    await engine.close()
