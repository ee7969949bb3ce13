"""The physics of a simulated vessel as its apparatus file and what goes wrong make it: sides of the body, relief.

Everything is as written, a limit of the source at its hottest; nothing is judged.
"""

from __future__ import annotations

from runbook.apparatus.relief import lowest_opening
from runbook.assess.futures import hottest_source
from runbook.assess.heat_time import heat_path
from runbook.assess.scene import Scene
from runbook.charge.lumps import HeatPath, two_sided
from runbook.rehearsal.faults import Troubles
from runbook.rehearsal.vessel import Relieving, Simulation

_AROUND = ("water bath", "hot air")
"""Sources that are on every side of a body."""


def simulation_of(scene: Scene, troubles: Troubles) -> Simulation:
    """The physics of the vessel of a scene."""
    source = scene.apparatus.heat_source
    path = heat_path(scene, None if source is None else hottest_source(scene, source))
    volume = scene.apparatus.volume.free.value
    return Simulation(scene.substance, volume, _sides(scene, path), relieving(scene, troubles))


def _sides(scene: Scene, path: HeatPath) -> HeatPath:
    """A body has a far side where its source touches one."""
    source = scene.apparatus.heat_source
    return path if source is None or source.kind in _AROUND else two_sided(path)


def relieving(scene: Scene, troubles: Troubles) -> Relieving | None:
    """The relief device on the charge's space, as it truly opens; None where there is none."""
    device = next((r for r in scene.apparatus.relief if r.space == scene.charge_space), None)
    if device is None:
        return None
    rated = device.bursts_at if device.bursts_at is not None else device.opens_at
    assert rated is not None, "the model refuses a device without a pressure"
    opens = troubles.relief_opens(lowest_opening(device).pascal, rated.pascal)
    return Relieving(scene.barometer.middle_Pa + opens, device.kind == "relief valve")
