"""The trusted base: recomputes every statement of a stored certificate from its claim.

`check` takes the stored text, never the prover's objects.  The rules are in
`algebraic` and `refutation`, written once over the arithmetics `plain` and
`flint`; they multiply, differentiate, reduce and compare, and never search.
"""

from certgen.checker.kernel import ArithmeticName, CheckedCertificate, check

__all__ = ["ArithmeticName", "CheckedCertificate", "check"]
