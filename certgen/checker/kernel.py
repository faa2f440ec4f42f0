"""From stored text to a `CheckedCertificate`: the only way there is one."""

from __future__ import annotations

from importlib.util import find_spec
from typing import Literal

from certgen.certificate import (
    AlgebraicSolution,
    Certificate,
    ClosedFormDisagrees,
    NoAlgebraicSolution,
    Verdict,
)
from certgen.checker.algebraic import (
    check_algebraic_solution,
    check_closed_form,
    check_disagreement,
)
from certgen.checker.arithmetic import Arithmetic, load
from certgen.checker.common import reject_unless
from certgen.checker.describe import (
    describe_algebraic_solution,
    describe_no_algebraic_solution,
)
from certgen.checker.facts import ClosedFormFacts, DisagreementFacts, Facts
from certgen.checker.refutation import check_no_algebraic_solution
from certgen.claim import Power
from certgen.codec import StoredCertificate, read_certificate
from certgen.errors import RejectedError, UnusableInputError

__all__ = ["ArithmeticName", "CheckedCertificate", "check"]

ArithmeticName = Literal["plain", "flint", "both"]

_KEY = object()


class CheckedCertificate:
    """A certificate that the checker has accepted; only `check` makes one.

    `certificate` is what was stored, `digest` names its text, `arithmetic` says how
    it was checked and `facts` holds what was recomputed on the way.
    """

    __slots__ = ("arithmetic", "certificate", "digest", "facts")

    arithmetic: ArithmeticName
    certificate: Certificate
    digest: str
    facts: Facts

    def __init__(
        self,
        key: object,
        certificate: Certificate,
        digest: str,
        arithmetic: ArithmeticName,
        facts: Facts,
    ) -> None:
        if key is not _KEY:
            raise TypeError("only the checker makes a CheckedCertificate")
        for name, value in (
            ("certificate", certificate),
            ("digest", digest),
            ("arithmetic", arithmetic),
            ("facts", facts),
        ):
            object.__setattr__(self, name, value)

    def __setattr__(self, name: str, value: object) -> None:
        raise AttributeError("a CheckedCertificate cannot be changed")

    def __delattr__(self, name: str) -> None:
        raise AttributeError("a CheckedCertificate cannot be changed")

    def __repr__(self) -> str:
        claim = self.certificate.claim
        return f"<CheckedCertificate {claim.id}: {self.certificate.verdict}>"


def check(data: bytes | str, *, arithmetic: ArithmeticName | None = None) -> CheckedCertificate:
    """Check a stored certificate from its text alone.

    `arithmetic` is "plain" (standard library), "flint" (python-flint) or "both";
    by default "flint" where python-flint is installed, else "plain".  Everything
    is recomputed from the claim in the text; the stored digest is compared last and
    is never a reason to accept.

    Raises UnusableInputError where python-flint is asked for and missing,
    MalformedError, LimitError and UnsupportedVersionError as
    `codec.read_certificate`, and RejectedError with a code of `codes.CODES`.
    """
    stored = read_certificate(data)
    flint = find_spec("flint") is not None
    name = arithmetic or ("flint" if flint else "plain")
    if name != "plain" and not flint:
        raise UnusableInputError(
            f"the arithmetic '{name}' needs python-flint, which is not installed; "
            "'plain' needs nothing"
        )
    facts = _check_both(stored) if name == "both" else _run(load(name), stored)
    if stored.digest != stored.stored_digest:
        raise RejectedError("digest", "$.digest", stored.digest, stored.stored_digest)
    return CheckedCertificate(_KEY, stored.certificate, stored.digest, name, facts)


def _check_both(stored: StoredCertificate) -> Facts:
    """Run the rules in both arithmetics; different answers are a rejection."""
    plain, reason = _answer("plain", stored)
    flint, other_reason = _answer("flint", stored)
    if reason is not None and other_reason is not None:
        raise reason
    if plain is None or plain != flint:
        raise RejectedError(
            "arithmetics-disagree", "$", f"plain: {reason or 'accepted'}",
            f"flint: {other_reason or 'accepted'}",
        )  # fmt: skip
    return plain


def _answer(name: str, stored: StoredCertificate) -> tuple[Facts | None, RejectedError | None]:
    try:
        return _run(load(name), stored), None
    except RejectedError as error:
        return None, error


def _run(arithmetic: Arithmetic, stored: StoredCertificate) -> Facts:
    verify(arithmetic, stored.certificate)
    return _describe(arithmetic, stored.certificate)


def verify(arithmetic: Arithmetic, certificate: Certificate) -> None:
    """Reject unless the proof proves the verdict about the claim as stated.

    A homogeneous equation of order one has as solutions the constant multiples of
    one of them, so that "every" and "some" non-zero solution say the same.
    """
    claim, proof = certificate.claim, certificate.proof
    equation, closed_form = claim.equation, claim.solution
    if isinstance(proof, AlgebraicSolution):
        check_algebraic_solution(arithmetic, equation, proof, "$.proof")
        if closed_form is not None:
            check_closed_form(arithmetic, equation, closed_form, "$.claim.solution")
        _check_verdict(certificate, holds=claim.asserts == "algebraic")
    elif isinstance(proof, ClosedFormDisagrees):
        check_algebraic_solution(arithmetic, equation, proof.actual, "$.proof.actual")
        check_disagreement(
            arithmetic, proof.actual, _required(closed_form), proof.disagreement,
            "$.proof.disagreement",
        )  # fmt: skip
        _check_verdict(certificate, holds=False)
    else:
        check_no_algebraic_solution(arithmetic, equation, proof)
        _check_verdict(certificate, holds=claim.asserts == "transcendental")


def _required(closed_form: tuple[Power, ...] | None) -> tuple[Power, ...]:
    if closed_form is None:
        raise RejectedError(
            "no-closed-form", "$.claim.solution", "a closed form to disagree with", "null"
        )
    return closed_form


def _check_verdict(certificate: Certificate, *, holds: bool) -> None:
    verdict: Verdict = "proved" if holds else "refuted"
    reject_unless(
        certificate.verdict == verdict, "verdict", "$.verdict", verdict, certificate.verdict
    )


def _describe(arithmetic: Arithmetic, certificate: Certificate) -> Facts:
    equation, proof = certificate.claim.equation, certificate.proof
    if isinstance(proof, AlgebraicSolution):
        return describe_algebraic_solution(arithmetic, equation, proof)
    if isinstance(proof, NoAlgebraicSolution):
        return describe_no_algebraic_solution(arithmetic, equation, proof)
    orders = check_disagreement(
        arithmetic, proof.actual, _required(certificate.claim.solution),
        proof.disagreement, "$.proof.disagreement",
    )  # fmt: skip
    return ClosedFormFacts(
        actual=describe_algebraic_solution(arithmetic, equation, proof.actual),
        disagreement=DisagreementFacts(
            orders=orders,
            divides_denominator=proof.disagreement.residue_of_equation != 0,
        ),
    )
