"""Every single-field change of a certificate's JSON that we can think of.

Works on plain JSON objects and knows nothing of the checker or the codec: strings
that look like numbers or polynomials are read and written here.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from copy import deepcopy
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

__all__ = [
    "AUTHORS_WORDS", "Mutant", "read_coefficients", "single_field_mutants", "transplants",
    "write_coefficients",
]  # fmt: skip

AUTHORS_WORDS = frozenset(
    "$.claim.id $.claim.as_written $.claim.solution_as_written $.claim.title $.claim.note "
    "$.claim.letters.variable $.claim.letters.function".split()
)
"""Fields that say nothing mathematical: the author's names, texts and letters."""

_WORDS: dict[str, tuple[str, ...]] = {
    "verdict": ("proved", "refuted", "undecided"),
    "asserts": ("algebraic", "transcendental"),
    "subject": ("every solution", "some solution"),
    "kind": (
        "first-order-homogeneous", "algebraic-solution", "closed-form-disagrees",
        "no-algebraic-solution", "polynomial_part", "multiple_pole",
        "irrational_residue", "residue_outside_prime_field", "antiderivative",
    ),
    "format": ("certgen/1", "certgen/2", "certgen/0"),
}  # fmt: skip


@dataclass(frozen=True)
class Mutant:
    """A changed certificate: the path of the change, what was done, the new object."""

    path: str
    what: str
    obj: dict[str, Any]


def single_field_mutants(obj: dict[str, Any]) -> Iterator[Mutant]:
    """Yield every mutant of the object, which has no digest and stays unchanged."""
    for keys, path in _places(obj, (), "$"):
        value = _at(obj, keys)
        for what, new in _changes(path, value):
            if new != value:
                yield Mutant(path, what, _replaced(obj, keys, new))


def transplants(obj: dict[str, Any], others: Iterable[dict[str, Any]]) -> Iterator[Mutant]:
    """Yield the claim of the object with the proof (and verdict) of other certificates."""
    for other in others:
        for fields in (("proof",), ("proof", "verdict")):
            new = {**obj, **{name: other[name] for name in fields}}
            if new != obj:
                source = other["claim"]["id"]
                yield Mutant("$.proof", f"{' and '.join(fields)} of {source}", deepcopy(new))


Keys = tuple[Any, ...]


def _places(value: Any, keys: Keys, path: str) -> Iterator[tuple[Keys, str]]:
    yield keys, path
    if isinstance(value, dict):
        for name, item in value.items():
            yield from _places(item, (*keys, name), f"{path}.{name}")
    elif isinstance(value, list):
        for i, item in enumerate(value):
            yield from _places(item, (*keys, i), f"{path}[{i}]")


def _at(obj: Any, keys: Keys) -> Any:
    for key in keys:
        obj = obj[key]
    return obj


def _replaced(obj: dict[str, Any], keys: Keys, new: Any) -> dict[str, Any]:
    if not keys:
        return deepcopy(new)
    out = deepcopy(obj)
    _at(out, keys[:-1])[keys[-1]] = deepcopy(new)
    return out


def _changes(path: str, value: Any) -> Iterator[tuple[str, Any]]:
    name = re.sub(r"\[\d+\]$", "", path).rsplit(".", 1)[-1]
    if value is None:
        yield from (("null to {}", {}), ("null to []", []), ("null to '1'", "1"))
        yield "null to a curvature", {"numerator": "1"}
        yield "null to a constant", {"point": "2", "constant": "1"}
        yield "null to powers", [{"base": "x", "exponent": "1"}]
        return
    if path != "$":
        yield "to null", None
    if isinstance(value, dict):
        yield from _object_changes(value)
    elif isinstance(value, list):
        yield from _list_changes(value)
    elif name in _WORDS:
        yield from ((f"to {word}", word) for word in _WORDS[name])
        yield "upper case", value.upper()
    elif path == "$.claim.equation":
        yield from _equation_changes(value)
    elif path in AUTHORS_WORDS:
        yield from (("edited", f"{value} edited"), ("empty", ""), ("another letter", "q"))
    else:
        yield from _string_changes(value)


def _object_changes(value: dict[str, Any]) -> Iterator[tuple[str, Any]]:
    yield "one more key", {**value, "verified": "true"}
    for key in value:
        yield f"without {key}", {k: v for k, v in value.items() if k != key}


def _list_changes(value: list[Any]) -> Iterator[tuple[str, Any]]:
    yield "emptied", []
    yield "reversed", value[::-1]
    for i in range(len(value)):
        yield f"entry {i} dropped", value[:i] + value[i + 1 :]
        yield f"entry {i} twice", value[: i + 1] + value[i:]
        if i:
            swapped = [*value[: i - 1], value[i], value[i - 1], *value[i + 1 :]]
            yield f"entries {i - 1} and {i} swapped", swapped


def _string_changes(value: str) -> Iterator[tuple[str, str]]:
    yield "a space before", f" {value}"
    yield "a zero before", f"0{value}"
    yield "a plus before", f"+{value}"
    yield "empty", ""
    if re.fullmatch(r"-?\d+(/\d+)?", value):
        yield from _number_changes(value)
    for what, f in _polynomial_changes(read_coefficients(value)):
        yield what, write_coefficients(f)


def _number_changes(value: str) -> Iterator[tuple[str, str]]:
    top, _, bottom = value.partition("/")
    n, d = int(top), int(bottom or "1")
    yield "not in lowest terms", f"{2 * n}/{2 * d}"
    yield "decimal", f"{n / d}"
    numbers = {
        "numerator + 1": Fraction(n + 1, d), "numerator - 1": Fraction(n - 1, d),
        "denominator + 1": Fraction(n, d + 1), "other sign": Fraction(-n, d),
        "doubled": Fraction(2 * n, d), "halved": Fraction(n, 2 * d),
        "times 3": Fraction(3 * n, d), "zero": Fraction(0), "square": Fraction(n * n, d * d),
        "plus 1": Fraction(n, d) + 1, "minus 1": Fraction(n, d) - 1,
        "plus 2": Fraction(n, d) + 2, "plus 4": Fraction(n, d) + 4,
        "to 5": Fraction(5), "to 7": Fraction(7), "to 11": Fraction(11),
        "nine": Fraction(9), "ninety-one": Fraction(91),
        "a large prime": Fraction(1_000_003), "a huge integer": Fraction(10**30 + 57),
    }  # fmt: skip
    if d > 1:
        numbers["denominator - 1"] = Fraction(n, d - 1)
    if n:
        numbers["inverse"] = Fraction(d, n)
    yield from ((what, str(number)) for what, number in numbers.items())


def _equation_changes(value: str) -> Iterator[tuple[str, str]]:
    match = re.fullmatch(r"\((.*)\)\*y' = \((.*)\)\*y", value)
    if match is None:
        raise ValueError(value)
    b, a = match.groups()
    yield "sides swapped", f"({a})*y' = ({b})*y"
    yield "no asterisks", f"({b})y' = ({a})y"
    yield "a space before", f" {value}"
    for what, f in _polynomial_changes(read_coefficients(b)):
        yield f"b: {what}", f"({write_coefficients(f)})*y' = ({a})*y"
    for what, f in _polynomial_changes(read_coefficients(a)):
        yield f"a: {what}", f"({b})*y' = ({write_coefficients(f)})*y"
    for what, g in (("2", [2]), ("-1", [-1]), ("x", [0, 1]), ("x + 1", [1, 1])):
        both = [write_coefficients(_times(read_coefficients(part), g)) for part in (b, a)]
        yield f"both sides times {what}", f"({both[0]})*y' = ({both[1]})*y"


# --------------------------------------------------------------------------
# polynomials as ascending lists of rationals

Coefficients = list[Fraction] | list[int]


def _polynomial_changes(f: Coefficients) -> Iterator[tuple[str, Coefficients]]:
    c = [Fraction(x) for x in f] or [Fraction(0)]
    for k in range(len(c)):
        for step in (1, -1):
            yield f"coefficient {k} {step:+d}", _with(c, k, c[k] + step)
        if c[k]:
            yield f"term {k} dropped", _with(c, k, Fraction(0))
            yield f"coefficient {k}: other sign", _with(c, k, -c[k])
    yield "one degree more", [*c, Fraction(1)]
    for what, g in (("x", [0, 1]), ("x - 1", [-1, 1]), ("x + 1", [1, 1]), ("2", [2]),
                    ("-1", [-1]), ("1/2", [Fraction(1, 2)])):  # fmt: skip
        yield f"times {what}", _times(c, g)
    yield "squared", _times(c, c)
    yield "reversed", c[::-1]
    yield "at -x", [(-1) ** k * x for k, x in enumerate(c)]
    yield "derivative", [k * x for k, x in enumerate(c)][1:]


def _with(c: list[Fraction], k: int, value: Fraction) -> list[Fraction]:
    return [*c[:k], value, *c[k + 1 :]]


def _times(f: Coefficients, g: Coefficients) -> list[Fraction]:
    out = [Fraction(0)] * (len(f) + len(g) - 1)
    for i, x in enumerate(f):
        for j, y in enumerate(g):
            out[i + j] += x * y
    return out


def read_coefficients(text: str) -> list[Fraction]:
    """The coefficients of a polynomial such as `-3/2*x^2 + x - 1`."""
    out: dict[int, Fraction] = {}
    for sign, number, x, exponent in re.findall(
        r"(-?)(\d+(?:/\d+)?)?\*?(x?)(?:\^(\d+))?(?:\s|$)", text.replace("- ", "-")
    ):
        if number or x:
            degree = int(exponent or 1) if x else 0
            out[degree] = Fraction(number or 1) * (-1 if sign else 1)
    return [out.get(k, Fraction(0)) for k in range(max(out, default=-1) + 1)]


def write_coefficients(f: Coefficients) -> str:
    """The polynomial with these ascending coefficients, in strict notation."""
    pieces = []
    for k in range(len(f) - 1, -1, -1):
        if f[k]:
            power = "" if k == 0 else "x" if k == 1 else f"x^{k}"
            size = str(abs(f[k]))
            piece = power if power and size == "1" else "*".join(filter(None, (size, power)))
            plus, minus = ("+ ", "- ") if pieces else ("", "-")
            pieces.append((minus if f[k] < 0 else plus) + piece)
    return " ".join(pieces) or "0"
