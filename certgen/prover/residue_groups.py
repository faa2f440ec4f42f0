"""The poles of r = a/b grouped by their rational residues, from modular images.

Nothing is factored: modulo a word-sized prime q the residues are the values of
s = a * (b')^(-1) in F_q[x]/(b), the groups are gcd(b, s - value).  Residues come
from their images by rational reconstruction, groups by Chinese remainders over
further primes, and the result is returned only after
b = content * product of the groups, a/b = sum of residue * group'/group
has been verified exactly.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction

from flint import fmpz_poly

from certgen.errors import ClaimError, DefectError
from certgen.exact.integers import combine_residues, reconstruct_rational, symmetric
from certgen.exact.modular import (
    ModularPolynomial,
    find_values,
    monic,
    polynomial_with_roots,
    reduce_polynomial,
    residues_modulo,
    split_by_values,
)
from certgen.exact.polynomials import (
    IntegerPolynomial,
    irreducible_factors,
    logarithmic_derivative,
    primitive_part,
)
from certgen.exact.primes import large_primes

__all__ = ["ResidueGroup", "find_residue_groups"]

_SPARE_BITS = 12


@dataclass(frozen=True, slots=True)
class ResidueGroup:
    """All poles with this residue are the roots of the squarefree base."""

    base: IntegerPolynomial
    residue: Fraction


@dataclass(slots=True)
class _Image:
    """Images of integers (coefficients of a monic polynomial) modulo `modulus`."""

    coefficients: list[int]
    modulus: int

    def absorb(self, polynomial: ModularPolynomial, q: int) -> None:
        fresh = map(int, polynomial.coeffs())
        self.coefficients = combine_residues(self.coefficients, self.modulus, fresh, q)
        self.modulus *= q

    def reconstruct(self, spare_bits: int) -> IntegerPolynomial | None:
        """The primitive polynomial that has these images when monic, or None (a guess)."""
        denominator = 1
        numerators: list[tuple[int, int]] = []
        for c in reversed(self.coefficients):
            n = symmetric(c * denominator, self.modulus)
            if (abs(n) * denominator) << (spare_bits + 1) > self.modulus:
                rational = reconstruct_rational(n, self.modulus, spare_bits)
                if rational is None:
                    return None
                n = rational.numerator
                denominator *= rational.denominator
            numerators.append((n, denominator))
        return primitive_part(
            fmpz_poly([n * (denominator // d) for n, d in reversed(numerators)])
        )


def find_residue_groups(
    a: IntegerPolynomial,
    b: IntegerPolynomial,
    progress: Callable[[str], None] | None = None,
) -> tuple[ResidueGroup, ...] | None:
    """Return the groups, sorted as found, or None: some residue is irrational.

    Hypotheses: a != 0, b squarefree over Q, deg a < deg b.  Both answers are
    proofs: the groups are verified, and None comes with a good prime q for which
    s^q != s.  Ends with probability one and in practice after a few primes.
    Raises ClaimError when a and b turn out to have a common factor.
    """
    search = _Search(a, b)
    for count, q in enumerate(large_primes(), 1):
        if progress is not None and count % 16 == 0:
            progress(f"residues and their groups: {count} primes so far")
        image = search.reduce(q)
        if image is None:
            continue
        if not search.absorb(*image, q):
            return None
        groups = search.finish()
        if groups is not None:
            return groups
    raise DefectError("the primes have come to an end")


def _residue_modulo(residue: Fraction, q: int) -> int:
    """A good q divides no denominator; for a wrong guess any wrong value will do."""
    if residue.denominator % q == 0:
        return -1
    return residue.numerator * pow(residue.denominator, -1, q) % q


class _Search:
    """What the primes so far have told: residues, groups, finished groups."""

    def __init__(self, a: IntegerPolynomial, b: IntegerPolynomial) -> None:
        self.a, self.b, self.derivative = a, b, b.derivative()
        self.lead = int(b.leading_coefficient())
        self.spare_bits = _SPARE_BITS
        self.guess_from_one_prime = True
        self.value_image: _Image | None = None
        self.attempt_at = 2
        self.residues: list[Fraction] = []
        self.restart()

    def restart(self) -> None:
        self.images: dict[Fraction, _Image] = {}
        self.finished: list[ResidueGroup] = []

    def reduce(self, q: int) -> tuple[ModularPolynomial, ModularPolynomial] | None:
        """Return the unfinished part g of b mod q and s mod g, None at a bad prime."""
        if self.lead % q == 0:
            return None
        g = monic(reduce_polynomial(self.b, q))
        for group in self.finished:
            g, rest = divmod(g, reduce_polynomial(group.base, q))
            if rest != 0:
                self.give_up_guess()
                return None
        s = residues_modulo(
            reduce_polynomial(self.a, q), g, reduce_polynomial(self.derivative, q) % g
        )
        return None if s is None else (monic(g), s)

    def give_up_guess(self) -> None:
        """The residues or a group were guessed wrong: ask for more bits."""
        self.spare_bits += 8
        self.guess_from_one_prime = False
        self.residues = []
        self.restart()

    def absorb(self, g: ModularPolynomial, s: ModularPolynomial, q: int) -> bool:
        """Use one more prime; False if s^q != s, which proves an irrational residue."""
        if not self.residues:
            return self._absorb_values(g, s, q)
        open_residues = [rho for rho in self.residues if not self._is_finished(rho)]
        values = [_residue_modulo(rho, q) for rho in open_residues]
        if len(set(values)) < len(values):
            return True  # two residues have the same value mod q
        parts = split_by_values(s, g, values, q)
        if parts is None:
            self.give_up_guess()
            return bool(s.pow_mod(q, g) == s)
        self._absorb_parts(open_residues, parts, q)
        return True

    def _is_finished(self, residue: Fraction) -> bool:
        return any(group.residue == residue for group in self.finished)

    def _absorb_parts(
        self, residues: list[Fraction], parts: list[ModularPolynomial], q: int
    ) -> None:
        for residue, part in zip(residues, parts, strict=True):
            image = self.images.setdefault(residue, _Image([0] * (part.degree() + 1), 1))
            if len(image.coefficients) != part.degree() + 1:
                self.give_up_guess()
                return
            image.absorb(part, q)

    def _absorb_values(self, g: ModularPolynomial, s: ModularPolynomial, q: int) -> bool:
        values = find_values(s, g, q)
        if values is None:
            return False
        parts = split_by_values(s, g, values, q) if values else None
        if parts is None:  # values are missing: bad luck, or not all lie in F_q
            return bool(s.pow_mod(q, g) == s)
        self.residues = self._guess_residues(values, q) or []
        by_value = dict(zip(values, parts, strict=True))
        matching = [by_value.get(_residue_modulo(rho, q)) for rho in self.residues]
        if None in matching:
            self.give_up_guess()
        else:
            self._absorb_parts(self.residues, matching, q)
        return True

    def _guess_residues(self, values: list[int], q: int) -> list[Fraction] | None:
        if self.guess_from_one_prime:
            guesses = [reconstruct_rational(v, q, self.spare_bits) for v in values]
            found = [guess for guess in guesses if guess is not None]
            if len(set(found)) == len(values) and self._is_possible(found):
                return found
        self.guess_from_one_prime = False
        return self._residues_from_symmetric_functions(values, q)

    def _is_possible(self, residues: list[Fraction]) -> bool:
        if 0 in residues and self.a.gcd(self.b).degree() > 0:
            raise ClaimError("the numerator and denominator of r have a common factor")
        return 0 not in residues

    def _residues_from_symmetric_functions(
        self, values: list[int], q: int
    ) -> list[Fraction] | None:
        """Large residues: combine product (z - value), whose images need no matching."""
        if self.value_image is None or len(self.value_image.coefficients) <= len(values):
            self.value_image, self.attempt_at = _Image([0] * (len(values) + 1), 1), 2
        if len(self.value_image.coefficients) > len(values) + 1:
            return None  # two residues have the same value mod q
        self.value_image.absorb(polynomial_with_roots(values, q), q)
        self.attempt_at -= 1
        if self.attempt_at > 0:
            return None
        self.attempt_at = 1 + self.value_image.modulus.bit_length() // 250
        polynomial = self.value_image.reconstruct(self.spare_bits)
        return None if polynomial is None else self._rational_roots(polynomial)

    def _rational_roots(self, polynomial: IntegerPolynomial) -> list[Fraction] | None:
        factors = irreducible_factors(polynomial)
        if len(factors) < polynomial.degree():
            return None
        roots = [Fraction(-int(f[0]), int(f[1])) for f in factors]
        return roots if self._is_possible(roots) else None

    def finish(self) -> tuple[ResidueGroup, ...] | None:
        """Reconstruct what can be; when all groups are there, verify them exactly."""
        for residue, image in list(self.images.items()):
            base = image.reconstruct(self.spare_bits)
            if base is not None:
                self.finished.append(ResidueGroup(base, residue))
                del self.images[residue]
        if not self.finished or self.images:
            return None
        if self._is_verified():
            return tuple(self.finished)
        self.give_up_guess()
        return None

    def _is_verified(self) -> bool:
        powers = [(group.base, group.residue) for group in self.finished]
        numerator, denominator, degree = logarithmic_derivative(powers)
        content = self.b.content()
        return bool(
            denominator * content == self.b and numerator * content == self.a * degree
        )
