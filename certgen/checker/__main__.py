"""python -m certgen.checker FILE...: check stored certificates, standard library only."""

from __future__ import annotations

import sys
from pathlib import Path

from certgen.checker import check
from certgen.codec import BYTES_LIMIT
from certgen.errors import CertgenError, LimitError

USAGE = "usage: python -m certgen.checker [--arithmetic plain|flint|both] FILE..."

NOTE = (
    "note: the author's text ($.claim.as_written) was not compared with the claim; "
    "'certgen check' does that"
)


def _read(name: str) -> bytes:
    path = Path(name)
    if not path.is_file():
        raise CertgenError("not a regular file")
    if path.stat().st_size > BYTES_LIMIT:
        raise LimitError(f"the file is larger than the limit of {BYTES_LIMIT} bytes")
    return path.read_bytes()


def _check_file(name: str, arithmetic: str) -> int:
    try:
        checked = check(_read(name), arithmetic=arithmetic)  # type: ignore[arg-type]
    except CertgenError as error:
        word = {1: "rejected", 3: "limit", 4: "unsupported"}.get(error.status, "unusable")
        print(f"{word}: {name}: {error}")
        return error.status
    except OSError as error:
        print(f"unusable: {name}: {error.strerror}")
        return 2
    claim, equation = checked.certificate.claim, checked.certificate.claim.equation
    print(f"accepted: {name}: {claim.id}")
    print(f"  claim:   {claim.subject} of {equation} is {claim.asserts}")
    print(f"  verdict: {checked.certificate.verdict}")
    print(f"  digest:  {checked.digest} ({checked.arithmetic} arithmetic)")
    return 0


def main(arguments: list[str]) -> int:
    """Check each file; return the first of 2, 1, 4, 3 that occurs, else 0."""
    arithmetic = "plain"
    if arguments[:1] == ["--arithmetic"] and arguments[1:2]:
        arithmetic, arguments = arguments[1], arguments[2:]
    if not arguments or arithmetic not in ("plain", "flint", "both") or arguments[0] in (
        "-h",
        "--help",
    ):
        print(USAGE, file=sys.stderr)
        return 0 if arguments[:1] in (["-h"], ["--help"]) else 2
    statuses = {_check_file(name, arithmetic) for name in arguments}
    print(NOTE, file=sys.stderr)
    return next((status for status in (2, 1, 4, 3) if status in statuses), 0)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
