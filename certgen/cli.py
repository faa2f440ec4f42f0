"""The command line: `certgen certify`, `certgen check`, `certgen typeset`.

Standard output carries the results, standard error the progress and the
messages; both are ASCII.  What the commands do is in `certgen.commands`, which
imports what a command needs when it runs.
"""

from __future__ import annotations

import argparse
import os
import sys
from collections.abc import Callable, Sequence
from typing import NoReturn

from certgen import __version__, cli_help, commands
from certgen.commands import ascii_only, say

__all__ = ["main"]


def main(argv: Sequence[str] | None = None) -> int:
    """Run the command line and return the exit status; no exception leaves it."""
    try:
        status = _run(argv)
        sys.stdout.flush()
        return status
    except KeyboardInterrupt:
        say("interrupted")
        _silence()
        return 130
    except BrokenPipeError:
        _silence()
        return 2
    except OSError as error:
        say(f"cannot write the result: {error.strerror or error}")
        _silence()
        return 2


def _run(argv: Sequence[str] | None) -> int:
    try:
        arguments = _parser().parse_args(argv)
        run: Callable[[argparse.Namespace], int] = arguments.run
        return run(arguments)
    except SystemExit as stop:
        return stop.code if isinstance(stop.code, int) else 2
    except OSError:
        raise
    except Exception as error:
        from certgen.batch import failure

        outcome = failure("", error)
        say(outcome.message)
        return outcome.status


def _silence() -> None:
    """Let nothing more be written to a standard output that is gone."""
    try:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    except (OSError, ValueError):
        return


# --------------------------------------------------------------------------
# the arguments


class _Parser(argparse.ArgumentParser):
    def error(self, message: str) -> NoReturn:
        self.exit(2, f"certgen: {ascii_only(message)}\ntry '{self.prog} --help'\n")


class _Help(argparse.RawDescriptionHelpFormatter):
    """Examples as they stand; a fixed width, so that no module measures the terminal."""

    def __init__(self, prog: str) -> None:
        super().__init__(prog, width=79)


def _add_command(
    group: argparse._SubParsersAction[_Parser],
    name: str,
    run: Callable[[argparse.Namespace], int],
    description: str,
    epilog: str,
) -> _Parser:
    parser = group.add_parser(
        name,
        help=description,
        description=description[:1].upper() + description[1:] + ".",
        epilog=epilog,
        formatter_class=_Help,
        allow_abbrev=False,
    )
    parser.set_defaults(run=run)
    return parser


def _parser() -> _Parser:
    parser = _Parser(
        prog="certgen",
        description="Certificates for claims that the solutions of a differential equation "
        "are algebraic, or are not.",
        epilog=cli_help.MAIN,
        formatter_class=_Help,
        allow_abbrev=False,
    )
    parser.add_argument("--version", action="version", version=f"certgen {__version__}")
    parser.set_defaults(run=lambda _: _show_help(parser))
    group = parser.add_subparsers(title="commands", metavar="COMMAND")
    _add_certify(group)
    _add_check(group)
    _add_typeset(group)
    return parser


def _show_help(parser: _Parser) -> int:
    parser.print_help()
    return 2


def _add_certify(group: argparse._SubParsersAction[_Parser]) -> None:
    parser = _add_command(
        group,
        "certify",
        commands.certify,
        "decide claims and write their certificates and appendices",
        cli_help.CERTIFY,
    )
    parser.add_argument("input", nargs="?", metavar="CLAIMS.toml", help="a file of claims")
    parser.add_argument("--equation", metavar="TEXT", help="plain or LaTeX notation")
    parser.add_argument("--id", help="name of the claim and of its files: a-z, 0-9, -")
    parser.add_argument("--asserts", choices=("algebraic", "transcendental"),
                        help="what is claimed (default: algebraic)")  # fmt: skip
    parser.add_argument("--subject", choices=("every solution", "some solution"),
                        help="of which solutions (default: every solution)")  # fmt: skip
    parser.add_argument("--solution", metavar="TEXT", help="the closed form that is claimed")
    parser.add_argument("--title", help="a title for the appendix")
    parser.add_argument("--note", help="a remark for the appendix")
    _add_writing(parser)


def _add_check(group: argparse._SubParsersAction[_Parser]) -> None:
    parser = _add_command(
        group,
        "check",
        commands.check,
        "check stored certificates again, without the prover",
        cli_help.CHECK,
    )
    parser.add_argument("paths", nargs="+", metavar="PATH", help="a certificate or a folder")
    parser.add_argument("--arithmetic", choices=("plain", "flint", "both"), default="flint",
                        help="plain: standard library; flint: python-flint, faster"
                        " (default); both: the two must agree")  # fmt: skip
    parser.add_argument("--require", choices=("proved",),
                        help="count every other verdict as status 1")  # fmt: skip
    parser.add_argument("--jobs", type=_jobs, metavar="N", help="processes (default: cores)")
    parser.add_argument("--json", action="store_true", help="one line of JSON per file")


def _add_typeset(group: argparse._SubParsersAction[_Parser]) -> None:
    parser = _add_command(
        group,
        "typeset",
        commands.typeset,
        "check certificates and write their appendix",
        cli_help.TYPESET,
    )
    parser.add_argument("paths", nargs="+", metavar="CERT.json", help="certificates")
    _add_writing(parser)


def _add_writing(parser: _Parser) -> None:
    parser.add_argument("--out", default=".", metavar="DIR", help="where to write (default: .)")
    parser.add_argument("--pdf", action="store_true", help="also write a PDF (needs pdflatex)")
    parser.add_argument("--replace", action="store_true",
                        help="replace files of these names that belong to another claim "
                        "or were not made by certgen")  # fmt: skip
    parser.add_argument("--json", action="store_true", help="one line of JSON for each result")


def _jobs(text: str) -> int:
    if not text.isascii() or not text.isdigit() or not 1 <= int(text[:4]) <= 999:
        raise argparse.ArgumentTypeError("the number of processes is 1 to 999")
    return int(text[:4])
