"""What the commands of `certgen.cli` do with their arguments.

Each takes the parsed arguments, prints its results on standard output and its
messages on standard error, both in ASCII, and returns the exit status.
"""

from __future__ import annotations

import argparse
import sys
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import replace
from typing import TYPE_CHECKING

from certgen.errors import CertgenError, FileError, UnusableInputError, shorten

if TYPE_CHECKING:
    from certgen.batch import Outcome
    from certgen.claim import FirstOrderClaim
    from certgen.store import SavedFile

__all__ = ["ascii_only", "certify", "check", "say", "typeset"]

_CLAIM_KEYS = ("id", "asserts", "subject", "solution", "title", "note")


# --------------------------------------------------------------------------
# certify


def certify(arguments: argparse.Namespace) -> int:
    from certgen.batch import combine, failure

    try:
        claims = _read_claims(arguments)
    except CertgenError as error:
        if arguments.json:
            _print_json(failure(arguments.input or "--equation", error))
        raise
    outcomes = [_certify_one(claim, arguments) for claim in claims]
    if not arguments.json and any("counter_prime" in outcome.keys for outcome in outcomes):
        from certgen.report import COUNTER_PRIME

        _print(COUNTER_PRIME)
    return combine(outcome.status for outcome in outcomes)


def _read_claims(arguments: argparse.Namespace) -> list[FirstOrderClaim]:
    keys = {key: value for key in _CLAIM_KEYS if (value := getattr(arguments, key)) is not None}
    if (arguments.input is None) == (arguments.equation is None):
        raise UnusableInputError("give either --equation or a file of claims; see --help")
    if arguments.equation is not None:
        from certgen.claims_file import make_claim

        return [make_claim(equation=arguments.equation, **keys)]
    if arguments.input.endswith(".tex"):
        raise FileError(
            f"'{shorten(arguments.input, 300)}' is a .tex file; this version reads "
            "--equation \"...\" (plain or LaTeX notation) and claims files (.toml)"
        )
    if keys:
        raise UnusableInputError(
            f"--{' and --'.join(keys)}: only with --equation; in a file of claims these "
            "are keys of each claim"
        )
    from certgen.claims_file import read_claims

    return read_claims(arguments.input)


def _certify_one(claim: FirstOrderClaim, arguments: argparse.Namespace) -> Outcome:
    from certgen import api
    from certgen.batch import Outcome, failure
    from certgen.report import describe

    keys: dict[str, object] = {}
    try:
        with _progress(claim.id) as progress:
            certified = api.certify(claim, progress=progress)
        keys = describe(certified.checked)
        if not arguments.json:
            _print(str(certified))
        saved = certified.save(arguments.out, replace=arguments.replace, pdf=arguments.pdf)
        status = {"proved": 0, "refuted": 1}.get(certified.verdict, 3)
        outcome = Outcome(claim.id, status, "accepted", "", {**keys, **_files(saved)})
        if not arguments.json:
            _print(_file_rows(saved))
    except OSError:
        raise
    except Exception as error:
        failed = failure(claim.id, error)
        outcome = replace(failed, keys={**keys, **failed.keys})
        if keys and not arguments.json:
            _print(" not written")
        say(f"{claim.id}: {outcome.message}")
    if arguments.json:
        _print_json(outcome)
    else:
        _print("")
    return outcome


def _files(saved: Sequence[SavedFile]) -> dict[str, object]:
    return {"files": [{"path": str(file.path), "state": file.state} for file in saved]}


def _file_rows(saved: Sequence[SavedFile]) -> str:
    return "\n".join(f" {file.state:<14}{file.path}" for file in saved)


# --------------------------------------------------------------------------
# check


def check(arguments: argparse.Namespace) -> int:
    from certgen.batch import check_files, combine

    outcomes = []
    for part in _find(arguments.paths):
        if isinstance(part, list):
            checked = check_files(part, arithmetic=arguments.arithmetic, jobs=arguments.jobs)
            outcomes += list(_show(checked, len(part), arguments))
        else:
            outcomes += list(_show(iter([part]), 1, arguments))
    if not arguments.json:
        _print(_summary(outcomes, arguments.require))
    return combine(outcome.status for outcome in outcomes)


def _find(paths: list[str]) -> Iterator[list[str] | Outcome]:
    """Yield the files to check and, in their place, what cannot be looked through."""
    from certgen.batch import failure, find_certificates

    files: list[str] = []
    for path in paths:
        try:
            found, links = find_certificates(path)
        except CertgenError as error:
            yield files
            yield failure(path, error)
            files = []
        else:
            files += found
            for link in links:
                say(f"not followed: the symbolic link '{link}' to a folder")
    yield files


def _show(
    outcomes: Iterator[Outcome], total: int, arguments: argparse.Namespace
) -> Iterator[Outcome]:
    with _progress("checking") as progress:
        for number, outcome in enumerate(outcomes, 1):
            shown = _as_required(outcome, arguments.require)
            if progress is not None:
                progress(f"{number}/{total}" if number < total else "")
            if arguments.json:
                _print_json(shown)
            else:
                _print(_line(shown))
            yield shown


def _as_required(outcome: Outcome, required: str | None) -> Outcome:
    if outcome.state != "accepted" or required in (None, outcome.keys["verdict"]):
        return outcome
    return replace(outcome, status=1)


def _line(outcome: Outcome) -> str:
    verdict = f"{outcome.keys['verdict']:<9}" if outcome.state == "accepted" else ""
    return f"{outcome.state:<13}{verdict}{outcome.name}  {outcome.message}"


def _summary(outcomes: Sequence[Outcome], required: str | None) -> str:
    states = [outcome.state for outcome in outcomes]
    verdicts = [o.keys["verdict"] for o in outcomes if o.state == "accepted"]
    parts = []
    for state in dict.fromkeys(("accepted", *sorted(states))):
        text = f"{states.count(state)} {state}"
        if state == "accepted" and verdicts:
            counts = (f"{verdicts.count(v)} {v}" for v in sorted(set(map(str, verdicts))))
            text += f" ({', '.join(counts)})"
        parts.append(text)
    line = f"{len(states)} {'file' if len(states) == 1 else 'files'}: {', '.join(parts)}"
    missing = sum(verdict != required for verdict in verdicts)
    if required is not None and missing:
        line += f"; {missing} not {required} as --require asks"
    return line


# --------------------------------------------------------------------------
# typeset


def typeset(arguments: argparse.Namespace) -> int:
    from certgen import api
    from certgen.batch import Outcome, combine, failure
    from certgen.store import save_appendix

    certified, failed = [], []
    for path in arguments.paths:
        try:
            certified.append(api.load(path))
        except CertgenError as error:
            failed.append(failure(path, error))
    for outcome in failed:
        say(f"{outcome.name}: {outcome.message}; no appendix was written")
        if arguments.json:
            _print_json(outcome)
    if failed:
        return combine(outcome.status for outcome in failed)
    name = certified[0].claim.id if len(certified) == 1 else "certificates"
    saved = save_appendix(
        api.typeset(*certified),
        arguments.out,
        name,
        replace=arguments.replace,
        pdf=arguments.pdf,
    )
    if arguments.json:
        keys = {"ids": [item.claim.id for item in certified], **_files(saved)}
        _print_json(Outcome(name, 0, "accepted", "", keys))
    else:
        _print(_file_rows(saved))
    return 0


# --------------------------------------------------------------------------
# output


def ascii_only(text: str) -> str:
    """Return `text` with everything but printable ASCII spelled out."""
    return shorten(text, sys.maxsize)


def say(message: str) -> None:
    """Print a message on standard error."""
    print(f"certgen: {ascii_only(message)}", file=sys.stderr)


def _print(line: str) -> None:
    print("\n".join(ascii_only(part) for part in line.split("\n")))


def _print_json(outcome: Outcome) -> None:
    from certgen.report import json_line

    line = {"name": outcome.name, "state": outcome.state, "status": outcome.status}
    if outcome.message and outcome.state != "accepted":
        line["message"] = outcome.message
    _print(json_line({**line, **outcome.keys}))


@contextmanager
def _progress(label: str) -> Iterator[Callable[[str], None] | None]:
    """A function that shows a step on standard error, if that is a terminal."""
    if not sys.stderr.isatty():
        yield None
        return

    def show(step: str) -> None:
        text = ascii_only(f"{label}: {step}")[:78] if step else ""
        sys.stderr.write(f"\r{text:<78}\r")
        sys.stderr.flush()

    try:
        yield show
    finally:
        show("")
