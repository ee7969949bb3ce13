"""States through our door beside the same questions through the library's high-level calls: ratios in one run.

`python -m tests.benchmarks.bench_fluids`
"""

from __future__ import annotations

import time
from collections.abc import Callable

import CoolProp.CoolProp as cp

from runbook.fluids.catalogue import fluids
from runbook.fluids.substance import substance

COUNT = 2000


def timed(ask: Callable[[float, float], object], places: list[tuple[float, float]]) -> float:
    """[s] for one question, the best of three runs."""
    best = float("inf")
    for _ in range(3):
        began = time.perf_counter()
        for temperature, density in places:
            ask(temperature, density)
        best = min(best, (time.perf_counter() - began) / len(places))
    return best


def main() -> None:
    """A line a fluid: microseconds of ours, ratio to the library's string calls, ratio to a bare update."""
    print(f"{'fluid':<22}{'pressure':>10}{'/ PropsSI':>11}{'/ bare':>8}{'whole state':>13}{'/ 6 PropsSI':>13}")
    for data in fluids():
        fluid = substance(data.name)
        t, d = 0.93 * fluid.critical_temperature, fluid.critical_density
        places = [(t + 1e-5 * k, d) for k in range(COUNT)]
        bare = cp.AbstractState("HEOS", data.library_name)

        def updated(temperature: float, density: float, bare: cp.AbstractState = bare) -> float:
            bare.update(cp.DmassT_INPUTS, density, temperature)
            return float(bare.p())

        def asked(temperature: float, density: float, name: str = data.library_name) -> float:
            return float(cp.PropsSI("P", "T", temperature, "Dmass", density, name))

        ours, high, low = timed(fluid.pressure, places), timed(asked, places[:200]), timed(updated, places)
        whole = timed(fluid.state, places)
        row = f"{ours * 1e6:>8.1f} us{ours / high:>11.3f}{ours / low:>8.2f}"
        row += f"{whole * 1e6:>10.1f} us{whole / (6 * high):>13.3f}"
        print(f"{data.name:<22}{row}")
    co2 = substance("carbon dioxide")
    solid = timed(co2.state, [(170.0 + 0.01 * k, 480.0) for k in range(COUNT)])
    print(f"solid + vapour of carbon dioxide: {solid * 1e6:.1f} us, which the library does not answer")


if __name__ == "__main__":
    main()
