"""Many files at once: order, processes that die, interruptions, exit statuses."""

from __future__ import annotations

import itertools
import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from certgen.batch import check_files, combine, failure, find_certificates
from certgen.errors import (
    ClaimError,
    DefectError,
    ExpressionError,
    FileError,
    LimitError,
    MalformedError,
    RejectedError,
    UnsupportedVersionError,
)
from certgen.pool import cores, map_in_order

ROOT = Path(__file__).parent.parent


def _slow_when_early(number: int) -> int:
    time.sleep(0.2 if number < 2 else 0)
    return number * number


def _die_at_seven(number: int) -> int:
    if number == 7:
        os.kill(os.getpid(), signal.SIGKILL)
    return number


def _raise_at_two(number: int) -> int:
    if number == 2:
        raise LimitError("two")
    return number


def _lost(number: int) -> int:
    return -number


def test_results_come_in_the_order_of_the_items() -> None:
    """The first items are the slowest, and still come first; more items than a window."""
    found = list(map_in_order(_slow_when_early, range(40), lost=_lost, jobs=2))
    assert found == [n * n for n in range(40)]
    assert list(map_in_order(_slow_when_early, [], lost=_lost)) == []


def test_a_process_that_dies_costs_its_own_item_alone() -> None:
    """As after a crash in a library or for want of memory: one answer is lost."""
    found = list(map_in_order(_die_at_seven, range(20), lost=_lost, jobs=2))
    assert found == [-7 if n == 7 else n for n in range(20)]


def test_an_exception_of_the_function_is_raised_here() -> None:
    """Results before it were delivered; the pool is gone afterwards."""
    results = map_in_order(_raise_at_two, range(20), lost=_lost, jobs=2)
    assert list(itertools.islice(results, 2)) == [0, 1]
    with pytest.raises(LimitError, match="two"):
        next(results)


def test_at_least_one_core_is_counted() -> None:
    """The default number of processes is that of the cores this process may use."""
    assert cores() >= 1


_SLEEPERS = """
import time
from certgen.pool import map_in_order
def show(results):
    print("started", flush=True)
    for _ in results: pass
show(map_in_order(time.sleep, [0] + [600] * 8, lost=print, jobs=2))
"""


@pytest.mark.parametrize("whole_group", [True, False])
def test_ctrl_c_ends_all_processes_quietly(whole_group: bool) -> None:
    """SIGINT to the group (a terminal) or to the parent alone: no process stays, no noise."""
    with subprocess.Popen(
        [sys.executable, "-c", _SLEEPERS],
        stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, cwd=ROOT,
        start_new_session=True,
    ) as process:  # fmt: skip
        assert process.stdout is not None and process.stderr is not None
        assert process.stdout.readline() == "started\n"
        while len(_children(process.pid)) < 3:  # two workers and the resource tracker
            time.sleep(0.05)
        children = _children(process.pid)
        time.sleep(0.5)
        if whole_group:
            os.killpg(process.pid, signal.SIGINT)
        else:
            process.send_signal(signal.SIGINT)
        _, errors = process.communicate(timeout=60)
    assert errors.count("Traceback") == 1, "only the parent was interrupted"
    assert errors.rstrip().endswith("KeyboardInterrupt")
    deadline = time.monotonic() + 30
    while (left := [pid for pid in children if _runs(pid)]) and time.monotonic() < deadline:
        time.sleep(0.05)
    assert left == []


def _runs(pid: int) -> bool:
    """Whether there is such a process that has not ended (a zombie has)."""
    try:
        return Path(f"/proc/{pid}/stat").read_text().rsplit(")", 1)[1].split()[0] != "Z"
    except OSError:
        return False


def _children(pid: int) -> list[int]:
    return [
        int(n) for n in Path(f"/proc/{pid}/task/{pid}/children").read_text().split()
    ]


def test_the_exit_status_of_several_is_the_first_of_2_1_4_3() -> None:
    """All subsets of the statuses, by the words of the documentation."""
    for size in range(6):
        for statuses in itertools.combinations((0, 1, 2, 3, 4), size):
            if 2 in statuses:
                expected = 2
            elif 1 in statuses:
                expected = 1
            elif 4 in statuses:
                expected = 4
            else:
                expected = 3 if 3 in statuses else 0
            assert combine(statuses) == expected


@pytest.mark.parametrize(
    ("error", "status", "state"),
    [
        (RejectedError("c", "$.p", "e", "f"), 1, "rejected"),
        (MalformedError("m", path="$.p"), 2, "malformed"),
        (ClaimError("m"), 2, "malformed"),
        (ExpressionError("m"), 2, "malformed"),
        (FileError("m"), 2, "unreadable"),
        (UnsupportedVersionError("m"), 4, "unsupported"),
        (LimitError("m"), 3, "limit"),
        (DefectError("m"), 3, "defect"),
        (MemoryError(), 3, "limit"),
        (RecursionError("m"), 3, "defect"),
        (ZeroDivisionError("m\nn"), 3, "defect"),
    ],
)
def test_every_error_has_its_status_and_word(error: Exception, status: int, state: str) -> None:
    """The message is one line that names what went wrong."""
    outcome = failure("name", error)
    assert (outcome.status, outcome.state) == (status, state)
    assert outcome.message
    assert "\n" not in outcome.message


def test_a_rejection_keeps_its_parts() -> None:
    """Code, JSON path, expected and found are separate keys."""
    keys = failure("name", RejectedError("c", "$.p", "e", "f")).keys
    assert keys == {"code": "c", "json_path": "$.p", "expected": "e", "found": "f"}


def test_a_folder_is_searched_to_the_bottom_in_a_stable_order(tmp_path: Path) -> None:
    """*.json files, hidden folders included; links to folders are reported, not followed."""
    for name in ("b/2.json", "b/1.json", "a.json", ".hidden/c.json", "b/readme.md"):
        path = tmp_path / name
        path.parent.mkdir(exist_ok=True)
        path.touch()
    (tmp_path / "link").symlink_to(tmp_path / "b")
    files, links = find_certificates(str(tmp_path))
    names = [str(Path(file).relative_to(tmp_path)) for file in files]
    assert names == ["a.json", ".hidden/c.json", "b/1.json", "b/2.json"]
    assert links == [str(tmp_path / "link")]


def test_a_folder_without_certificates_is_an_error(tmp_path: Path) -> None:
    """An empty answer must not look like success."""
    with pytest.raises(FileError, match=r"no \.json file"):
        find_certificates(str(tmp_path))


def test_all_cores_and_one_core_say_the_same(tmp_path: Path) -> None:
    """Twelve bad files: a pool and a loop give equal outcomes in equal order."""
    for number in range(12):
        (tmp_path / f"{number:02}.json").write_text("{}\n" * (number % 3))
    (tmp_path / "10.json").unlink()
    files = [str(tmp_path / f"{number:02}.json") for number in range(12)]
    serial = list(check_files(files, arithmetic="plain", jobs=1))
    assert list(check_files(files, arithmetic="plain", jobs=2)) == serial
    assert [outcome.name for outcome in serial] == files
    assert {outcome.state for outcome in serial} == {"malformed", "unreadable"}
