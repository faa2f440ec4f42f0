"""A second checker, rule by rule what `certgen/format/specification.md` says.

It shares no code with certgen (plain Python, schoolbook arithmetic), but its author had
read the first one: agreement shows slips of either, not a misconception of both.
`judge(text)` gives the exit status and, for a rejection, the code.
"""

from __future__ import annotations

import hashlib
import json
import re
from collections import Counter
from fractions import Fraction
from itertools import count, pairwise
from math import gcd, lcm
from typing import Any

Poly = list[Any]  # ascending coefficients, no trailing zero


class Verdict(Exception):
    def __init__(self, status: int, code: str | None = None) -> None:
        self.status, self.code = status, code


def need(ok: bool, code: str | int) -> None:
    if not ok:
        raise Verdict(code) if isinstance(code, int) else Verdict(1, code)


# ---------------------------------------------------------------- polynomials


def trim(f: Poly) -> Poly:
    while f and f[-1] == 0:
        f.pop()
    return f


def add(f: Poly, g: Poly, s: int = 1) -> Poly:
    n = max(len(f), len(g))
    f, g = f + [0] * (n - len(f)), g + [0] * (n - len(g))
    return trim([x + s * y for x, y in zip(f, g, strict=True)])


def mul(f: Poly, g: Poly, p: int = 0) -> Poly:
    out = [0] * (len(f) + len(g) - 1) if f and g else []
    for i, x in enumerate(f):
        for j, y in enumerate(g):
            out[i + j] += x * y
    return mod(out, p) if p else trim(out)


def product(items: list[Poly]) -> Poly:
    out: Poly = [1]
    for f in items:
        out = mul(out, f)
    return out


def scale(f: Poly, c: Any) -> Poly:
    return trim([c * x for x in f])


def mod(f: Poly, p: int) -> Poly:
    return trim([x % p for x in f])


def diff(f: Poly, p: int = 0) -> Poly:
    out = [k * x for k, x in enumerate(f)][1:]
    return mod(out, p) if p else trim(out)


def divide(f: Poly, g: Poly, p: int = 0) -> tuple[Poly, Poly]:
    """Quotient and remainder over F_p, or over Q where p is 0."""
    inverse = pow(g[-1], -1, p) if p else Fraction(1, g[-1])
    rest, quotient = list(f), [0] * max(len(f) - len(g) + 1, 0)
    for k in range(len(quotient) - 1, -1, -1):
        c = rest[k + len(g) - 1] * inverse
        quotient[k] = c = c % p if p else c
        for i, y in enumerate(g):
            rest[k + i] -= c * y
            if p:
                rest[k + i] %= p
    return trim(quotient), trim(rest)


def common(f: Poly, g: Poly, p: int) -> Poly:
    while g:
        f, g = g, divide(f, g, p)[1]
    return mod([x * pow(f[-1], -1, p) for x in f], p) if f else f


def power(f: Poly, e: int, g: Poly, p: int) -> Poly:
    out, f = divide([1], g, p)[1], divide(f, g, p)[1]
    while e:
        if e & 1:
            out = divide(mul(out, f, p), g, p)[1]
        f, e = divide(mul(f, f, p), g, p)[1], e >> 1
    return out


# ---------------------------------------------------------------- reading

def number(t: str) -> int:
    """int(t) without Python's bound of 4300 digits."""
    return int(t) if len(t) <= 4000 else number(t[:-4000]) * 10**4000 + int(t[-4000:])


def digits(n: int) -> str:
    return str(n) if n < 10**4000 else digits(n // 10**4000) + str(n % 10**4000).zfill(4000)


INT = re.compile(r"0|-?[1-9][0-9]*")
TERM = re.compile(r"(^-?| [+-] )(?:([0-9]+)(?:/([0-9]+))?)?(\*?)(x(?:\^([0-9]+))?)?")


def integer(t: Any) -> int:
    need(isinstance(t, str) and INT.fullmatch(t) is not None, 2)
    need(len(t.lstrip("-")) <= 20_000, 3)
    return -number(t[1:]) if t[0] == "-" else number(t)


def rational(t: Any) -> Fraction:
    need(isinstance(t, str), 2)
    top, slash, bottom = t.partition("/")
    n, d = integer(top), integer(bottom) if slash else 1
    need(not slash or (d > 1 and gcd(n, d) == 1), 2)
    return Fraction(n, d)


def written(f: Poly) -> str:
    out = ""
    for k in range(len(f) - 1, -1, -1):
        if c := f[k]:
            out += (" - " if c < 0 else " + ") if out else ("-" if c < 0 else "")
            x = "" if k == 0 else "x" if k == 1 else f"x^{k}"
            n, d = abs(c).numerator, abs(c).denominator
            size = digits(n) + ("" if d == 1 else "/" + digits(d))
            out += x if x and size == "1" else f"{size}*{x}" if x else size
    return out or "0"


def polynomial(t: Any) -> Poly:
    need(isinstance(t, str) and t != "", 2)
    coefficients: dict[int, Fraction] = {}
    end = 0
    while end < len(t):
        m = TERM.match(t, end)
        need(m is not None and m.end() > end, 2)
        assert m is not None
        need(bool(m[2] or m[5]) and bool(m[4]) == bool(m[2] and m[5]), 2)
        need(not m[6] or (len(m[6]) <= 9 and int(m[6]) <= 10_000), 3)
        need(max(len(m[2] or ""), len(m[3] or "")) <= 20_000, 3)
        need(number(m[3] or "1") != 0, 2)
        k = int(m[6] or 1) if m[5] else 0
        need(not coefficients or k < min(coefficients), 2)
        sign = -1 if "-" in m[1] else 1
        coefficients[k] = Fraction(sign * number(m[2] or "1"), number(m[3] or "1"))
        end = m.end()
    bottom = lcm(*(c.denominator for c in coefficients.values()))
    need(bottom.bit_length() <= 66_669, 3)
    f = trim([coefficients.get(k, Fraction(0)) for k in range(max(coefficients) + 1)])
    need(written(f) == t, 2)
    return [int(c) for c in f] if all(c.denominator == 1 for c in f) else f


def key(f: Poly) -> tuple[int, Poly]:
    return len(f), f[::-1]


def ordered(fs: list[Poly]) -> None:
    need(all(key(f) < key(g) for f, g in pairwise(fs)), "not-canonical")


def integral(f: Poly) -> bool:
    return all(isinstance(c, int) for c in f)


def base(f: Poly) -> Poly:
    need(len(f) > 1, "vacuous")
    need(integral(f) and f[-1] > 0 and gcd(*f) == 1, "not-canonical")
    return f


def keys(o: Any, names: str) -> None:
    need(isinstance(o, dict) and set(o) == set(names.split()), 2)


def kind(o: Any, known: str) -> str:
    need(isinstance(o, dict) and isinstance(o.get("kind"), str), 2)
    need(o["kind"] in known.split(), 4)
    return str(o["kind"])


def items(o: Any) -> list[Any]:
    need(isinstance(o, list), 2)
    return list(o)


def powers(o: Any) -> list[tuple[Poly, Fraction]]:
    out = []
    for item in items(o):
        keys(item, "base exponent")
        f, e = polynomial(item["base"]), rational(item["exponent"])
        base(f)
        need(e != 0, "vacuous")
        out.append((f, e))
    return out


def text(t: Any, limit: int, lines: bool = True) -> None:
    need(isinstance(t, str), 2)
    need(len(t) <= limit, 3)
    bad = r"[\x00-\x08\x0b-\x1f\x7f-\x9f\ud800-\udfff]" if lines else (
        r"[\x00-\x1f\x7f-\x9f\ud800-\udfff]"
    )
    need(re.search(bad, t) is None, 2)


GREEK = (
    "alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi rho sigma tau "
    "upsilon phi chi psi omega Gamma Delta Theta Lambda Xi Sigma Upsilon Phi Psi Omega"
).split()


def read_equation(t: Any) -> tuple[Poly, Poly]:
    need(isinstance(t, str), 2)
    m = re.fullmatch(r"\(([^()]*)\)\*y' = \(([^()]*)\)\*y", t)
    need(m is not None, 2)
    assert m is not None
    a, b = polynomial(m[2]), polynomial(m[1])
    need(b != [], "vacuous")
    need(integral(a) and integral(b), "not-canonical")
    need(b[-1] > 0 and gcd(*a, *b) == 1 and (a != [] or b == [1]), "not-canonical")
    return a, b


def read_claim(c: Any) -> tuple[Poly, Poly, list[tuple[Poly, Fraction]] | None]:
    kind(c, "first-order-homogeneous")
    keys(c, "kind id equation as_written letters asserts subject solution "
            "solution_as_written title note")  # fmt: skip
    need(isinstance(c["id"], str), 2)
    need(re.fullmatch(r"[a-z0-9][a-z0-9-]{0,63}", c["id"]) is not None, 2)
    equation = read_equation(c["equation"])
    keys(c["letters"], "variable function")
    letters = [c["letters"]["variable"], c["letters"]["function"]]
    for x in letters:
        need(isinstance(x, str) and bool(re.fullmatch("[A-Za-z]", x) or x in GREEK), 2)
    need(letters[0] != letters[1], 2)
    need(c["asserts"] in ("algebraic", "transcendental"), 2)
    need(c["subject"] in ("every solution", "some solution"), 2)
    solution = None if c["solution"] is None else powers(c["solution"])
    need((solution is None) == (c["solution_as_written"] is None), 2)
    need(solution is None or c["asserts"] == "algebraic", 2)
    ordered([f for f, _ in solution or []])
    text(c["as_written"], 4_000_000)
    for name, limit, lines in (
        ("solution_as_written", 4_000_000, True), ("title", 200, False), ("note", 2_000, True)
    ):  # fmt: skip
        if c[name] is not None:
            text(c[name], limit, lines)
    return (*equation, solution)


ALGEBRAIC = "solution partial_fractions degree minimal_polynomial squarefree_prime eisenstein"


def read_algebraic(o: Any, tag: str = "") -> dict[str, Any]:
    keys(o, ALGEBRAIC + tag)
    solution, terms = powers(o["solution"]), []
    for item in items(o["partial_fractions"]):
        keys(item, "factor residue")
        f, rho = polynomial(item["factor"]), rational(item["residue"])
        base(f)
        need(rho != 0, "vacuous")
        terms.append((f, rho))
    degree, m = integer(o["degree"]), o["minimal_polynomial"]
    keys(m, "degree numerator denominator")
    minimal = (integer(m["degree"]), powers(m["numerator"]), powers(m["denominator"]))
    need(minimal[0] >= 1, "vacuous")
    for side in minimal[1:]:
        ordered([f for f, _ in side])
        need(all(e > 0 and e.denominator == 1 for _, e in side), "not-canonical")
    q, e, eisenstein = integer(o["squarefree_prime"]), o["eisenstein"], None
    if e is not None:
        keys(e, "point constant")
        eisenstein = (integer(e["point"]), integer(e["constant"]))
        need(eisenstein[1] >= 1, "vacuous")
    ordered([f for f, _ in solution])
    ordered([f for f, _ in terms])
    need(len({rho for _, rho in solution}) == len(solution), "not-canonical")
    need(degree >= 1, "vacuous")
    return {"solution": solution, "terms": terms, "degree": degree, "minimal": minimal,
            "prime": q, "eisenstein": eisenstein}  # fmt: skip


def read_disagreement(o: Any) -> tuple[Poly, Fraction, Fraction, int]:
    keys(o, "factor residue_of_equation residue_of_closed_form prime")
    g = polynomial(o["factor"])
    r, s = rational(o["residue_of_equation"]), rational(o["residue_of_closed_form"])
    p = integer(o["prime"])
    base(g)
    need(r != s, "vacuous")
    return g, r, s, p


def reduced(f: Poly, p: int) -> Poly:
    need(integral(f) and all(0 <= c < p for c in f), "not-canonical")
    return f


def read_obstruction(o: Any) -> tuple[Any, ...]:
    name = kind(o, "polynomial_part multiple_pole irrational_residue")
    if name == "polynomial_part":
        keys(o, "kind quotient")
        q = polynomial(o["quotient"])
        need(q != [], "vacuous")
        return 0, [], q
    if name == "multiple_pole":
        keys(o, "kind factor order")
        f, n = polynomial(o["factor"]), integer(o["order"])
        base(f)
        need(n >= 2, "vacuous")
        return 1, f, n
    keys(o, "kind factor residue_polynomial rootless_prime")
    g, r = polynomial(o["factor"]), polynomial(o["residue_polynomial"])
    q = integer(o["rootless_prime"])
    return 2, base(g), base(r), q


def read_counter_prime(o: Any) -> tuple[int, str, Poly, Poly]:
    need(isinstance(o, dict) and "p" in o, 2)
    p = integer(o["p"])
    name = kind(o, "polynomial_part multiple_pole residue_outside_prime_field")
    keys(o, {"polynomial_part": "p kind", "multiple_pole": "p kind factor"}.get(
        name, "p kind factor residue"))  # fmt: skip
    g = polynomial(o["factor"]) if "factor" in o else []
    s = polynomial(o["residue"]) if "residue" in o else []
    need(p >= 2, "not-canonical")
    if name != "polynomial_part":
        reduced(g, p)
        need(len(g) >= 2, "vacuous")
        need(g[-1] == 1, "not-canonical")
    if name == "residue_outside_prime_field":
        reduced(s, p)
        need(len(s) >= 2, "vacuous")
        need(len(s) < len(g), "not-canonical")
    return p, name, g, s


def read_density(o: Any) -> tuple[Fraction, list[tuple[int, int]]]:
    keys(o, "bound witnesses")
    bound, out = rational(o["bound"]), []
    for item in items(o["witnesses"]):
        keys(item, "p order")
        p, t = integer(item["p"]), integer(item["order"])
        need(p >= 2, "not-canonical")
        need(t >= 2, "vacuous")
        out.append((p, t))
    need(0 < bound <= 1, "vacuous")
    primes = [p for p, _ in out]
    need(primes == sorted(set(primes)), "not-canonical")
    return bound, out


def read_refutation(o: Any) -> dict[str, Any]:
    keys(o, "kind squarefree_decomposition lowest_terms_prime obstructions counter_prime "
            "p_curvature density")  # fmt: skip
    factors, curvature = [], None
    for item in items(o["squarefree_decomposition"]):
        keys(item, "factor multiplicity")
        f, m = polynomial(item["factor"]), integer(item["multiplicity"])
        base(f)
        need(m >= 1, "vacuous")
        factors.append((f, m))
    lowest = integer(o["lowest_terms_prime"])
    obstructions = [read_obstruction(item) for item in items(o["obstructions"])]
    counter = read_counter_prime(o["counter_prime"])
    if o["p_curvature"] is not None:
        keys(o["p_curvature"], "numerator")
        curvature = polynomial(o["p_curvature"]["numerator"])
        need(curvature != [], "vacuous")
        need(integral(curvature), "not-canonical")
    density = read_density(o["density"])
    ordered([f for f, _ in factors])
    ranks = [x[0] for x in obstructions]
    need(ranks == sorted(ranks) and ranks.count(0) <= 1, "not-canonical")
    for rank in (1, 2):
        ordered([x[1] for x in obstructions if x[0] == rank])
    return {"factors": factors, "lowest": lowest, "obstructions": obstructions,
            "counter": counter, "curvature": curvature, "density": density}  # fmt: skip


# ---------------------------------------------------------------- primes


def is_prime(n: int) -> bool:
    return n > 1 and all(n % d for d in range(2, min(n, 1 + int(n**0.5) + 1)) if d < n)


def prime(n: int, leading: int | None = None) -> None:
    need(1 < n < 10**12 and is_prime(n), "not-prime")
    need(leading is None or leading % n != 0, "prime-divides-leading-coefficient")


def squarefree(f: Poly, p: int) -> bool:
    image = mod(f, p)
    return len(common(image, diff(image, p), p)) == 1


# ---------------------------------------------------------------- algebraic (A, C, D)


def log_derivative(solution: list[tuple[Poly, Fraction]]) -> tuple[int, Poly, Poly]:
    n = 1
    for _, rho in solution:
        n = lcm(n, rho.denominator)
        need(n.bit_length() <= 66_440, 3)
    m: Poly = []
    for i, (v, rho) in enumerate(solution):
        others = product([w for j, (w, _) in enumerate(solution) if j != i])
        m = add(m, scale(mul(diff(v), others), int(n * rho)))
    return n, m, product([v for v, _ in solution])


def check_algebraic(a: Poly, b: Poly, o: dict[str, Any]) -> None:
    solution = o["solution"]
    need(bool(solution) or a == [], "empty-solution")
    n, m, v = log_derivative(solution)
    need(o["degree"] == n, "degree")
    beta = Fraction(b[-1], v[-1])
    need(scale(v, beta) == b and beta.denominator == 1, "denominator-identity")
    need(scale(m, beta) == scale(a, n), "numerator-identity")
    prime(o["prime"], v[-1])
    need(squarefree(v, o["prime"]), "not-squarefree")
    groups: dict[Fraction, list[Poly]] = {}
    for f, rho in o["terms"]:
        groups.setdefault(rho, []).append(f)
    expected = {rho: f for f, rho in solution}
    need({rho: product(fs) for rho, fs in groups.items()} == expected, "partial-fractions")
    sides = [[(f, s * n * rho) for f, rho in solution if s * rho > 0] for s in (1, -1)]
    need(o["minimal"] == (n, *sides), "minimal-polynomial")
    if o["eisenstein"] is not None:
        check_eisenstein(solution, v, *o["eisenstein"])


def value(f: Poly, x: int) -> int:
    return sum(int(c) * x**k for k, c in enumerate(f))


def radical(n: int) -> int:
    out, rest, d = 1, n, 2
    while d * d <= rest:
        if rest % d == 0:
            out *= d
            while rest % d == 0:
                rest //= d
        d += 1
    return out * rest


def check_eisenstein(solution: Any, v: Poly, x0: int, constant: int) -> None:
    need((len(v) - 1) * x0.bit_length() <= 200_000, "eisenstein-point")
    need(value(v, x0) != 0, "eisenstein-point")
    for f, rho in solution:
        d = rho.denominator
        c = value(f, x0) * (1 if d == 1 else d * (radical(d) if d < 10**9 else d))
        if constant % c == 0:
            continue
        need(len(f) <= 101, "eisenstein-constant")
        taylor, factorial = diff(f), 1
        for j in range(1, len(f)):
            factorial *= j
            need(constant**j * (value(taylor, x0) // factorial) % c == 0, "eisenstein-constant")
            taylor = diff(taylor)


def check_closed_form(a: Poly, b: Poly, closed: list[tuple[Poly, Fraction]]) -> None:
    need(sum(len(w) - 1 for w, _ in closed) <= 10_000, 3)
    n, m, w = log_derivative(closed)
    need(scale(mul(a, w), n) == mul(b, m), "closed-form")


def check_disagreement(solution: Any, closed: Any, d: Any) -> None:
    g, of_equation, of_closed_form, p = d
    prime(p, g[-1])
    need(squarefree(g, p), "disagreement-factor")

    def coprime(f: Poly) -> None:
        need(len(common(mod(g, p), mod(f, p), p)) == 1, "disagreement-factor")

    hits = [rho for f, rho in solution if divide(f, g)[1] == []]
    if not hits:
        for f, _ in solution:
            coprime(f)
    need(of_equation == (hits or [0])[0], "disagreement-residue")
    total = Fraction(0)
    for w, e in closed:
        while divide(w, g)[1] == []:
            w, total = [int(c) for c in divide(w, g)[0]], total + e
        coprime(w)
    need(of_closed_form == total, "disagreement-residue")


# ---------------------------------------------------------------- refutation (R)


def cancelled(a: Poly, b: Poly, q: int) -> tuple[Poly, Poly]:
    u, v = mod(a, q), mod(b, q)
    g = common(u, v, q)
    return divide(u, g, q)[0], divide(v, g, q)[0]


def frobenius_order(u: Poly, v: Poly, q: int, limit: int) -> int:
    """The least t <= limit with s^(q^t) = s at all poles, s = u/v'; 0 if there is none."""
    d = diff(v, q)
    top, bottom = u, d
    for t in range(1, limit + 1):
        top, bottom = power(top, q, v, q), power(bottom, q, v, q)
        if divide(mod(add(mul(top, d), mul(u, bottom), -1), q), v, q)[1] == []:
            return t
    return 0


def simple(u: Poly, v: Poly, q: int) -> bool:
    return len(u) < len(v) and squarefree(v, q)


def check_refutation(a: Poly, b: Poly, o: dict[str, Any]) -> None:
    factors = o["factors"]
    need(sum((len(f) - 1) * m for f, m in factors) == len(b) - 1, "squarefree-decomposition")
    whole = product([f for f, m in factors for _ in range(m)])
    beta = Fraction(b[-1], whole[-1])
    need(scale(whole, beta) == b and beta.denominator == 1, "squarefree-decomposition")
    prime(o["lowest"], b[-1])
    q = o["lowest"]
    need(len(common(mod(a, q), mod(b, q), q)) == 1, "not-lowest-terms")
    rad = product([f for f, _ in factors])

    def good(q: int) -> bool:
        return b[-1] % q != 0 and squarefree(rad, q)

    p, name, g, s = o["counter"]
    prime(p)
    need(good(p), "bad-prime")
    u, v = cancelled(a, b, p)
    need(witness(name, u, v, g, s, p), "counter-prime-witness")
    for q in range(2, p):
        if is_prime(q) and good(q):
            x, y = cancelled(a, b, q)
            zero = x == [] or (simple(x, y, q) and frobenius_order(x, y, q, 1) == 1)
            need(zero, "not-smallest")
    check_obstructions(a, b, factors, o["obstructions"])
    if o["curvature"] is not None:
        need(p * max(len(u), len(v)) <= 40_000, "p-curvature")
        need(o["curvature"] == p_curvature(u, v, p), "p-curvature")
    bound, witnesses = o["density"]
    if len(a) >= len(b) or any(m > 1 for _, m in factors):
        need(bound == 1 and not witnesses, "density")
        return
    need(len(witnesses) <= 50 and all(t <= 100 for _, t in witnesses), "density")
    need(bound == 1 - Fraction(1, max(2, lcm(*(t for _, t in witnesses)))), "density")
    for q, order in witnesses:
        prime(q)
        need(good(q), "bad-prime")
        x, y = cancelled(a, b, q)
        need(len(y) > 1 and simple(x, y, q), "density")
        need(frobenius_order(x, y, q, order) == order, "density")


def witness(name: str, u: Poly, v: Poly, g: Poly, s: Poly, p: int) -> bool:
    if name == "polynomial_part":
        return u != [] and len(u) >= len(v)
    if name == "multiple_pole":
        return divide(v, mul(g, g, p), p)[1] == []
    d = diff(v, p)
    return (
        divide(v, g, p)[1] == []
        and len(common(g, d, p)) == 1
        and divide(mod(add(u, mul(s, d), -1), p), g, p)[1] == []
        and power(s, p, g, p) != s
    )


def p_curvature(u: Poly, v: Poly, p: int) -> Poly:
    t = u
    for _ in range(p - 1):
        t = mul(t, v, p)
    out = list(u) + [0] * len(t)
    for k in count():
        if k * p + p - 1 >= len(t):
            return mod(out, p)
        out[k] -= t[k * p + p - 1]
    raise AssertionError


def check_obstructions(a: Poly, b: Poly, factors: Any, found: Any) -> None:
    multiple = [(f, m) for f, m in factors if m > 1]
    need(multiple == [(x[1], x[2]) for x in found if x[0] == 1], "obstructions")
    need((len(a) >= len(b)) == any(x[0] == 0 for x in found), "obstructions")
    need(sum(len(x[1]) - 1 for x in found if x[0] == 2) <= len(b) - 1, "obstructions")
    for x in found:
        if x[0] == 0:
            need(len(add(a, mul(x[2], b), -1)) < len(b), "obstructions")
        if x[0] == 2:
            check_irrational(a, b, factors, x[1], x[2], x[3])


def check_irrational(a: Poly, b: Poly, factors: Any, g: Poly, r: Poly, q: int) -> None:
    need(any(m == 1 and divide(f, g)[1] == [] for f, m in factors), "irrational-residue")
    need((len(g) - 1) * (len(r) - 1) <= 400, "irrational-residue")
    s, h = len(b) - len(g) + 1, max(abs(c).bit_length() for c in g)
    need(s * h * (len(r) - 1) <= 2_000_000 and s * s * h * (len(g) - 1) <= 5_000_000_000, 3)
    prime(q, r[-1])
    image = mod(r, q)
    moved = mod(add(power([0, 1], q, image, q), [0, 1], -1), q)
    need(len(common(moved, image, q)) == 1, "irrational-residue")
    top, bottom = divide(a, g)[1], divide(diff(b), g)[1]
    total: Poly = []
    scaled: Poly = [1]
    for c in reversed(r):
        total = divide(add(mul(total, top), scale(scaled, c)), g)[1]
        scaled = divide(mul(scaled, bottom), g)[1]
    need(total == [], "irrational-residue")


# ---------------------------------------------------------------- the whole


def parse(data: str) -> Any:
    def unique(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
        need(max(Counter(k for k, _ in pairs).values(), default=1) == 1, 2)
        return dict(pairs)

    def refuse(_: str) -> Any:
        raise Verdict(2)

    depth = 0
    for token in re.findall(r'"(?:[^"\\]|\\.)*"|[\[{]|[\]}]', data):
        depth += (token in "[{") - (token in "]}")
        need(depth <= 16, 3)
    try:
        return json.loads(data, object_pairs_hook=unique, parse_int=refuse,
                          parse_float=refuse, parse_constant=refuse)  # fmt: skip
    except json.JSONDecodeError:
        raise Verdict(2) from None


def check(data: str) -> None:
    need(data.isascii() and data != "", 2)
    need(len(data) <= 64 * 1024 * 1024, 3)
    o = parse(data)
    need(isinstance(o, dict) and isinstance(o.get("format"), str), 2)
    need(o["format"] == "certgen/1", 4)
    keys(o, "format digest claim verdict proof")
    need(isinstance(o["digest"], str) and bool(re.fullmatch("[0-9a-f]{64}", o["digest"])), 2)
    a, b, closed = read_claim(o["claim"])
    need(o["verdict"] in ("proved", "refuted", "undecided"), 2)
    name = kind(o["proof"], "algebraic-solution closed-form-disagrees no-algebraic-solution")
    asserts, proof, wrong = o["claim"]["asserts"], o["proof"], None
    if name == "algebraic-solution":
        parts = read_algebraic(proof, " kind")
    elif name == "closed-form-disagrees":
        keys(proof, "kind actual disagreement")
        parts, wrong = read_algebraic(proof["actual"]), read_disagreement(proof["disagreement"])
    else:
        parts = read_refutation(proof)
    need(json.dumps(o, sort_keys=True, ensure_ascii=True, indent=1) + "\n" == data, 2)
    if name == "no-algebraic-solution":
        check_refutation(a, b, parts)
        holds = asserts == "transcendental"
    elif wrong is None:
        check_algebraic(a, b, parts)
        if closed is not None:
            check_closed_form(a, b, closed)
        holds = asserts == "algebraic"
    else:
        check_algebraic(a, b, parts)
        need(closed is not None, "no-closed-form")
        check_disagreement(parts["solution"], closed, wrong)
        holds = False
    need(o["verdict"] == ("proved" if holds else "refuted"), "verdict")
    rest = {k: v for k, v in o.items() if k != "digest"}
    compact = json.dumps(rest, sort_keys=True, ensure_ascii=True, separators=(",", ":"))
    need(hashlib.sha256(compact.encode()).hexdigest() == o["digest"], "digest")


def judge(data: str) -> tuple[int, str | None]:
    """The exit status, and the code where it is 1."""
    try:
        check(data)
    except Verdict as verdict:
        return verdict.status, verdict.code
    return 0, None
