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
from collections.abc import Callable, Iterator
from contextlib import contextmanager
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
from certgen.errors import (
    ClaimError,
    InvariantError,
    LimitError,
    MalformedError,
    RejectedError,
    UnsupportedVersionError,
    shorten,
)
from certgen.polynomial import (
    read_integer,
    read_polynomial,
    read_rational,
    write_integer,
    write_polynomial,
    write_rational,
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
BYTES_LIMIT = 64 * 1024 * 1024
NESTING_LIMIT = 16

@dataclass(frozen=True, slots=True, kw_only=True)
class StoredCertificate:
    """A certificate as it was read: its parts, the digest stored, the digest computed."""

    certificate: Certificate
    digest: str
    stored_digest: str


# --------------------------------------------------------------------------
# bytes -> text -> JSON


def _read_text(data: bytes | str) -> str:
    if len(data) > BYTES_LIMIT:
        raise LimitError(f"a text of {len(data)} bytes; the limit is {BYTES_LIMIT}")
    if not data:
        raise MalformedError("the file is empty")
    try:
        if isinstance(data, bytes):
            return data.decode("ascii")
        data.encode("ascii")
    except UnicodeError as error:
        place = getattr(error, "start", 0)
        raise MalformedError(f"byte {place + 1} is not ASCII") from None
    return data


# a string that does not end is one token too: the scan stays linear
# (and possessive: it needs no memory)
_TOKEN = re.compile(r'"(?:[^"\\]++|\\.)*+"?|[\[{]|[\]}]')


def _check_nesting(text: str) -> None:
    depth = 0
    for match in _TOKEN.finditer(text):
        token = match[0][0]
        if token in "[{":
            depth += 1
        elif token in "]}":
            depth -= 1
        if depth > NESTING_LIMIT:
            raise LimitError(f"nesting deeper than the limit of {NESTING_LIMIT}")


class _Number:
    """A JSON number, NaN or Infinity: kept until its path is known, then refused."""

    def __init__(self, literal: str) -> None:
        self.literal = literal


def _unique(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    out: dict[str, Any] = {}
    for key, value in pairs:
        if key in out:
            raise MalformedError(f"the key '{shorten(key)}' stands twice")
        out[key] = value
    return out


def _read_json(text: str) -> Any:
    _check_nesting(text)
    try:
        return json.loads(
            text,
            object_pairs_hook=_unique,
            parse_int=_Number,
            parse_float=_Number,
            parse_constant=_Number,
        )
    except json.JSONDecodeError as error:
        raise MalformedError(
            f"not JSON: {error.msg} at line {error.lineno}, column {error.colno}"
        ) from None
    except RecursionError:
        raise LimitError(f"nesting deeper than the limit of {NESTING_LIMIT}") from None


# --------------------------------------------------------------------------
# JSON with its path


class _Reader:
    """A value of the parsed JSON together with its path."""

    def __init__(self, value: Any, path: str) -> None:
        self.value = value
        self.path = path

    def fail(self, expected: str) -> MalformedError:
        names = {dict: "an object", list: "a list", str: "a string", bool: "a boolean"}
        found = names.get(type(self.value), "null")
        if isinstance(self.value, _Number):
            found = f"the bare number {shorten(self.value.literal, 30)}"
        return MalformedError(f"expected {expected}, found {found}", path=self.path)

    def keys(self, *names: str) -> None:
        if not isinstance(self.value, dict):
            raise self.fail("an object")
        for key in self.value:
            if key not in names:
                raise MalformedError(f"unknown key '{shorten(key)}'", path=self.path)
        for name in names:
            if name not in self.value:
                raise MalformedError(f"the key '{name}' is missing", path=self.path)

    def child(self, name: str) -> _Reader:
        return _Reader(self.value[name], f"{self.path}.{name}")

    def peek(self, name: str) -> str:
        """The string at a key that decides how the rest is read."""
        if not isinstance(self.value, dict):
            raise self.fail("an object")
        if name not in self.value:
            raise MalformedError(f"the key '{name}' is missing", path=self.path)
        return self.child(name).text()

    def without(self, *names: str) -> _Reader:
        rest = {k: v for k, v in self.value.items() if k not in names}
        return _Reader(rest, self.path)

    def items(self) -> Iterator[_Reader]:
        if not isinstance(self.value, list):
            raise self.fail("a list")
        for i, item in enumerate(self.value):
            yield _Reader(item, f"{self.path}[{i}]")

    def text(self) -> str:
        if not isinstance(self.value, str):
            raise self.fail("a string")
        return self.value

    @contextmanager
    def building(self) -> Iterator[None]:
        """Turn the errors of constructors into errors at this path."""
        try:
            yield
        except InvariantError as error:
            raise RejectedError(
                error.code, self.path, str(error), "another value"
            ) from None
        except ClaimError as error:
            raise MalformedError(str(error), path=self.path) from None


# --------------------------------------------------------------------------
# shapes: one description serves reading and writing


@dataclass(frozen=True, slots=True)
class _Shape:
    """How one kind of value is read from JSON and written to it."""

    read: Callable[[_Reader], Any]
    write: Callable[[Any], Any]


_TEXT = _Shape(_Reader.text, str)
_INTEGER = _Shape(lambda r: read_integer(r.text(), path=r.path), write_integer)
_RATIONAL = _Shape(lambda r: read_rational(r.text(), path=r.path), write_rational)
_POLYNOMIAL = _Shape(lambda r: read_polynomial(r.text(), path=r.path), write_polynomial)


def _word(allowed: Any) -> _Shape:
    words = get_args(allowed)

    def read(reader: _Reader) -> str:
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

    def read(reader: _Reader) -> Any:
        reader.keys(*fields)
        with reader.building():
            return cls(**{k: shape.read(reader.child(k)) for k, shape in fields.items()})

    def write(value: Any) -> dict[str, Any]:
        return {k: shape.write(getattr(value, k)) for k, shape in fields.items()}

    return _Shape(read, write)


def _tagged(what: str, shapes: dict[Any, _Shape]) -> _Shape:
    """An object whose `kind` names one of these dataclasses; the rest is its record."""
    by_kind = {cls.KIND: shape for cls, shape in shapes.items()}

    def read(reader: _Reader) -> Any:
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


def _read_equation(reader: _Reader) -> FirstOrderEquation:
    match = _EQUATION_TEXT.fullmatch(reader.text())
    if match is None:
        raise MalformedError("expected an equation (b)*y' = (a)*y", path=reader.path)
    with reader.building():
        return FirstOrderEquation(
            numerator=read_polynomial(match["a"], path=reader.path),
            denominator=read_polynomial(match["b"], path=reader.path),
        )


def _read_counter_prime(reader: _Reader) -> CounterPrime:
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
    return _canonical({**obj, "digest": _digest(obj)})


def _canonical(obj: object) -> str:
    return json.dumps(obj, sort_keys=True, ensure_ascii=True, indent=1) + "\n"


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
    text = _read_text(data)
    obj = _read_json(text)
    root = _Reader(obj, "$")
    found = root.peek("format")
    if found != FORMAT:
        raise UnsupportedVersionError(
            f"format '{shorten(found)}' is not supported; this version reads '{FORMAT}'"
        )
    stored = root.peek("digest")
    if not re.fullmatch(r"[0-9a-f]{64}", stored):
        raise MalformedError("expected 64 lower-case hex digits", path="$.digest")
    certificate = _CERTIFICATE.read(root.without("format", "digest"))
    if _canonical(obj) != text:
        raise MalformedError(
            "the text is not canonical: expected sorted keys, an indent of one "
            "space, ASCII with \\u escapes and one final newline"
        )
    digest = _digest({key: value for key, value in obj.items() if key != "digest"})
    return StoredCertificate(certificate=certificate, digest=digest, stored_digest=stored)
