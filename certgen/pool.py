"""Many items on all cores, the results in the order of the items.

The processes are spawned and not forked, so nothing is inherited but the
arguments; a process that dies (memory, a crash in a library) costs one item
its answer and no other.
"""

from __future__ import annotations

import multiprocessing
import os
import signal
from collections import deque
from collections.abc import Callable, Iterable, Iterator
from concurrent.futures import Future, ProcessPoolExecutor
from concurrent.futures.process import BrokenProcessPool
from contextlib import contextmanager
from itertools import islice
from typing import TypeVar

__all__ = ["cores", "map_in_order"]

Item = TypeVar("Item")
Result = TypeVar("Result")


def cores() -> int:
    """Return the number of cores this process may use."""
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1


def map_in_order(
    function: Callable[[Item], Result],
    items: Iterable[Item],
    *,
    lost: Callable[[Item], Result],
    jobs: int | None = None,
) -> Iterator[Result]:
    """Yield `function(item)` for every item, in order, on `jobs` cores (default: all).

    `function` and its results must be picklable; what it raises is raised here.
    `lost(item)` takes the place of the result when the process that worked on
    this item died.
    """
    waiting = deque(items)
    wanted = min(jobs or cores(), len(waiting))
    while waiting:
        try:
            yield from _run_pool(function, waiting, wanted)
        except BrokenProcessPool:
            yield _run_alone(function, waiting.popleft(), lost)


def _run_pool(
    function: Callable[[Item], Result], waiting: deque[Item], jobs: int
) -> Iterator[Result]:
    """Yield results and take their items from `waiting`, until done or a process dies."""
    with _pool(jobs) as pool:
        running: deque[Future[Result]] = deque()
        while waiting:
            for item in islice(waiting, len(running), 4 * jobs):
                running.append(pool.submit(function, item))
            result = running[0].result()
            running.popleft()
            waiting.popleft()
            yield result


def _run_alone(
    function: Callable[[Item], Result], item: Item, lost: Callable[[Item], Result]
) -> Result:
    try:
        with _pool(1) as pool:
            return pool.submit(function, item).result()
    except BrokenProcessPool:
        return lost(item)


@contextmanager
def _pool(jobs: int) -> Iterator[ProcessPoolExecutor]:
    """A pool whose processes never see Ctrl-C and never outlive an interruption."""
    before = set(multiprocessing.active_children())
    pool = ProcessPoolExecutor(jobs, mp_context=multiprocessing.get_context("spawn"))
    try:
        with _interrupts_held_back():
            pool.submit(_start).result()
        yield pool
    except BaseException:
        pool.shutdown(wait=False, cancel_futures=True)
        for child in set(multiprocessing.active_children()) - before:
            child.terminate()
        raise
    pool.shutdown()


def _start() -> None:
    """Do nothing: the first task starts the processes of the pool."""


@contextmanager
def _interrupts_held_back() -> Iterator[None]:
    """Block SIGINT here for a moment; processes started meanwhile keep it blocked."""
    if not hasattr(signal, "pthread_sigmask"):
        yield
        return
    old = signal.pthread_sigmask(signal.SIG_BLOCK, {signal.SIGINT})
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, old)
