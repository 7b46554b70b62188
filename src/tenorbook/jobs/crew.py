"""Volumes written by several processes at once, or one after the other where that is not to be had.

What a volume's file holds depends on nothing but the volume, so that the bytes are the same either way.
"""

import logging
from collections.abc import Callable, Sequence
from concurrent.futures import Future, ProcessPoolExecutor, as_completed
from concurrent.futures.process import BrokenProcessPool
from multiprocessing import get_context
from pathlib import Path

from tenorbook.jobs.volume import Progress, Volume

_LOG = logging.getLogger(__name__)

WORTH_IT = 40_000
"""Rows of schedules from which on further processes are worth their start."""


def write_volumes(
    volumes: Sequence[tuple[Volume, Path]], processes: int, meanwhile: Callable[[], None], progress: Progress
) -> None:
    """Writes each volume to its path.

    Args:
        volumes: and where each goes.
        processes: at most so many at once.
        meanwhile: something else to write, while others write the volumes.
        progress: told the number of loans written so far.
    """
    waiting = list(volumes)
    rows = sum(len(each.schedule or ()) for volume, _ in volumes for each in volume.result.results)
    if processes > 1 and len(volumes) > 1 and rows >= WORTH_IT:
        waiting = _shared(waiting, min(processes, len(volumes)), meanwhile, progress)
    else:
        meanwhile()
    done = sum(_count(volume) for volume, _ in volumes) - sum(_count(volume) for volume, _ in waiting)
    for volume, path in waiting:
        volume.write(path, progress, done)
        done += _count(volume)


def _shared(
    volumes: list[tuple[Volume, Path]], processes: int, meanwhile: Callable[[], None], progress: Progress
) -> list[tuple[Volume, Path]]:
    """Has other processes write the volumes; returns those that they did not write.

    Raises:
        Exception: whatever a volume could not be written for.
    """
    left = list(volumes)
    ran = False
    try:
        with ProcessPoolExecutor(processes, mp_context=get_context("spawn")) as pool:
            futures = {pool.submit(_write, volume.stripped(), path): (volume, path) for volume, path in left}
            meanwhile()
            ran = True
            _collect(futures, left, progress)
    except (BrokenProcessPool, PermissionError, NotImplementedError, ImportError) as fault:
        _LOG.debug("no further processes", exc_info=fault)
    if not ran:
        meanwhile()
    return left


def _collect(
    futures: dict[Future[None], tuple[Volume, Path]], left: list[tuple[Volume, Path]], progress: Progress
) -> None:
    """Waits for the volumes, and strikes each off the list; at the first fault the others are given up."""
    done = 0
    try:
        for future in as_completed(futures):
            future.result()
            left.remove(futures[future])
            done += _count(futures[future][0])
            progress(done)
    except BaseException:
        for future in futures:
            future.cancel()
        raise


def _write(volume: Volume, path: Path) -> None:
    """What another process does."""
    volume.restored().write(path, lambda _: None)


def _count(volume: Volume) -> int:
    return sum(each.schedule is not None for each in volume.result.results)
