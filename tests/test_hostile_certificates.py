"""The hostile records about JSON and certificates, answered by the reader and the checker.

The records speak of another format: bare keys such as `N`, polynomials as lists,
steps with ids.  Each is translated into the place of our format that has the same
sense (`N` is the degree, `name` the title, a polynomial a text); records about things
that our format does not have are listed with the reason.
"""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest

from certgen.checker import check
from certgen.checker.__main__ import main
from certgen.errors import CertgenError
from tests.handmade import Json, algebraic, canonical, handmade, powers, stored, with_digest
from tests.rejected import TAMPERED

TRUTHS = Path(__file__).with_name("truths") / "hostile_inputs.json"
RECORDS = {
    r["id"]: r
    for r in json.loads(TRUTHS.read_text(encoding="utf-8"))["records"]
    if r["kind"].split(":")[0] in ("json", "certificate")
}

NOT_OURS = {
    "H087": "no proof cites a place: poles follow from the claim",
    "H088": "there are no steps that cite each other",
    "H089": "there are no steps with ids",
}


def payload(identifier: str) -> Any:
    """The input itself; generated records hold a Python expression of ours."""
    record = RECORDS[identifier]
    if ":" in record["kind"]:
        return eval(record["payload"], {"__builtins__": {}})
    return record["payload"]


def _degree(identifier: str) -> str:
    """The raw JSON that stands at `N`, put where a certificate has its degree."""
    raw = payload(identifier).split(":", 1)[1][:-1]
    return stored(handmade("ferry")).replace('"degree": "1"', f'"degree": {raw}', 1)


def _exponent(identifier: str) -> str:
    raw = payload(identifier).split(":", 1)[1][:-1]
    return stored(handmade("ferry")).replace('"exponent": "-1"', f'"exponent": {raw}', 1)


def _base(base: str) -> str:
    obj = handmade("harbour-arches")
    obj["proof"]["solution"][0]["base"] = base
    return stored(obj)


def _title(identifier: str) -> str:
    obj = handmade("ferry")
    obj["claim"]["title"] = json.loads(payload(identifier))["name"]
    return stored(obj)


def _with(name: str, **changes: Any) -> str:
    obj = handmade(name)
    obj["proof"].update(changes)
    return stored(obj)


def _lie(name: str) -> str:
    return next(case.text for case in TAMPERED if case.name == name)


def _minimal(power: str, degree: str) -> Json:
    return {"degree": degree, "numerator": powers(("x^3 - x", power)), "denominator": []}


def _extra(text: str, key: str) -> str:
    return canonical(with_digest({**json.loads(text), key: "1"}))


def _common_root() -> str:
    proof = algebraic(
        powers(("x", "1/2"), ("x^2 - x", "1/3")), [("x", "1/2"), ("x^2 - x", "1/3")], "6",
        powers(("x", "3"), ("x^2 - x", "2")), [], "3", None,
    )  # fmt: skip
    return _with("harbour-arches", **proof)


def _other_equation() -> str:
    obj = handmade("harbour-arches")
    obj["claim"]["equation"] = handmade("ferry")["claim"]["equation"]
    return stored(obj)


# id -> (the input in our format, exit status, code of a rejection)
TRANSLATED: dict[str, tuple[Callable[[], str | bytes], int, str]] = {
    **{i: (lambda i=i: _degree(i), 2, "") for i in (
        "H033", "H034", "H035", "H036", "H037", "H039", "H040", "H041", "H042", "H043",
        "H044", "H045", "H051")},
    "H038": (lambda: _degree("H038"), 1, "degree"),  # a string is the one spelling
    **{i: (lambda i=i: _exponent(i), 2, "") for i in ("H046", "H047", "H048")},
    "H032": (lambda: stored(handmade("ferry")).replace(
        '"asserts": "algebraic"',
        '"asserts": "algebraic",\n  "asserts": "transcendental"'), 2, ""),
    **{i: (lambda i=i: payload(i), 2, "") for i in (
        "H055", "H056", "H057", "H060", "H061", "H062", "H063", "H064", "H067")},
    **{i: (lambda i=i: payload(i), 3, "") for i in ("H049", "H050", "H054")},
    "H052": (lambda: _degree("H052"), 1, "degree"),  # read exactly, and a wrong degree
    "H053": (lambda: _degree("H053"), 3, ""),
    "H058": (lambda: _title("H058"), 2, ""),
    "H059": (lambda: _title("H059"), 2, ""),
    "H065": (lambda: payload("H065"), 4, ""),
    "H066": (lambda: _extra(stored(handmade("ferry")), "extra"), 2, ""),
    "H068": (lambda: _base("x^1000000000"), 3, ""),
    "H069": (lambda: _base("x^5 + 2*x^5"), 2, ""),
    "H070": (lambda: _base("x + x^2"), 2, ""),
    "H071": (lambda: _base("0*x^2"), 2, ""),
    "H072": (lambda: _with("harbour-arches", degree="0"), 1, "vacuous"),
    "H073": (lambda: _base("0"), 1, "vacuous"),
    "H074": (lambda: _lie("empty-solution"), 1, "empty-solution"),
    "H075": (lambda: canonical(with_digest(handmade("harbour-arches"))).replace(
        "3*x^2 - 1)*y", "3*x^2 - 2)*y"), 1, "numerator-identity"),
    "H076": (lambda: _lie("numerator-identity"), 1, "numerator-identity"),
    "H077": (lambda: _lie("digest"), 1, "digest"),
    "H078": (lambda: _lie("verdict-transcendental"), 1, "verdict"),
    "H079": (_other_equation, 1, "denominator-identity"),
    "H080": (lambda: _extra(stored(handmade("ferry")), "verified"), 2, ""),
    "H081": (lambda: _with("harbour-arches", minimal_polynomial=_minimal("2", "4")),
             1, "minimal-polynomial"),
    # a product with Y - 1 has no spelling; Y^3 = ... is the nearest reducible multiple
    "H082": (lambda: _with("harbour-arches", minimal_polynomial=_minimal("1", "3")),
             1, "minimal-polynomial"),
    "H083": (lambda: _lie("prime-divides-leading-coefficient"),
             1, "prime-divides-leading-coefficient"),
    "H084": (lambda: _lie("not-prime"), 1, "not-prime"),
    "H085": (lambda: _with("harbour-arches", squarefree_prime="9" * 2000), 1, "not-prime"),
    "H086": (_common_root, 1, "denominator-identity"),
}  # fmt: skip


def test_every_record_is_translated_or_named() -> None:
    """58 records: none is forgotten, none is invented."""
    assert set(TRANSLATED) | set(NOT_OURS) == set(RECORDS)
    assert not set(TRANSLATED) & set(NOT_OURS)
    assert len(RECORDS) == 58


@pytest.mark.parametrize("arithmetic", ["plain", "flint"])
@pytest.mark.parametrize("identifier", TRANSLATED)
def test_hostile_records(identifier: str, arithmetic: Any) -> None:
    """The status that the record expects, with the code of our format."""
    make, status, code = TRANSLATED[identifier]
    with pytest.raises(CertgenError) as caught:
        check(make(), arithmetic=arithmetic)
    assert (caught.value.status, getattr(caught.value, "code", "")) == (status, code)
    assert len(str(caught.value)) < 500


def test_the_records_expect_these_statuses() -> None:
    """Where a record names a status it is ours; the differences are listed."""
    different = {
        "H038": "read: a string is our spelling, the degree is then wrong",
        "H052": "read: the degree is then wrong",
        "H074": "says when it is valid",
        "H085": "status 1 is the other answer that it allows",
    }
    for identifier, (_, status, _) in TRANSLATED.items():
        expected = RECORDS[identifier]["expected"]
        if identifier in different or not expected.startswith("exit"):
            assert identifier in different or identifier == "H080", expected
            continue
        assert expected.startswith(f"exit {status} "), (identifier, expected)


def test_a_file_over_the_byte_limit_is_not_read(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """H054 as a file: its size is enough."""
    large = tmp_path / "large.json"
    with large.open("wb") as file:
        file.truncate(10**8)
    monkeypatch.delattr(Path, "read_bytes")
    assert main([str(large)]) == 3
