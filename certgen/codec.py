"""Strict JSON <-> certificate: canonical text, digest, format version.

The text is ASCII, `json.dumps(obj, sort_keys=True, ensure_ascii=True, indent=1)`
and a final newline; numbers and polynomials are strings in strict notation and
there are no JSON numbers at all.  Anything else is refused.  The digest is the
SHA-256 of the compact text without the digest; it names a certificate and is
never a reason to accept one.  `format/specification.md` is the full contract.
"""

from __future__ import annotations

import hashlib
import json
import re
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, get_args

from certgen.certificate import (
    AlgebraicSolution,
    Certificate,
    ClosedFormDisagrees,
    CounterPrime,
    DensityBound,
    DensityWitness,
    Disagreement,
    Eisenstein,
    IrrationalResidue,
    MinimalPolynomial,
    MultiplePole,
    MultiplePoleModP,
    NoAlgebraicSolution,
    PartialFraction,
    PCurvature,
    PolynomialPart,
    PolynomialPartModP,
    ResidueOutsidePrimeField,
    SquarefreeFactor,
    Verdict,
)
from certgen.claim import (
    Asserts,
    FirstOrderClaim,
    FirstOrderEquation,
    Letters,
    Power,
    Subject,
)
from certgen.errors import MalformedError, UnsupportedVersionError, shorten
from certgen.polynomial import (
    read_integer,
    read_polynomial,
    read_rational,
    write_integer,
    write_polynomial,
    write_rational,
)
from certgen.strict_json import (
    BYTES_LIMIT,
    NESTING_LIMIT,
    JsonValue,
    canonical,
    read_json,
    read_text,
)

__all__ = [
    "BYTES_LIMIT",
    "FORMAT",
    "NESTING_LIMIT",
    "StoredCertificate",
    "read_certificate",
    "write_certificate",
]

FORMAT = "certgen/1"

@dataclass(frozen=True, slots=True, kw_only=True)
class StoredCertificate:
    """A certificate as it was read: its parts, the digest stored, the digest computed."""

    certificate: Certificate
    digest: str
    stored_digest: str


# --------------------------------------------------------------------------
# shapes: one description serves reading and writing


@dataclass(frozen=True, slots=True)
class _Shape:
    """How one kind of value is read from JSON and written to it."""

    read: Callable[[JsonValue], Any]
    write: Callable[[Any], Any]


_TEXT = _Shape(JsonValue.text, str)
_INTEGER = _Shape(lambda r: read_integer(r.text(), path=r.path), write_integer)
_RATIONAL = _Shape(lambda r: read_rational(r.text(), path=r.path), write_rational)
_POLYNOMIAL = _Shape(lambda r: read_polynomial(r.text(), path=r.path), write_polynomial)


def _word(allowed: Any) -> _Shape:
    words = get_args(allowed)

    def read(reader: JsonValue) -> str:
        word = reader.text()
        if word not in words:
            raise MalformedError(
                f"'{shorten(word)}' is not one of: {', '.join(words)}", path=reader.path
            )
        return word

    return _Shape(read, str)


def _optional(shape: _Shape) -> _Shape:
    return _Shape(
        lambda r: None if r.value is None else shape.read(r),
        lambda v: None if v is None else shape.write(v),
    )


def _list(shape: _Shape) -> _Shape:
    return _Shape(
        lambda r: tuple(shape.read(item) for item in r.items()),
        lambda v: [shape.write(item) for item in v],
    )


def _record(cls: Any, **fields: _Shape) -> _Shape:
    """An object whose keys are exactly the fields of the dataclass `cls`."""

    def read(reader: JsonValue) -> Any:
        reader.keys(*fields)
        with reader.building():
            return cls(**{k: shape.read(reader.child(k)) for k, shape in fields.items()})

    def write(value: Any) -> dict[str, Any]:
        return {k: shape.write(getattr(value, k)) for k, shape in fields.items()}

    return _Shape(read, write)


def _tagged(what: str, shapes: dict[Any, _Shape]) -> _Shape:
    """An object whose `kind` names one of these dataclasses; the rest is its record."""
    by_kind = {cls.KIND: shape for cls, shape in shapes.items()}

    def read(reader: JsonValue) -> Any:
        kind = reader.peek("kind")
        if kind not in by_kind:
            raise UnsupportedVersionError(
                f"{reader.path}: the {what} kind '{shorten(kind)}' is not supported "
                "by this version"
            )
        return by_kind[kind].read(reader.without("kind"))

    def write(value: Any) -> dict[str, Any]:
        return {"kind": value.KIND, **shapes[type(value)].write(value)}

    return _Shape(read, write)


_EQUATION_TEXT = re.compile(r"\((?P<b>[^()]*)\)\*y' = \((?P<a>[^()]*)\)\*y")


def _read_equation(reader: JsonValue) -> FirstOrderEquation:
    match = _EQUATION_TEXT.fullmatch(reader.text())
    if match is None:
        raise MalformedError("expected an equation (b)*y' = (a)*y", path=reader.path)
    with reader.building():
        return FirstOrderEquation(
            numerator=read_polynomial(match["a"], path=reader.path),
            denominator=read_polynomial(match["b"], path=reader.path),
        )


def _read_counter_prime(reader: JsonValue) -> CounterPrime:
    """The prime and its witness stand in one object."""
    reader.peek("p")
    with reader.building():
        return CounterPrime(
            p=_INTEGER.read(reader.child("p")), witness=_WITNESS.read(reader.without("p"))
        )


_EQUATION = _Shape(_read_equation, str)
_POWERS = _list(_record(Power, base=_POLYNOMIAL, exponent=_RATIONAL))

_CLAIM = _tagged(
    "claim",
    {
        FirstOrderClaim: _record(
            FirstOrderClaim,
            id=_TEXT,
            equation=_EQUATION,
            as_written=_TEXT,
            letters=_record(Letters, variable=_TEXT, function=_TEXT),
            asserts=_word(Asserts),
            subject=_word(Subject),
            solution=_optional(_POWERS),
            solution_as_written=_optional(_TEXT),
            title=_optional(_TEXT),
            note=_optional(_TEXT),
        )
    },
)

_ALGEBRAIC = _record(
    AlgebraicSolution,
    solution=_POWERS,
    partial_fractions=_list(
        _record(PartialFraction, factor=_POLYNOMIAL, residue=_RATIONAL)
    ),
    degree=_INTEGER,
    minimal_polynomial=_record(
        MinimalPolynomial, degree=_INTEGER, numerator=_POWERS, denominator=_POWERS
    ),
    squarefree_prime=_INTEGER,
    eisenstein=_optional(_record(Eisenstein, point=_INTEGER, constant=_INTEGER)),
)

_WITNESS = _tagged(
    "witness",
    {
        PolynomialPartModP: _record(PolynomialPartModP),
        MultiplePoleModP: _record(MultiplePoleModP, factor=_POLYNOMIAL),
        ResidueOutsidePrimeField: _record(
            ResidueOutsidePrimeField, factor=_POLYNOMIAL, residue=_POLYNOMIAL
        ),
    },
)

_OBSTRUCTION = _tagged(
    "obstruction",
    {
        PolynomialPart: _record(PolynomialPart, quotient=_POLYNOMIAL),
        MultiplePole: _record(MultiplePole, factor=_POLYNOMIAL, order=_INTEGER),
        IrrationalResidue: _record(
            IrrationalResidue,
            factor=_POLYNOMIAL,
            residue_polynomial=_POLYNOMIAL,
            rootless_prime=_INTEGER,
        ),
    },
)

_REFUTATION = _record(
    NoAlgebraicSolution,
    squarefree_decomposition=_list(
        _record(SquarefreeFactor, factor=_POLYNOMIAL, multiplicity=_INTEGER)
    ),
    lowest_terms_prime=_INTEGER,
    obstructions=_list(_OBSTRUCTION),
    counter_prime=_Shape(
        _read_counter_prime,
        lambda v: {"p": write_integer(v.p), **_WITNESS.write(v.witness)},
    ),
    p_curvature=_optional(_record(PCurvature, numerator=_POLYNOMIAL)),
    density=_record(
        DensityBound,
        bound=_RATIONAL,
        witnesses=_list(_record(DensityWitness, p=_INTEGER, order=_INTEGER)),
    ),
)

_PROOF = _tagged(
    "proof",
    {
        AlgebraicSolution: _ALGEBRAIC,
        ClosedFormDisagrees: _record(
            ClosedFormDisagrees,
            actual=_ALGEBRAIC,
            disagreement=_record(
                Disagreement,
                factor=_POLYNOMIAL,
                residue_of_equation=_RATIONAL,
                residue_of_closed_form=_RATIONAL,
                prime=_INTEGER,
            ),
        ),
        NoAlgebraicSolution: _REFUTATION,
    },
)

_CERTIFICATE = _record(Certificate, claim=_CLAIM, verdict=_word(Verdict), proof=_PROOF)


# --------------------------------------------------------------------------
# certificates


def write_certificate(certificate: Certificate) -> str:
    """Return the canonical text of a certificate, digest included."""
    obj = {"format": FORMAT, **_CERTIFICATE.write(certificate)}
    return canonical({**obj, "digest": _digest(obj)})


def _digest(obj: dict[str, Any]) -> str:
    text = json.dumps(obj, sort_keys=True, ensure_ascii=True, separators=(",", ":"))
    return hashlib.sha256(text.encode("utf-8")).hexdigest()


def read_certificate(data: bytes | str) -> StoredCertificate:
    """Read a stored certificate; the digest is computed and not compared.

    Raises MalformedError for anything but canonical text, LimitError beyond
    BYTES_LIMIT, NESTING_LIMIT or the limits of `polynomial`, UnsupportedVersionError
    for an unknown format, claim kind or proof kind, and RejectedError (codes
    "vacuous" and "not-canonical") for a value that its type does not admit.
    """
    text = read_text(data)
    obj = read_json(text)
    root = JsonValue(obj, "$")
    found = root.peek("format")
    if found != FORMAT:
        raise UnsupportedVersionError(
            f"format '{shorten(found)}' is not supported; this version reads '{FORMAT}'"
        )
    stored = root.peek("digest")
    if not re.fullmatch(r"[0-9a-f]{64}", stored):
        raise MalformedError("expected 64 lower-case hex digits", path="$.digest")
    certificate = _CERTIFICATE.read(root.without("format", "digest"))
    if canonical(obj) != text:
        raise MalformedError(
            "the text is not canonical: expected sorted keys, an indent of one "
            "space, ASCII with \\u escapes and one final newline"
        )
    digest = _digest({key: value for key, value in obj.items() if key != "digest"})
    return StoredCertificate(certificate=certificate, digest=digest, stored_digest=stored)
