"""Every dated proof on one day."""

from __future__ import annotations

import datetime

import pytest

from runbook.apparatus.certificates import certificates
from runbook.quantities import NOT_KNOWN
from tests.apparatus.cell import cell

CELL = cell()


def states(on: str, **changes: object) -> dict[str, str]:
    """State by 'tag what' on a day, of the vessel with fields changed."""
    day = datetime.date.fromisoformat(on)
    return {f"{c.tag} {c.what}": c.state for c in certificates(CELL.model_copy(update=changes), day)}


def test_on_the_issue_date_everything_is_valid() -> None:
    """All of the shipped vessel's papers hold on 2 March 2031."""
    assert set(states("2031-03-02").values()) == {"valid"}


@pytest.mark.parametrize(
    ("on", "what", "state"),
    [
        ("2033-02-11", "VC-2 proof test", "valid"),
        ("2033-02-12", "VC-2 proof test", "expired"),
        ("2031-02-10", "VC-2 proof test of 2031-02-11", "not yet valid"),
        ("2032-02-11", "RD1 bursting disc", "valid"),
        ("2032-02-12", "RD1 bursting disc", "expired"),
        ("2031-02-10", "RV2 relief valve of 2031-02-11", "not yet valid"),
        ("2032-02-01", "PG1 pressure instrument", "expired"),
        ("2031-02-13", "VC-2 approval of the figures of 2031-02-14", "not yet valid"),
        ("2031-02-11", "H1 test of the cut-out of 2031-02-12", "not yet valid"),
    ],
)
def test_a_proof_holds_from_its_day_to_its_last_day(on: str, what: str, state: str) -> None:
    """The last day counts; a day before the first is not yet valid."""
    assert states(on)[what] == state


def test_what_is_not_known_is_not_valid() -> None:
    """An unknown proof test, cycle count, term or cut-out test is said to be not known."""
    gauge = CELL.instruments[0].model_copy(update={"valid_until": NOT_KNOWN})
    source = CELL.heat_source
    assert source is not None
    found = states(
        "2031-03-02",
        proof_test=NOT_KNOWN,
        cycles=NOT_KNOWN,
        instruments=(gauge,),
        heat_source=source.model_copy(update={"tested": None}),
    )
    unknown = {what for what, state in found.items() if state == "not known"}
    assert unknown == {"VC-2 proof test", "VC-2 pressure cycles", "PG1 pressure instrument", "H1 test of the cut-out"}


def test_cycles_run_out() -> None:
    """The allowed count reached, nothing more may be done; the logbook's count is added to the file's."""
    day = datetime.date(2031, 3, 2)
    assert [c.state for c in certificates(CELL, day, 463) if "cycles" in c.what] == ["valid"]
    assert [c.state for c in certificates(CELL, day, 464) if "cycles" in c.what] == ["expired"]
