"""The Python interface: prove, check, load, typeset.

>>> import certgen
>>> result = certgen.certify("(1 - 4*x)*y' = 2*y")
>>> result.verdict
'proved'
>>> certgen.check(result.text).verdict
'proved'
"""

from __future__ import annotations

import os
from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from certgen.claim import FirstOrderClaim
from certgen.errors import (
    ClaimError,
    DefectError,
    MalformedError,
    RejectedError,
    UnsupportedVersionError,
)

if TYPE_CHECKING:
    from certgen.certificate import Certificate, Verdict
    from certgen.checker import CheckedCertificate
    from certgen.store import SavedFile

__all__ = ["Arithmetic", "Certified", "certify", "check", "load", "typeset"]

Arithmetic = Literal["plain", "flint", "both"]


@dataclass(frozen=True, slots=True)
class Certified:
    """A certificate that the checker has accepted: its stored text and what it says.

    Made by `certify`, `check` and `load`.  The verdict may be "refuted": then
    the certificate proves that the claim is wrong.
    """

    text: str
    checked: CheckedCertificate

    @property
    def certificate(self) -> Certificate:
        return self.checked.certificate

    @property
    def claim(self) -> FirstOrderClaim:
        return self.checked.certificate.claim

    @property
    def verdict(self) -> Verdict:
        """What was shown about the claim as stated."""
        return self.checked.certificate.verdict

    @property
    def digest(self) -> str:
        """The SHA-256 that names the certificate."""
        return self.checked.digest

    def appendix(self) -> str:
        """Return the LaTeX fragment for `\\input` into the paper."""
        from certgen.appendix import typeset as typeset_checked

        return typeset_checked(self.checked)

    def save(
        self,
        folder: str | os.PathLike[str] = ".",
        *,
        replace: bool = False,
        pdf: bool = False,
    ) -> tuple[SavedFile, ...]:
        """Write `<id>.json` and `<id>.tex` into `folder`; see `certgen.store.save`."""
        from certgen.store import save

        return save(self, folder, replace=replace, pdf=pdf)

    def __str__(self) -> str:
        from certgen.report import rows, wrap_rows

        return f"{self.claim.id}\n{wrap_rows(rows(self.checked, read_back(self.claim)))}"

    def __repr__(self) -> str:
        return f"<Certified {self.claim.id}: {self.verdict}, digest {self.digest[:12]}...>"

    def _repr_latex_(self) -> str:
        from certgen.appendix import latex_summary

        return latex_summary(self.checked)


def certify(
    claim: object,
    *,
    id: str | None = None,
    asserts: str | None = None,
    subject: str | None = None,
    solution: str | None = None,
    title: str | None = None,
    note: str | None = None,
    progress: Callable[[str], None] | None = None,
) -> Certified:
    """Decide a claim and return its certificate, accepted by both arithmetics.

    `claim` is an equation in plain or LaTeX notation, a sympy expression r (for
    y' = r*y), a sympy equation in an unknown function, or a FirstOrderClaim; the
    keywords are the keys of a claims file and belong to the first three.

    Raises ExpressionError or ClaimError for a claim that cannot be read,
    LimitError where a documented limit is reached, DefectError if the checker
    does not accept what the prover made (then nothing is returned).
    """
    keys = {
        "id": id, "asserts": asserts, "subject": subject,
        "solution": solution, "title": title, "note": note,
    }  # fmt: skip
    given = {key: value for key, value in keys.items() if value is not None}
    if not isinstance(claim, FirstOrderClaim):
        return _certify_claim(_make_claim(claim, given), progress)
    if given:
        raise ClaimError(f"a claim object has its own {', '.join(given)}; leave it out here")
    return _certify_claim(claim, progress)


def _make_claim(equation: object, keys: dict[str, str]) -> FirstOrderClaim:
    from certgen.sympy_notation import is_sympy, write_equation

    for key, value in keys.items():
        if not isinstance(value, str):
            raise ClaimError(f"{key} must be a text, not {type(value).__name__}")
    if is_sympy(equation):
        equation = write_equation(equation)
    if not isinstance(equation, str):
        raise ClaimError(
            "a claim is a text, a sympy expression or equation, or a FirstOrderClaim, not "
            f"{type(equation).__name__}"
        )
    from certgen.claims_file import make_claim

    return make_claim(equation=equation, **keys)


def _certify_claim(
    claim: FirstOrderClaim, progress: Callable[[str], None] | None
) -> Certified:
    from certgen.codec import write_certificate
    from certgen.prover import prove

    text = write_certificate(prove(claim, progress))
    if progress is not None:
        progress("checking")
    try:
        return _accept(text, "both")
    except (RejectedError, MalformedError, UnsupportedVersionError) as error:
        raise DefectError(
            f"the checker does not accept the certificate that certgen just made for "
            f"'{claim.id}' ({error}); nothing was written. This is a defect of certgen: "
            "please report it together with the claim"
        ) from error


def _accept(data: bytes | str, arithmetic: Arithmetic) -> Certified:
    """Run the checker on stored text, then compare the equation as the author wrote it."""
    from certgen import checker

    checked = checker.check(data, arithmetic=arithmetic)
    from certgen.notation import verify_as_written

    verify_as_written(checked.certificate.claim)
    return Certified(data if isinstance(data, str) else data.decode("ascii"), checked)


def read_back(claim: FirstOrderClaim) -> str:
    """Return the author's equation as it was read, fully parenthesised."""
    from certgen.notation import read_equation

    return read_equation(claim.as_written).echo


def check(
    certificate: str | bytes | os.PathLike[str], *, arithmetic: Arithmetic = "both"
) -> Certified:
    """Check a stored certificate, given as its text or as the path of its file.

    Text is what begins with a brace; every other str is a path.  Raises
    RejectedError, MalformedError, UnsupportedVersionError, LimitError, FileError.
    """
    if isinstance(certificate, bytes):
        return _accept(certificate, arithmetic)
    if isinstance(certificate, str) and certificate.lstrip().startswith("{"):
        return _accept(certificate, arithmetic)
    return load(certificate, arithmetic=arithmetic)


def load(path: str | os.PathLike[str], *, arithmetic: Arithmetic = "both") -> Certified:
    """Read the certificate in a file and check it; raises as `check` does."""
    from certgen.codec import BYTES_LIMIT
    from certgen.files import read_bytes

    if not isinstance(path, str | os.PathLike):
        raise ClaimError(
            f"a certificate is a text, bytes or a path, not {type(path).__name__}"
        )
    return _accept(read_bytes(path, BYTES_LIMIT), arithmetic)


def typeset(
    *certificates: Certified | str | bytes | os.PathLike[str], standalone: bool = False
) -> str:
    """Return the LaTeX appendix of one or several certificates.

    A fragment for `\\input`, or with `standalone` a document of its own.  What is
    not yet a `Certified` is checked first, as `check` does it.
    """
    from certgen import appendix

    if not certificates:
        raise ClaimError("there is no certificate to typeset")
    done = [item if isinstance(item, Certified) else check(item) for item in certificates]
    if len(done) == 1:
        fragment = done[0].appendix()
    else:
        fragment = appendix.typeset_many([item.checked for item in done])
    return appendix.standalone(fragment) if standalone else fragment
