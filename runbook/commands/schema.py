"""`runbook schema procedure|apparatus`: the JSON schema for editors, on standard output."""

from __future__ import annotations

import json

from runbook.commands.arguments import Arguments
from runbook.errors import ExitCode


def main(argv: list[str]) -> int:
    """Print the schema; returns the exit code."""
    from runbook.procedure.schema import KINDS, editor_schema

    parser = Arguments(prog="runbook schema", description=__doc__)
    parser.add_argument("kind", choices=sorted(KINDS), help="which kind of file")
    asked = parser.parse_args(argv)
    print(json.dumps(editor_schema(asked.kind), indent=2, ensure_ascii=False))
    return int(ExitCode.GOOD)
