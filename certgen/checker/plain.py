"""Polynomial arithmetic with the standard library alone.

Long products go through one multiplication of big integers (Kronecker
substitution); everything else is the school method.
"""

from __future__ import annotations

from collections.abc import Sequence

__all__ = ["ARITHMETIC"]

# Below this many coefficient products the school method is faster.
_SCHOOL = 48


def _strip(c: list[int]) -> list[int]:
    while c and c[-1] == 0:
        c.pop()
    return c


def _pack(c: Sequence[int], size: int) -> int:
    """sum c[i] * 256^(size*i) for 0 <= c[i] < 256^size."""
    return int.from_bytes(b"".join(x.to_bytes(size, "little") for x in c), "little")


def _pack_signed(c: Sequence[int], size: int) -> int:
    if min(c) >= 0:
        return _pack(c, size)
    positive = [x if x > 0 else 0 for x in c]
    negative = [-x if x < 0 else 0 for x in c]
    return _pack(positive, size) - _pack(negative, size)


def _unpack(n: int, count: int, size: int) -> list[int]:
    """The c with n = sum c[i] * 256^(size*i) and |c[i]| < 256^size / 2."""
    half = 1 << (8 * size - 1)
    shifted = n + int.from_bytes(half.to_bytes(size, "little") * count, "little")
    data = shifted.to_bytes(size * count + 1, "little")
    return [
        int.from_bytes(data[i : i + size], "little") - half
        for i in range(0, size * count, size)
    ]


def _product(f: list[int], g: list[int]) -> list[int]:
    if not f or not g:
        return []
    terms_f = [(i, x) for i, x in enumerate(f) if x]
    terms_g = [(j, y) for j, y in enumerate(g) if y]
    # also where few terms are not zero: packing would blow up sparse operands
    if len(terms_f) * len(terms_g) <= max(_SCHOOL, len(f) + len(g)):
        out = [0] * (len(f) + len(g) - 1)
        for i, x in terms_f:
            for j, y in terms_g:
                out[i + j] += x * y
        return out
    bits = max(map(int.bit_length, f)) + max(map(int.bit_length, g))
    size = (bits + min(len(f), len(g)).bit_length() + 2 + 7) // 8
    packed = _pack_signed(f, size)
    packed *= packed if f is g else _pack_signed(g, size)
    return _unpack(packed, len(f) + len(g) - 1, size)


def _sum(f: list[int], g: list[int], sign: int) -> list[int]:
    if len(f) < len(g):
        f = f + [0] * (len(g) - len(f))
    out = list(f)
    for i, y in enumerate(g):
        out[i] += sign * y
    return out


class _ZPoly:
    """See arithmetic.ZPoly."""

    __slots__ = ("_c",)

    def __init__(self, coefficients: list[int]) -> None:
        self._c = _strip(coefficients)

    @property
    def degree(self) -> int:
        return len(self._c) - 1

    def coefficients(self) -> list[int]:
        return list(self._c)

    def leading(self) -> int:
        return self._c[-1] if self._c else 0

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _ZPoly) and self._c == other._c

    __hash__ = None  # type: ignore[assignment]

    def __add__(self, other: _ZPoly) -> _ZPoly:
        return _ZPoly(_sum(self._c, other._c, 1))

    def __sub__(self, other: _ZPoly) -> _ZPoly:
        return _ZPoly(_sum(self._c, other._c, -1))

    def __mul__(self, other: _ZPoly) -> _ZPoly:
        return _ZPoly(_product(self._c, other._c))

    def times(self, factor: int) -> _ZPoly:
        return _ZPoly([factor * x for x in self._c])

    def derivative(self) -> _ZPoly:
        return _ZPoly([k * x for k, x in enumerate(self._c)][1:])

    def value(self, x: int) -> int:
        out = 0
        for c in reversed(self._c):
            out = out * x + c
        return out

    def shifted(self, x: int) -> _ZPoly:
        c = list(self._c)
        if x:
            for i in range(len(c) - 1):
                for j in range(len(c) - 2, i - 1, -1):
                    c[j] += x * c[j + 1]
        return _ZPoly(c)

    def exact_quotient(self, divisor: _ZPoly) -> _ZPoly | None:
        rest, d = list(self._c), divisor._c
        out = [0] * max(len(rest) - len(d) + 1, 0)
        for k in range(len(out) - 1, -1, -1):
            q, r = divmod(rest[k + len(d) - 1], d[-1])
            if r:
                return None
            out[k] = q
            if q:
                for i, y in enumerate(d):
                    rest[k + i] -= q * y
        return None if any(rest) else _ZPoly(out)

    def modulo(self, p: int) -> _ModPoly:
        return _ModPoly([x % p for x in self._c], p)


class _ModPoly:
    """See arithmetic.ModPoly."""

    __slots__ = ("_c", "_p")

    def __init__(self, coefficients: list[int], p: int) -> None:
        self._c = _strip(coefficients)
        self._p = p

    @property
    def degree(self) -> int:
        return len(self._c) - 1

    def coefficients(self) -> list[int]:
        return list(self._c)

    def __eq__(self, other: object) -> bool:
        return isinstance(other, _ModPoly) and (self._p, self._c) == (other._p, other._c)

    __hash__ = None  # type: ignore[assignment]

    def _of(self, c: list[int]) -> _ModPoly:
        p = self._p
        return _ModPoly([x % p for x in c], p)

    def __add__(self, other: _ModPoly) -> _ModPoly:
        return self._of(_sum(self._c, other._c, 1))

    def __sub__(self, other: _ModPoly) -> _ModPoly:
        return self._of(_sum(self._c, other._c, -1))

    def __mul__(self, other: _ModPoly) -> _ModPoly:
        return self._of(_product(self._c, other._c))

    def _divide(self, divisor: _ModPoly) -> tuple[list[int], list[int]]:
        p, d, rest = self._p, divisor._c, list(self._c)
        n = len(d) - 1
        inverse = pow(d[-1], -1, p)
        out = [0] * max(len(rest) - n, 0)
        for k in range(len(out) - 1, -1, -1):
            q = rest.pop() * inverse % p
            out[k] = q
            if q:
                rest[k:] = [(x - q * y) % p for x, y in zip(rest[k:], d, strict=False)]
        return out, rest

    def quotient(self, divisor: _ModPoly) -> _ModPoly:
        return _ModPoly(self._divide(divisor)[0], self._p)

    def remainder(self, divisor: _ModPoly) -> _ModPoly:
        return _ModPoly(self._divide(divisor)[1], self._p)

    def gcd(self, other: _ModPoly) -> _ModPoly:
        f, g = self, other
        while g._c:
            f, g = g, f.remainder(g)
        if not f._c:
            return f
        inverse = pow(f._c[-1], -1, self._p)
        return self._of([x * inverse for x in f._c])

    def derivative(self) -> _ModPoly:
        return self._of([k * x for k, x in enumerate(self._c)][1:])

    def power(self, exponent: int, modulus: _ModPoly | None = None) -> _ModPoly:
        out = _ModPoly([1], self._p)
        base = self if modulus is None else self.remainder(modulus)
        for bit in bin(exponent)[2:]:
            out = out * out
            if modulus is not None:
                out = out.remainder(modulus)
            if bit == "1":
                out = out * base
                if modulus is not None:
                    out = out.remainder(modulus)
        return out


class _Plain:
    name = "plain"

    def integer_polynomial(self, coefficients: Sequence[int]) -> _ZPoly:
        return _ZPoly(list(coefficients))

    def modular_polynomial(self, coefficients: Sequence[int], p: int) -> _ModPoly:
        return _ModPoly([x % p for x in coefficients], p)


ARITHMETIC = _Plain()
