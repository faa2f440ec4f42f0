"""Checking many stored certificates: what to check, one outcome for each.

An outcome is plain data, so that it can travel from another process; nothing
that goes wrong with one file touches the others.
"""

from __future__ import annotations

import os
from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field
from functools import partial
from typing import Literal

from certgen.api import Arithmetic, load
from certgen.errors import (
    CertgenError,
    DefectError,
    FileError,
    LimitError,
    RejectedError,
    UnsupportedVersionError,
    UnusableInputError,
    shorten,
)

__all__ = [
    "Outcome",
    "State",
    "check_file",
    "check_files",
    "combine",
    "failure",
    "find_certificates",
]

State = Literal[
    "accepted", "rejected", "malformed", "unreadable", "unsupported", "limit", "defect"
]

SERIAL_LIMIT = 8
"""Up to so many files the start of other processes costs more than it saves."""


@dataclass(frozen=True, slots=True)
class Outcome:
    """What came of one file or claim: exit status, one word, one line, JSON keys."""

    name: str
    status: int
    state: State
    message: str
    keys: dict[str, object] = field(default_factory=dict)


def combine(statuses: Iterable[int]) -> int:
    """Return the exit status of several: the first of 2, 1, 4, 3 that occurs, else 0."""
    found = set(statuses)
    return next((status for status in (2, 1, 4, 3) if status in found), 0)


def find_certificates(path: str) -> tuple[list[str], list[str]]:
    """Return (files, links): `path` itself, or the *.json files below a folder.

    Sorted; symbolic links to folders are not followed and listed in `links`.
    Raises FileError for a folder that cannot be read or holds no *.json file.
    """
    if not os.path.isdir(path):
        return [path], []
    files: list[str] = []
    links: list[str] = []
    for folder, names, entries in os.walk(path, onerror=_refuse_folder):
        names.sort()
        links += [p for n in names if os.path.islink(p := os.path.join(folder, n))]
        files += [os.path.join(folder, n) for n in sorted(entries) if n.endswith(".json")]
    if not files:
        raise FileError(f"there is no .json file in or below '{shorten(path, 300)}'")
    return files, links


def _refuse_folder(error: OSError) -> None:
    raise FileError(
        f"cannot read the folder '{shorten(error.filename, 300)}': {error.strerror}"
    ) from None


def check_files(
    paths: list[str], *, arithmetic: Arithmetic, jobs: int | None = None
) -> Iterator[Outcome]:
    """Yield the outcome of every file, in order; `jobs` processes (default: all cores)."""
    check = partial(check_file, arithmetic=arithmetic)
    if jobs == 1 or len(paths) < 2 or (jobs is None and len(paths) <= SERIAL_LIMIT):
        return map(check, paths)
    from certgen.pool import map_in_order

    return map_in_order(check, paths, lost=_lost, jobs=jobs)


def check_file(path: str, *, arithmetic: Arithmetic) -> Outcome:
    """Check the certificate in one file; never raises but for an interruption."""
    try:
        if path.endswith(".tex"):
            raise FileError(
                f"'{shorten(path, 300)}' is a .tex file; this version checks stored "
                "certificates (.json files and folders of them)"
            )
        certified = load(path, arithmetic=arithmetic)
        from certgen.report import describe, plain

        keys = describe(certified.checked)
        line = f"{certified.claim.id}  {plain(str(certified.claim.equation), 70)}"
    except Exception as error:
        return failure(path, error)
    return Outcome(path, 0, "accepted", line, keys)


def _lost(path: str) -> Outcome:
    return Outcome(
        path, 3, "limit", "the process that checked this file died (out of memory?)"
    )


_STATES: tuple[tuple[type[Exception], State], ...] = (
    (RejectedError, "rejected"),
    (FileError, "unreadable"),
    (UnusableInputError, "malformed"),
    (UnsupportedVersionError, "unsupported"),
    (LimitError, "limit"),
    (DefectError, "defect"),
)


def failure(name: str, error: Exception) -> Outcome:
    """Return the outcome that an error stands for."""
    if isinstance(error, MemoryError):
        return Outcome(name, 3, "limit", "the memory of this machine does not suffice")
    if not isinstance(error, CertgenError):
        kind = type(error).__name__
        text = (
            f"this is a defect of certgen ({kind}: {shorten(error, 200)}); please report it "
            "together with the command and its input"
        )
        return Outcome(name, 3, "defect", text)
    state = next(state for kind, state in _STATES if isinstance(error, kind))
    keys: dict[str, object] = {}
    if isinstance(error, RejectedError):
        keys = {
            "code": error.code,
            "json_path": error.path,
            "expected": error.expected,
            "found": error.found,
        }
    return Outcome(name, error.status, state, str(error), keys)
