"""Every code with which the checker rejects a certificate, and what it means."""

from __future__ import annotations

__all__ = ["CODES"]

CODES: dict[str, str] = {
    # read by the codec
    "vacuous": "a value with which an identity would say nothing",
    "not-canonical": "a value that is not in its canonical form",
    # the frame
    "verdict": "the verdict does not follow from the proof",
    "digest": "the digest is not that of the text",
    "arithmetics-disagree": "the two arithmetics give different answers",
    "as-written-differs": "the author's text says something else than the claim",
    # primes
    "not-prime": "a number that must be prime is not",
    "prime-divides-leading-coefficient": "a prime that must not divide a leading coefficient",
    # the algebraic side
    "empty-solution": "an empty product solves only y' = 0",
    "degree": "the degree is not the common denominator of the exponents",
    "denominator-identity": "b is not a constant times the product of the bases",
    "numerator-identity": "the product does not solve the equation",
    "not-squarefree": "the product of the bases is not squarefree modulo the prime",
    "partial-fractions": "the displayed factors do not make up the bases",
    "minimal-polynomial": "the minimal polynomial is not that of the solution",
    "eisenstein-point": "the point is a pole or a zero of the solution",
    "eisenstein-constant": "the constant is not shown to be an Eisenstein constant",
    "closed-form": "the claimed closed form does not solve the equation",
    # a wrong closed form
    "no-closed-form": "the claim names no closed form",
    "disagreement-factor": "the factor does not isolate poles of one residue",
    "disagreement-residue": "a residue at the roots of the factor is another one",
    # the refutation
    "squarefree-decomposition": "b is not a constant times the product of the powers",
    "not-lowest-terms": "a and b have a common factor modulo the prime",
    "bad-prime": "the prime is not of good reduction",
    "counter-prime-witness": "the witness does not show a non-zero p-curvature",
    "not-smallest": "a smaller good prime has non-zero p-curvature",
    "obstructions": "the obstructions over Q are not those of the equation",
    "irrational-residue": "the residues at the roots of the factor are not shown irrational",
    "p-curvature": "the value of the p-curvature is another one",
    "density": "the density bound does not follow from its witnesses",
}
