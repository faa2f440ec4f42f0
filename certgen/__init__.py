"""Certificates for claims of algebraicity: prove, store, check, typeset.

    certify(claim)      prove a claim, have the proof checked: a `Certified`
    check(certificate)  check a stored certificate again
    load(path)          read and check the certificate in a file
    typeset(*certified) the LaTeX appendix of checked certificates

The names are loaded on first use: importing the package imports nothing else.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from certgen.api import Certified, certify, check, load, typeset
    from certgen.errors import (
        CertgenError,
        ClaimError,
        DefectError,
        ExpressionError,
        FileError,
        LimitError,
        MalformedError,
        RejectedError,
        UnsupportedVersionError,
        UnusableInputError,
    )

__version__ = "0.1.0"

__all__ = [
    "CertgenError",
    "Certified",
    "ClaimError",
    "DefectError",
    "ExpressionError",
    "FileError",
    "LimitError",
    "MalformedError",
    "RejectedError",
    "UnsupportedVersionError",
    "UnusableInputError",
    "certify",
    "check",
    "load",
    "typeset",
]

_API = ("Certified", "certify", "check", "load", "typeset")


def __getattr__(name: str) -> object:
    if name not in __all__:
        raise AttributeError(f"module 'certgen' has no attribute '{name}'")
    return getattr(import_module("certgen.api" if name in _API else "certgen.errors"), name)


def __dir__() -> list[str]:
    return sorted(["__version__", *__all__])
