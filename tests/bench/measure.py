"""Timing and memory: medians in this process, peak memory of child processes."""

from __future__ import annotations

import multiprocessing
import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from math import log
from pathlib import Path


def seconds(work: Callable[[], object], *, budget: float = 1.0, most: int = 25) -> float:
    """The median time of repeated runs, within about `budget` seconds (at least one)."""
    times: list[float] = []
    start = time.perf_counter()
    while len(times) < most and (not times or time.perf_counter() - start < budget):
        begin = time.perf_counter()
        work()
        times.append(time.perf_counter() - begin)
    return statistics.median(times)


def seconds_in_child(work: Callable[[], object], limit: float) -> float | None:
    """The time of one run in a forked process, or None if it takes longer than `limit`."""
    context = multiprocessing.get_context("fork")
    receive, send = context.Pipe(duplex=False)

    def run() -> None:
        begin = time.perf_counter()
        work()
        send.send(time.perf_counter() - begin)

    child = context.Process(target=run)
    child.start()
    value = receive.recv() if receive.poll(limit) else None
    child.kill()
    child.join()
    return value


# A child inherits the peak memory of the process that starts it, hence a small one.
_STARTER = """
import resource, subprocess, sys, time
begin = time.perf_counter()
subprocess.run(sys.argv[1:], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
print(time.perf_counter() - begin, resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss)
"""


def command(arguments: list[str], *, runs: int = 5) -> tuple[float, float]:
    """The median wall time and the peak memory (MiB) of a command."""
    times, peak = [], 0.0
    for _ in range(runs):
        done = subprocess.run(
            [sys.executable, "-c", _STARTER, *arguments],
            capture_output=True, text=True, check=True,
        )  # fmt: skip
        wall, kib = done.stdout.split()
        times.append(float(wall))
        peak = max(peak, float(kib) / 1024)
    return statistics.median(times), peak


def python(code: str) -> tuple[float, float]:
    """One run of Python code in a fresh process: time and peak memory."""
    with tempfile.TemporaryDirectory() as folder:
        script = Path(folder) / "run.py"
        script.write_text(code)
        return command([sys.executable, str(script)], runs=1)


def growth(first: tuple[int, float], last: tuple[int, float]) -> float:
    """The exponent e with time ~ size^e between two sizes."""
    return log(last[1] / first[1]) / log(last[0] / first[0])


def show(value: float | None) -> str:
    """A time with a readable unit."""
    if value is None:
        return "-"
    if value < 1e-3:
        return f"{value * 1e6:.0f} us"
    if value < 1:
        return f"{value * 1e3:.2f} ms"
    return f"{value:.2f} s"
