"""PARI as the judge: is every statement of a certificate true?

The script `pari_judge.gp` decides each statement by its own route (factorisation,
resultants, discriminants, power series, repeated differentiation mod p); it knows
nothing of the checker.  All certificates of one call go through one gp process.
"""

from __future__ import annotations

import re
import subprocess
from collections.abc import Iterable
from pathlib import Path
from typing import Any

import pytest

from tests.conftest import _skip_without

SCRIPT = Path(__file__).with_name("pari_judge.gp")
_EQUATION = re.compile(r"\((.*)\)\*y' = \((.*)\)\*y")


def judge_all(certificates: Iterable[dict[str, Any]]) -> list[str]:
    """For each certificate "" if all it says is true, else what is false.

    Only for certificates whose strings are numbers and polynomials, as after the
    codec has read them.  Skips the test where gp is missing.
    """
    _skip_without("gp")
    calls = [_call(obj) for obj in certificates]
    if not calls:
        return []
    lines = [f'iferr(print("judged: ", {c}), E, print("judged: ", E))' for c in calls]
    done = subprocess.run(
        ["gp", "-q", "-f", "-s", "256M", str(SCRIPT)],
        input="\n".join([*lines, "\\q", ""]), capture_output=True, text=True, timeout=600,
    )  # fmt: skip
    prefix = "judged: "
    out = [s[len(prefix) :] for s in done.stdout.splitlines() if s.startswith(prefix)]
    if len(out) != len(calls):
        pytest.fail(f"gp answered {len(out)} of {len(calls)}: {done.stderr[:500]}")
    return out


def judge_is_true(obj: dict[str, Any]) -> bool:
    """Whether PARI finds every statement of the certificate true."""
    return judge_all([obj]) == [""]


def _call(obj: dict[str, Any]) -> str:
    claim, proof = obj["claim"], obj["proof"]
    match = _EQUATION.fullmatch(claim["equation"])
    if match is None:
        raise ValueError(claim["equation"])
    b, a = match.groups()
    if proof["kind"] == "closed-form-disagrees" and claim["solution"] is None:
        return '"no closed form"'
    closed = [] if claim["solution"] is None else [_powers(claim["solution"])]
    words = f'"{claim["asserts"]}", {_list(closed)}, "{obj["verdict"]}", "{proof["kind"]}"'
    calls = [f"verdict({a}, {b}, {words})"]
    if proof["kind"] == "no-algebraic-solution":
        calls.append(_refutation(a, b, proof))
    elif proof["kind"] == "algebraic-solution":
        calls.append(_algebraic(a, b, proof))
    else:
        d = proof["disagreement"]
        calls.append(_algebraic(a, b, proof["actual"]))
        calls.append(
            f"disagreement({a}, {b}, {closed[0]}, {d['factor']}, {d['residue_of_equation']}, "
            f"{d['residue_of_closed_form']}, {d['prime']})"
        )
    return f"concat([{', '.join(calls)}])"


def _list(items: Iterable[str]) -> str:
    return f"[{', '.join(items)}]"


def _records(items: Iterable[dict[str, str]], *keys: str) -> str:
    return _list(_list(item[key] for key in keys) for item in items)


def _powers(items: list[dict[str, str]]) -> str:
    return _records(items, "base", "exponent")


def _algebraic(a: str, b: str, proof: dict[str, Any]) -> str:
    m, e = proof["minimal_polynomial"], proof["eisenstein"]
    minimal = _list([m["degree"], _powers(m["numerator"]), _powers(m["denominator"])])
    point = _list([] if e is None else [e["point"], e["constant"]])
    return (
        f"algebraicside({a}, {b}, {_powers(proof['solution'])}, "
        f"{_records(proof['partial_fractions'], 'factor', 'residue')}, "
        f"{proof['degree']}, {minimal}, {proof['squarefree_prime']}, {point})"
    )


def _refutation(a: str, b: str, proof: dict[str, Any]) -> str:
    def those(kind: str, *keys: str) -> str:
        return _records((o for o in proof["obstructions"] if o["kind"] == kind), *keys)

    quotients = [o["quotient"] for o in proof["obstructions"] if "quotient" in o]
    prime, value, density = proof["counter_prime"], proof["p_curvature"], proof["density"]
    return (
        f"refutation({a}, {b}, "
        f"{_records(proof['squarefree_decomposition'], 'factor', 'multiplicity')}, "
        f"{proof['lowest_terms_prime']}, {_list(quotients)}, "
        f"{those('multiple_pole', 'factor', 'order')}, "
        f"{those('irrational_residue', 'factor', 'residue_polynomial', 'rootless_prime')}, "
        f"{prime['p']}, {_list(prime[k] for k in ('factor', 'residue') if k in prime)}, "
        f"{_list([] if value is None else [value['numerator']])}, "
        f"{density['bound']}, {_records(density['witnesses'], 'p', 'order')})"
    )
