"""Who is here, and who does what by default: names for the screens, roles from the plan."""

from __future__ import annotations

from runbook.run.ledger import Ledger


def performer(ledger: Ledger) -> str:
    """Whose reading it is unless somebody else is chosen: who performs the line, else the first person."""
    line, plan = ledger.present, ledger.plan
    role = line.who if line is not None and line.who is not None else plan.roles[0] if plan and plan.roles else ""
    return holder(ledger, role) or (ledger.people[0].name if ledger.people else "")


def holder(ledger: Ledger, role: str) -> str:
    """Who has this role; empty where nobody does."""
    return next((person.name for person in ledger.people if role in person.roles), "")


def roles_of(ledger: Ledger, name: str) -> str:
    """The roles of a person as one text."""
    person = ledger.person(name)
    return ", ".join(person.roles) if person is not None else ""


def next_name(ledger: Ledger, name: str) -> str:
    """The person after this one, round again from the last."""
    names = [person.name for person in ledger.people]
    if not names:
        return name
    return names[(names.index(name) + 1) % len(names)] if name in names else names[0]
