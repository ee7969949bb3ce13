"""Many lots at once: in processes of their own where that pays, in the order of the lots whoever computed them.

Fresh processes, never forked ones: the property library holds locks. For commands; nothing with a screen starts these.
"""

from __future__ import annotations

import os
import signal
from collections.abc import Callable
from concurrent.futures import ProcessPoolExecutor
from multiprocessing import get_context
from typing import Final

from runbook.rehearsal.lots import Lot
from runbook.rehearsal.timeline import Asked, one_lot, opened
from runbook.rehearsal.watching import PartRun

_MOST: Final = 4
"""Processes; each takes two seconds and a hundred megabytes to begin with."""
_PAYS: Final = 20
"""Lots below which one process is as fast."""
_here: list[tuple[tuple[Lot, ...], tuple[int, ...]]] = []
"""In a process that computes: the lots and the parts, read once."""


def all_lots(asked: Asked, given: tuple[Lot, ...], told: Callable[[int], None]) -> list[tuple[PartRun, ...]]:
    """Every lot's parts, in order; told: called with how many are done."""
    workers = min(_MOST, os.cpu_count() or 1)
    found = []
    if workers < 2 or asked.count < _PAYS:
        for lot in given:
            found.append(one_lot(lot, asked.parts))
            told(len(found))
        return found
    with ProcessPoolExecutor(workers, get_context("spawn"), _begin, (asked,)) as pool:
        waiting = [pool.submit(_one, index) for index in range(len(given))]
        try:
            for one in waiting:
                found.append(one.result())
                told(len(found))
        except BaseException:
            # Somebody who stops it does not wait for the lots that nobody has begun.
            pool.shutdown(cancel_futures=True)
            raise
    return found


def _begin(asked: Asked) -> None:
    # Only the one in front hears the keyboard; it ends the others.
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    _here.append((opened(asked)[2], asked.parts))


def _one(index: int) -> tuple[PartRun, ...]:
    given, parts = _here[0]
    return one_lot(given[index], parts)
