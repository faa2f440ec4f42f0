"""python -m certgen.checker FILE...: check stored certificates, standard library only."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from certgen.checker import check
from certgen.codec import BYTES_LIMIT
from certgen.errors import CertgenError, LimitError

STATUSES = """\
exit status: 0 all accepted, 1 a certificate rejected, 2 unusable input, 3 a limit
was reached, 4 an unknown version; with several files the first of 2, 1, 4, 3.
"""

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
    which, rest = claim.subject.split(" ", 1)
    print(f"  claim:   {which} non-zero {rest} of {equation} is {claim.asserts}")
    print(f"  verdict: {checked.certificate.verdict}")
    how = "both arithmetics" if arithmetic == "both" else f"{arithmetic} arithmetic"
    print(f"  digest:  {checked.digest} ({how})")
    return 0


def main(arguments: list[str]) -> int:
    """Check each file; return the first of 2, 1, 4, 3 that occurs, else 0."""
    parser = argparse.ArgumentParser(
        prog="python -m certgen.checker",
        description="Check stored certificates, without the prover and without reading "
        "the author's notation.",
        epilog=STATUSES,
        formatter_class=argparse.RawDescriptionHelpFormatter,
        allow_abbrev=False,
    )
    parser.add_argument("files", nargs="+", metavar="FILE", help="a stored certificate")
    parser.add_argument("--arithmetic", choices=("plain", "flint", "both"), default="plain",
                        help="plain: standard library alone (default); flint: python-flint; "
                        "both: the two must agree")  # fmt: skip
    given = parser.parse_args(arguments)
    statuses = {_check_file(name, given.arithmetic) for name in given.files}
    print(NOTE, file=sys.stderr)
    return next((status for status in (2, 1, 4, 3) if status in statuses), 0)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
