"""What should be seen: computed where it can be, in plain sentences with their figures; else the author's words."""

from __future__ import annotations

from runbook.assess.sights.lines import line_sights, live_sights, not_to_come
from runbook.assess.sights.looking import Look, computed, liquid_height, written
from runbook.assess.sights.path import path_sights

__all__ = ["Look", "computed", "line_sights", "liquid_height", "live_sights", "not_to_come", "path_sights", "written"]
