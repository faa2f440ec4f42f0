"""The prover: from a claim to a certificate.

Search is allowed here and trust is not needed: `certgen.checker` recomputes every
statement of the certificate from the claim.
"""

from __future__ import annotations

from collections.abc import Callable

from certgen.certificate import (
    AlgebraicSolution,
    Certificate,
    ClosedFormDisagrees,
    Proof,
    Verdict,
)
from certgen.claim import FirstOrderClaim
from certgen.exact.polynomials import to_flint
from certgen.prover.algebraic_side import build_algebraic_solution
from certgen.prover.closed_form import closed_form_solves, find_disagreement
from certgen.prover.first_order import AlgebraicDecision, decide
from certgen.prover.refutation_side import build_no_algebraic_solution

__all__ = ["prove"]


def prove(
    claim: FirstOrderClaim, progress: Callable[[str], None] | None = None
) -> Certificate:
    """Decide the claim; the certificate carries the verdict and its proof object.

    A complete decision: the verdict is "proved" or "refuted".  `progress` is
    called with short messages when a search takes long.  Raises ClaimError when
    the equation is not in lowest terms.

    The subject does not matter here: the non-zero solutions of a homogeneous
    first-order equation are constant multiples of each other.
    """
    proof = _find_proof(claim, progress)
    return Certificate(claim=claim, verdict=_verdict(claim, proof), proof=proof)


def _find_proof(claim: FirstOrderClaim, progress: Callable[[str], None] | None) -> Proof:
    decision = decide(claim.equation, progress)
    if not isinstance(decision, AlgebraicDecision):
        a, b = to_flint(claim.equation.numerator), to_flint(claim.equation.denominator)
        return build_no_algebraic_solution(a, b, decision.counter_prime)
    actual = build_algebraic_solution(decision.groups)
    if claim.solution is None or closed_form_solves(claim.equation, claim.solution):
        return actual
    disagreement = find_disagreement(actual, claim.solution)
    return ClosedFormDisagrees(actual=actual, disagreement=disagreement)


def _verdict(claim: FirstOrderClaim, proof: Proof) -> Verdict:
    """A closed form that solves the equation proves the claim, another refutes it."""
    if isinstance(proof, ClosedFormDisagrees):
        return "refuted"
    found = "algebraic" if isinstance(proof, AlgebraicSolution) else "transcendental"
    return "proved" if claim.asserts == found else "refuted"
