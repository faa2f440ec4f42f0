"""The appendix: what is printed, that it can be read back, and what is refused."""

from __future__ import annotations

import re
from fractions import Fraction
from pathlib import Path

import pytest
import sympy
from flint import fmpq_poly
from jinja2 import UndefinedError

from certgen.api import certify
from certgen.appendix import (
    latex_summary,
    printed_formulas,
    standalone,
    typeset,
    typeset_many,
)
from certgen.appendix.environment import _environment, render
from certgen.appendix.formulas import Printer, prose, typewriter
from certgen.appendix.strip import build_strip
from certgen.appendix.symbols import Symbols, choose_symbols
from certgen.certificate import (
    AlgebraicSolution,
    ClosedFormDisagrees,
    IrrationalResidue,
    MultiplePole,
    NoAlgebraicSolution,
    PolynomialPart,
    ResidueOutsidePrimeField,
)
from certgen.checker import CheckedCertificate, check
from certgen.checker.facts import (
    AlgebraicFacts,
    Bezout,
    ClosedFormFacts,
    IrrationalResidueFacts,
    NoAlgebraicFacts,
    PrimeStatus,
)
from certgen.claim import Letters
from certgen.errors import ClaimError, DefectError, RejectedError
from certgen.notation import read_latex_polynomial
from certgen.notation.latex_writer import Latex
from certgen.polynomial import Polynomial, read_polynomial, write_polynomial
from tests.handmade import NAMES, handmade, stored

SAMPLES = sorted((Path(__file__).parent.parent / "samples/certificates").glob("*.json"))
LONG = "(x^60 - 12345678901234567890*x^59 + 7*x + 1)*y' = (x + 98765432109876543210)*y"


def checked(name: str, **claim: object) -> CheckedCertificate:
    obj = handmade(name)
    obj["claim"].update(claim)
    return check(stored(obj))


def words(fragment: str) -> str:
    """The fragment without line ends, so that sentences can be found."""
    return " ".join(fragment.split())


def formulas(fragment: str) -> dict[str, str]:
    return dict(printed_formulas(fragment))


# --------------------------------------------------------------------------
# what is typeset


def test_a_bare_certificate_is_refused() -> None:
    """Only what the checker accepted can be typeset."""
    item = checked("harbour-arches")
    for other in (item.certificate, item.facts, stored(handmade("ferry")), None):
        with pytest.raises(TypeError, match="only a CheckedCertificate"):
            typeset(other)  # type: ignore[arg-type]
        with pytest.raises(TypeError, match="only a CheckedCertificate"):
            typeset_many([item, other])  # type: ignore[list-item]


def test_a_stale_text_of_the_author_is_refused() -> None:
    """The author's text is read again; one about another equation is rejected."""
    item = checked("harbour-arches", as_written="y' = y/x")
    with pytest.raises(RejectedError) as caught:
        typeset(item)
    assert caught.value.code == "as-written-differs"


@pytest.mark.parametrize("name", NAMES)
def test_every_fragment_is_plain_short_lined_and_the_same_again(name: str) -> None:
    """ASCII, lines under 80 characters, no date, and byte-identical when repeated."""
    fragment = typeset(checked(name))
    assert fragment.isascii() and fragment.endswith("\\certgenend\n")
    assert max(map(len, fragment.split("\n"))) < 80
    assert fragment == typeset(checked(name))
    assert fragment.startswith(f"% certgen: {name}\n")
    assert "\\label" not in fragment and "\\newcommand" not in fragment
    assert "\\today" not in fragment and str(Path.cwd()) not in fragment


@pytest.mark.parametrize("name", NAMES)
def test_every_macro_is_provided_by_latex_or_defined_in_the_fragment(name: str) -> None:
    """Macros of ours begin with certgen and are provided, so that two inputs go together."""
    fragment = typeset(checked(name))
    body = re.sub(r"\\providecommand\{\\certgen[a-z]*\}", "", fragment)
    used = set(re.findall(r"\\(certgen[a-z]*)", body))
    assert used <= set(re.findall(r"\\providecommand\{\\(certgen[a-z]*)\}", fragment))


@pytest.mark.parametrize("name", NAMES)
def test_every_appendix_says_claim_verdict_digest_and_limits(name: str) -> None:
    """Claim, verdict, digest, commands, and what is not covered stand in each one."""
    item = checked(name)
    claim, text = item.certificate.claim, words(typeset(item))
    start = "Every" if claim.subject == "every solution" else "Some"
    assert f"{start} non-zero solution of" in text
    assert f"This claim is {item.certificate.verdict}." in text
    assert f"is {claim.asserts} over $\\mathbf{{C}}" in text
    groups = re.search(r"digest of the certificate: \\texttt\{([0-9a-f ]*)\}", text)
    assert groups is not None and groups[1].replace(" ", "") == item.digest
    plain = text.replace("\\certgenhere ", "").replace("{}", "").replace("\\mbox{", "")
    assert f"python -m certgen.checker {name}.json" in plain
    assert f"certgen check {name}.json" in plain
    assert "supports refereeing and never replaces it" in text
    assert re.search(r"\\emph\{by machine\}|\\emph\{by sight\}|\{by sight\}", text)


def test_the_title_and_the_note_are_the_authors_words() -> None:
    """Title and note are escaped, and absent when there are none."""
    nasty = r"\input{/etc/passwd} 100% $x_1$ #1 & ~ ^ {}"
    text = typeset(checked("ferry", title="Ferries & lamps", note=nasty))
    assert "Ferries \\& lamps" in text
    assert "\\input" not in text and "\\textbackslash" in text
    assert "author's words" in words(text)
    assert "author's words" not in words(typeset(checked("ferry")))


def test_text_that_is_not_ascii_and_long_words_are_safe() -> None:
    """Accents become LaTeX, other signs their code, long words get places to break."""
    assert prose("caf\u00e9 \u4e2d").isascii()
    assert prose("a" * 100).count("certgenhere") > 5
    assert typewriter("abcdefghijkl" * 4).count("certgenhere") == 3


# --------------------------------------------------------------------------
# reading back


def _number(value: Fraction | int) -> Polynomial:
    return Polynomial.from_coefficients([value])


def _bezout(name: str, value: Bezout | None) -> dict[str, Polynomial]:
    if value is None:
        return {}
    sides = {f"{name}-left": value.left, f"{name}-right": value.right}
    return {key: side for key, side in sides.items() if not side.is_zero}


def _refuted(proof: NoAlgebraicSolution, facts: NoAlgebraicFacts) -> dict[str, Polynomial]:
    """Every formula of a refutation, by its printed name."""
    reduced, witness = facts.reduction, proof.counter_prime.witness
    out = {
        "reduced-numerator": reduced.numerator,
        "reduced-denominator": reduced.denominator,
        "common-factor": reduced.common_factor,
        "reduced-derivative": reduced.derivative,
        **_bezout("good", reduced.bezout),
        **_bezout("lowest-terms", facts.lowest_terms),
    }
    if facts.remainder is not None:
        out["remainder"] = facts.remainder
    if isinstance(witness, ResidueOutsidePrimeField):
        out["witness-residue"] = witness.residue
        assert reduced.residue_power is not None
        out["witness-residue-power"] = reduced.residue_power
    if hasattr(witness, "factor"):
        out["witness-factor"] = witness.factor
    if proof.p_curvature is not None:
        out["p-curvature"] = proof.p_curvature.numerator
    for k, f in enumerate(proof.squarefree_decomposition, 1):
        out[f"squarefree-factor-{k}"] = f.factor
    irrational = iter(facts.irrational)
    for k, o in enumerate(proof.obstructions, 1):
        if isinstance(o, PolynomialPart):
            out["quotient"] = o.quotient
        elif isinstance(o, MultiplePole):
            out[f"multiple-pole-{k}"] = o.factor
        else:
            out |= _irrational(k, o, next(irrational))
    return out


def _irrational(
    k: int, o: IrrationalResidue, facts: IrrationalResidueFacts
) -> dict[str, Polynomial]:
    spot = facts.spot
    values = {"point": spot.point, "a": spot.numerator, "b": spot.derivative,
              "total": spot.total, "factor": spot.factor, "cofactor": spot.cofactor}
    return {
        f"residue-factor-{k}": o.factor,
        f"residue-polynomial-{k}": o.residue_polynomial,
        f"residue-numerator-{k}": facts.numerator,
        f"residue-derivative-{k}": facts.derivative,
        f"residue-cofactor-{k}": facts.cofactor,
        **{f"residue-spot-{name}-{k}": _number(v) for name, v in values.items()},
    }


def _algebraic(proof: AlgebraicSolution, facts: AlgebraicFacts) -> dict[str, Polynomial]:
    """Every formula of an algebraic solution, by its printed name."""
    assert facts.products is not None and facts.identity is not None
    assert facts.b_derivative is not None
    out = {"b-derivative": facts.b_derivative, "identity": facts.identity,
           **_bezout("squarefree", facts.bezout)}
    for k, power in enumerate(proof.solution, 1):
        out[f"base-{k}"], out[f"exponent-{k}"] = power.base, _number(power.exponent)
        out[f"derivative-{k}"] = facts.derivatives[k - 1]
        out[f"product-{k}"] = facts.products[k - 1]
    for k, term in enumerate(proof.partial_fractions, 1):
        out[f"factor-{k}"], out[f"residue-{k}"] = term.factor, _number(term.residue)
        root = facts.root_values[k - 1]
        if root is not None:
            out[f"residue-point-{k}"] = _number(root.root)
            out[f"residue-a-{k}"] = _number(root.a)
            out[f"residue-derivative-{k}"] = _number(root.derivative)
    if proof.eisenstein is not None:
        out["eisenstein-constant"] = _number(proof.eisenstein.constant)
    spot = facts.spot
    if spot is not None:
        rows = zip(spot.bases, spot.derivatives, spot.terms, strict=True)
        out |= {"spot-point": _number(spot.point), "spot-a": _number(spot.a),
                "spot-b": _number(spot.b)}
        for k, row in enumerate(rows, 1):
            for name, value in zip(("base", "derivative", "term"), row, strict=True):
                out[f"spot-{name}-{k}"] = _number(value)
    return out


def _expected(item: CheckedCertificate) -> dict[str, Polynomial]:
    """All that the certificate and the facts say, under the printed names."""
    claim, proof, facts = item.certificate.claim, item.certificate.proof, item.facts
    out = {"a": claim.equation.numerator, "b": claim.equation.denominator}
    if isinstance(proof, NoAlgebraicSolution):
        assert isinstance(facts, NoAlgebraicFacts)
        return out | _refuted(proof, facts)
    if isinstance(proof, ClosedFormDisagrees):
        assert isinstance(facts, ClosedFormFacts)
        value = proof.disagreement
        out["disagreement-factor"] = value.factor
        out["disagreement-residue"] = _number(value.residue_of_equation)
        out["disagreement-claimed"] = _number(value.residue_of_closed_form)
        for k, power in enumerate(claim.solution or (), 1):
            out[f"claimed-base-{k}"] = power.base
            out[f"claimed-exponent-{k}"] = _number(power.exponent)
        proof, facts = proof.actual, facts.actual
    assert isinstance(facts, AlgebraicFacts)
    return out | _algebraic(proof, facts)


# Computed by the appendix alone: checked against sympy in the tests that follow.
RECOMPUTED = re.compile(
    r"(?:expansion(?:-\d+)?|radical|squarefree-power-\d+|[a-z-]+-point"
    r"|residue-spot-(?:a|derivative)|residue-(?:difference|factor-value|quotient)-\d+"
    r"|multiple-pole-root-\d+|disagreement-(?:root|a|derivative|b)|claimed-(?:slope|value)-\d+)"
)


def _read_back(item: CheckedCertificate) -> dict[str, Polynomial]:
    """The printed formulas as polynomials; powers and products are left out."""
    claim = item.certificate.claim
    symbols = choose_symbols(claim.letters)
    out: dict[str, Polynomial] = {}
    for key, text in printed_formulas(typeset(item)):
        letter = claim.letters.variable
        if key.startswith("residue-polynomial"):
            letter = str(symbols.z)
        elif re.fullmatch(r"expansion-\d+", key):
            letter = str(symbols.t)
        if key.startswith("squarefree-power"):
            continue
        value = read_latex_polynomial(text, letter)
        assert out.setdefault(key, value) == value, key
    return out


MUST_APPEAR = re.compile(
    r"(?:a|b|base-\d+|exponent-\d+|disagreement-(?:factor|residue|claimed)|quotient|remainder"
    r"|multiple-pole-\d+|residue-factor-\d+|residue-polynomial-\d+|residue-numerator-\d+"
    r"|residue-derivative-\d+|witness-(?:factor|residue)|p-curvature|reduced-numerator"
    r"|reduced-denominator)"
)


@pytest.mark.parametrize("name", NAMES)
def test_every_printed_formula_is_read_back_from_the_page(name: str) -> None:
    """Each formula, read by the notation reader, is that of the certificate or the facts."""
    item = checked(name)
    printed, expected = _read_back(item), _expected(item)
    if item.certificate.claim.equation.numerator.is_zero:
        assert printed == {}
        return
    for key, value in printed.items():
        if not RECOMPUTED.fullmatch(key) or key in expected:
            assert value == expected[key], key
    needed = {key for key in expected if MUST_APPEAR.fullmatch(key)}
    assert needed <= printed.keys()


@pytest.mark.parametrize("path", SAMPLES, ids=lambda path: path.stem)
def test_the_samples_are_read_back_too(path: Path) -> None:
    """The sample certificates, with longer formulas and other letters."""
    item = check(path.read_text())
    printed, expected = _read_back(item), _expected(item)
    for key, value in printed.items():
        if not RECOMPUTED.fullmatch(key) or key in expected:
            assert value == expected[key], key


def test_the_printed_identity_holds() -> None:
    """The terms printed in Step 2 add up to N*a/beta, by FLINT, from the page alone."""
    printed = formulas(typeset(checked("mixed-knots")))

    def read(key: str) -> fmpq_poly:
        value = read_latex_polynomial(printed[key], "s")
        return fmpq_poly([int(c) for c in value.numerators]) / value.denominator

    v1, v2, b = read("base-1"), read("base-2"), read("b")
    assert read("product-1") == 3 * v1.derivative() * v2
    assert read("product-2") == -2 * v2.derivative() * v1
    assert 2 * v1 * v2 == b
    assert 2 * (read("product-1") + read("product-2")) == read("identity") == 6 * read("a")


def test_a_long_equation_is_read_back() -> None:
    """Degree 60 with 20 digits survives line breaks and places to break."""
    item = certify(LONG, id="long").checked
    printed = formulas(typeset(item))
    claim = item.certificate.claim
    assert read_latex_polynomial(printed["b"]) == claim.equation.denominator
    assert read_latex_polynomial(printed["a"]) == claim.equation.numerator


def test_a_changed_coefficient_is_seen() -> None:
    """Control: the comparison of printed and stored formulas can fail."""
    text = typeset(checked("harbour-arches")).replace("2x^{3}", "3x^{3}")
    value = read_latex_polynomial(formulas(text)["b"])
    assert value == read_polynomial("3*x^3 - 2*x")
    assert value != checked("harbour-arches").certificate.claim.equation.denominator


X = sympy.Symbol("x")


def poly(f: Polynomial, p: int = 0) -> sympy.Poly:
    values = [sympy.Rational(c.numerator, c.denominator) for c in f.coefficients[::-1]]
    return sympy.Poly(values or [0], X, modulus=p) if p else sympy.Poly(values or [0], X)


def at(f: sympy.Poly, point: Polynomial) -> Fraction:
    value = f.eval(sympy.Rational(*_fraction(point).as_integer_ratio()))
    return Fraction(int(value.p), int(value.q))


def _fraction(value: Polynomial) -> Fraction:
    return value.coefficient(0)


def _all_checked() -> list[CheckedCertificate]:
    samples = [check(path.read_text()) for path in SAMPLES]
    return [*(checked(name) for name in NAMES), *samples]


def test_the_values_of_residues_hold() -> None:
    """At the root a/b' is the residue; elsewhere top*a - bottom*b' = factor*quotient."""
    seen = set()
    for item in _all_checked():
        printed, claim = _read_back(item), item.certificate.claim
        a, b = poly(claim.equation.numerator), poly(claim.equation.denominator)
        for key in [k for k in printed if re.fullmatch(r"residue-difference-\d+", k)]:
            k = key.rsplit("-", 1)[1]
            point = printed["residue-spot-point"]
            factor, residue = printed.get(f"factor-{k}"), printed.get(f"residue-{k}")
            if factor is None or residue is None:
                factor, residue = printed[f"base-{k}"], printed[f"exponent-{k}"]
            rho = _fraction(residue)
            left = rho.denominator * at(a, point) - rho.numerator * at(b.diff(), point)
            assert left == _fraction(printed[key])
            assert at(poly(factor), point) == _fraction(printed[f"residue-factor-value-{k}"])
            quotient = _fraction(printed[f"residue-quotient-{k}"])
            assert left == at(poly(factor), point) * quotient
            assert at(a, point) == _fraction(printed["residue-spot-a"])
            assert at(b.diff(), point) == _fraction(printed["residue-spot-derivative"])
            seen.add("spot")
        if "disagreement-root" in printed and "disagreement-b" in printed:
            seen.add("root")
            assert at(b, printed["disagreement-root"]) == _fraction(printed["disagreement-b"])
    assert "spot" in seen


def test_the_values_at_a_disagreement_hold() -> None:
    """Root, a and b' there, and the value or the slope of each claimed base."""
    printed = _read_back(checked("misprint"))  # b = 2x^3 - 2x, a = 3x^2 - 1, at 1
    numbers = {key: _fraction(v) for key, v in printed.items() if v.degree <= 0}
    assert numbers["disagreement-root"] == 1
    assert (numbers["disagreement-a"], numbers["disagreement-derivative"]) == (2, 4)
    assert numbers["claimed-slope-2"] == 2 and numbers["claimed-value-1"] == 1


def test_the_expansions_of_an_eisenstein_constant_hold() -> None:
    """v(x0 + L*t) = v(x0)*(1 + d*e*series), with integer coefficients in the series."""
    seen = 0
    for item in _all_checked():
        proof = item.certificate.proof
        proof = getattr(proof, "actual", proof)
        eisenstein = getattr(proof, "eisenstein", None)
        if eisenstein is None:
            continue
        printed = _read_back(item)
        for k, power in enumerate(proof.solution, 1):
            if f"expansion-{k}" not in printed:
                continue
            series, d = printed[f"expansion-{k}"], power.exponent.denominator
            assert series.is_integral and series.coefficient(0) == 0
            radical = sympy.prod(sympy.primefactors(d))
            v = poly(power.base)
            moved = v.compose(sympy.Poly(eisenstein.point + eisenstein.constant * X, X))
            assert moved == v.eval(eisenstein.point) * (1 + d * radical * poly(series))
            seen += 1
    assert seen > 5


def test_the_recipe_for_the_value_of_the_p_curvature_holds() -> None:
    """m = a - sum e_(pi+p-1) x^i gives r^(p-1) + r^p = m(x^p)/b^p, differentiated by sympy."""
    seen = 0
    for item in _all_checked():
        proof = item.certificate.proof
        if not isinstance(proof, NoAlgebraicSolution) or proof.p_curvature is None:
            continue
        printed, p = _read_back(item), proof.counter_prime.p
        a, b = (poly(printed[f"reduced-{side}"], p) for side in ("numerator", "denominator"))
        e = (a * b ** (p - 1)).all_coeffs()[::-1]
        terms = enumerate(e[p - 1 :: p])
        m = a - sum((c * sympy.Poly(X**i, X, modulus=p) for i, c in terms),
                    sympy.Poly(0, X, modulus=p))
        assert m == poly(printed["p-curvature"], p)
        derivative = a * b ** (p - 1)  # r = a*b^(p-1)/b^p, and b^p is constant
        for _ in range(p - 1):
            derivative = derivative.diff()
        assert derivative + a**p == m.compose(sympy.Poly(X**p, X, modulus=p))
        if "expansion" in printed:
            assert poly(printed["expansion"], p) == a * b ** (p - 1)
            seen += 1
    assert seen > 3


def test_the_squarefree_part_is_printed_in_full() -> None:
    """S is the product of the factors, each once."""
    printed = _read_back(checked("whirlpool"))
    assert printed["radical"] == read_polynomial("x^2 - x")
    text = words(typeset(checked("whirlpool")))
    assert "$S'$${}\\equiv 1$ modulo $2$" in text


def test_a_bezout_line_that_is_too_long_is_evaluated() -> None:
    """Five ropes: 11*4 + 7*5 = 79 = 1 modulo 13, from the Bezout line of the checker."""
    item = next(i for i in _all_checked() if i.certificate.claim.id == "five-ropes")
    facts = item.facts
    assert isinstance(facts, AlgebraicFacts) and facts.bezout is not None
    p = facts.bezout.p
    v = poly(item.certificate.claim.equation.denominator).quo_ground(facts.beta)
    text = words(typeset(item))
    found = re.search(r"squarefree-point\}\{(\d+)\} it reads \$([^$]*)\$", text)
    assert found is not None
    point = int(found[1])
    u, w = (int(poly(s).eval(point)) % p for s in (facts.bezout.left, facts.bezout.right))
    values = [int(f.eval(point)) % p for f in (v, v.diff())]
    numbers = [int(n) for n in re.findall(r"\d+", found[2])]
    assert numbers[:4] == [u, values[0], w, values[1]]
    assert numbers[4] == u * values[0] + w * values[1] and numbers[4] % p == 1 == numbers[5]


def test_a_spot_check_fits_a_pocket_calculator() -> None:
    """No printed value of a spot check has more than ten digits."""
    items = [certify(f"y' = {10**k + 7}*x/(x^2 + {10**k + 1})*y", id="wide").checked
             for k in (2, 8, 12)]
    for item in items:
        for key, text in printed_formulas(typeset(item)):
            if "spot" in key or key.startswith("residue-a"):
                assert max(map(len, re.findall(r"\d+", text))) <= 10
    assert "spot-a" in formulas(typeset(items[0]))
    assert "spot-a" not in formulas(typeset(items[2]))


# --------------------------------------------------------------------------
# the table of residues, the strip, the bibliography


def test_narrow_residues_stand_in_a_table_and_wide_ones_in_a_list() -> None:
    """A table of three linear factors; a list where a factor takes a whole line."""
    table = typeset(checked("harbour-arches"))
    assert table.count("\\certgenrow{") == 4 + 2  # head and 3 rows; text of the author
    wide = "y' = (1/(2*x) + 1/3*(5*x^4+7)/(x^5+7*x+1234567890123456789012345678901))*y"
    text = typeset(certify(wide, id="wide").checked)
    assert "\\certgenrow{9" not in text and "for $v_{1}$:" in words(text)


def test_the_strip_has_rows_of_at_most_twelve() -> None:
    """The first counter-prime of y' = n*y, n the product of the primes to 41, is 43."""
    text = typeset(certify(f"y' = {30030 * 17 * 19 * 23 * 29 * 31 * 37 * 41}*y",
                           id="late").checked)
    rows = text.split("\\certgendisplay{\\certgenprime{$p$}")[1:]
    assert [row.count("\\certgenprime{") for row in rows] == [12, 2]  # up to 43


ACCENTS = {r"\'e": "e", r'\"o': "o", r'\"a': "a", r'\"U': "U", r'\"u': "u"}


def _plain(text: str) -> str:
    for accent, letter in ACCENTS.items():
        text = text.replace("{" + accent + "}", letter).replace(accent, letter)
    text = re.sub(r"\\emph\{|[{}]|~", lambda m: " " if m[0] == "~" else "", text)
    return " ".join(text.split())


def _entries() -> dict[str, dict[str, str]]:
    source = (Path(__file__).parent.parent / "templates/certgen.bib").read_text()
    return {
        key: {name: _plain(value)
              for name, value in re.findall(r"(\w+)\s*=\s*\{(.*?)\},\n", body, re.DOTALL)}
        for key, body in re.findall(r"@\w+\{(\w+),\n(.*?)\n\}", source, re.DOTALL)
    }


def test_the_plain_bibliography_and_the_bib_file_agree() -> None:
    """Every entry of the appendices is in certgen.bib with title, journal, year, pages."""
    keys = ("cartier", "chebotarev", "eisenstein", "heine", "honda", "katz",
            "katz-conjecture", "kronecker")
    source = render("cited.tex.j2", cited=keys)
    plain = dict(re.findall(r"% BibTeX: (\w+)\n(.*?)(?=\n\n|\n?\Z)", source, re.DOTALL))
    entries = _entries()
    assert plain.keys() == entries.keys() and len(entries) == 8
    for key, fields in entries.items():
        text = _plain(plain[key])
        family, given = fields["author"].split(", ")
        assert text.startswith(f"{given} {family}"), key
        for name in ("title", "journal", "booktitle", "volume", "year", "pages"):
            assert fields.get(name, "") in text, (key, name)


@pytest.mark.parametrize("name", NAMES)
def test_every_year_in_the_text_has_its_entry(name: str) -> None:
    """What is cited by name and year stands in the bibliography, and nothing else does."""
    text = words(typeset(checked(name)))
    body, _, rest = text.partition("\\certgenheading{Cited}")
    cited = set(re.findall(r"\((1\d{3})\)", rest))
    years = {"1852", "1853", "1880", "1926", "1957", "1972", "1981", "1982"}
    assert cited <= years
    assert cited == years & set(re.findall(r"\b(1[89]\d\d)\b", body))


# --------------------------------------------------------------------------
# the wording


def test_one_and_many_bases() -> None:
    """One base has no index and no plural; several have both."""
    one, many = words(typeset(checked("ferry"))), words(typeset(checked("mixed-knots")))
    assert "There is one base" in one and "v_{1}" not in one
    assert "There are $2$ bases $v_i$" in many and "v_{2}" in many
    assert "Their least common denominator is $N = 6$" in many
    assert "$n_{1} = 3$ and $n_{2} = -2$, $N$ times the exponents." in many
    assert "It is an integer: put $N = 1$ and $n = -1$, $N$ times the exponent." in one


def test_the_degree_is_argued_by_sight_where_all_factors_are_linear() -> None:
    """Distinct linear factors need no machine; others name the prime."""
    assert "\\certgenstep{Step 4}{by sight}" in typeset(checked("mixed-knots"))
    item = certify("y' = x/(x^2+1)*y + y/(2*(x-3))", id="round").checked
    assert item.certificate.verdict == "proved"
    text = words(typeset(item))
    assert "\\certgenstep{Step 4}{by hand}" in text and "modulo it $v$ and $v'$" in text


def test_a_rational_solution_has_degree_one() -> None:
    """Integer exponents: degree 1, and no argument about powers."""
    text = words(typeset(checked("ferry")))
    assert "its degree over $\\mathbf{C}(z)$ is exactly $1$" in text
    assert "roots of unity" not in text


def test_constants_have_their_own_short_text() -> None:
    """y' = 0 is no place for factors, spot checks or Eisenstein constants."""
    text = words(typeset(checked("still-water")))
    assert "Every solution is constant" in text
    for absent in ("Spot check", "Step 1", "Eisenstein", "First primes"):
        assert absent not in text


def test_a_closed_form_that_agrees_is_compared() -> None:
    """A claimed product equal to ours is seen; another spelling is by machine."""
    assert "is this product \\certgenhow{by sight}" in words(
        typeset(checked("mixed-knots"))
    )
    other = certify("(x^2-1)*y' = x*y", id="split", solution="(x-1)^(1/2)*(x+1)^(1/2)")
    assert other.verdict == "proved"
    assert "too \\certgenhow{by machine}" in words(typeset(other.checked))
    assert "closed form" not in words(typeset(checked("ferry")))


def test_a_closed_form_that_disagrees_shows_the_factor_first() -> None:
    """The disagreement comes before the actual solution, with both residues."""
    text = words(typeset(checked("misprint")))
    assert text.index("Where the claimed closed form fails") < text.index("Step 1")
    printed = formulas(typeset(checked("misprint")))
    assert printed["disagreement-residue"] == "1/2"
    assert printed["disagreement-claimed"] == "1/3"
    stray = words(typeset(checked("stray-lamp")))
    assert "$b$ is not zero but" in stray
    assert "$g$ divides it exactly twice" in stray and "not zero but" in stray


def test_a_quadratic_residue_polynomial_stands_between_two_squares() -> None:
    """8z^2 - 8z + 1 has discriminant 64 - 32 = 32, between 25 and 36."""
    text = words(typeset(checked("hasty-claim")))
    assert "= 32$" in text and "$5^2 < D < 6^2$" in text
    item = certify("y' = y/(x^2+1)", id="turning").checked  # residues +-i/2
    assert "a negative number" in words(typeset(item))


def test_a_cubic_residue_polynomial_uses_a_prime() -> None:
    """23z^3 + 3z - 1 is 1 at both points of F_2."""
    text = words(typeset(checked("three-currents")))
    assert "would give a root modulo the prime $2$" in text
    assert "the values at $0$ and $1$ are $1$ and $1$" in text
    assert "discriminant of $R$" not in text


def test_the_obstructions_come_shortest_first_and_only_one_is_the_first() -> None:
    """Three kinds of obstruction, each with its own heading."""
    text = words(typeset(checked("every-trouble")))
    assert text.count("An obstruction over the rational numbers") == 1
    assert text.count("A further obstruction") == 2
    assert "A separate refutation: the counter-prime~$3$" in text


def test_a_refutation_without_printed_obstruction_rests_on_the_prime() -> None:
    """Where the residue polynomial is too large, the counter-prime comes alone."""
    item = certify(LONG, id="long").checked
    proof = item.certificate.proof
    assert isinstance(proof, NoAlgebraicSolution)
    separate = "A separate refutation: the counter-prime" in words(typeset(item))
    assert separate == bool(proof.obstructions)


@pytest.mark.parametrize(
    ("name", "sentence"),
    [
        ("whirlpool", "There is no smaller prime than $2$"),
        ("drifting-pairs", "at $2$ the $p$-curvature is zero."),
        ("floating-lamps", "$2$ divides the leading coefficient of $b$."),
    ],
)
def test_the_smaller_primes_in_correct_english(name: str, sentence: str) -> None:
    """None, one bad, one with p-curvature zero."""
    assert sentence in words(typeset(checked(name)))


def test_many_smaller_primes_are_joined_by_and() -> None:
    """y' = 30030*y passes until 17: all smaller primes have p-curvature zero."""
    text = words(typeset(certify("y' = 30030*y", id="slow").checked))
    assert "at $2$, $3$, $5$, $7$, $11$ and $13$ the $p$-curvature is zero." in text
    assert "the counter-prime~$17$" in text


def test_only_what_is_used_is_cited() -> None:
    """Chebotarev for a density, nobody for the constants."""
    assert "Chebotarev" in typeset(checked("hasty-claim"))
    assert "Chebotarev" not in typeset(checked("whirlpool"))
    assert "certgenheading{Cited}" not in typeset(checked("still-water"))
    assert "Eisenstein" in typeset(checked("ferry")) and "Katz" not in typeset(checked("ferry"))


def test_counter_prime_is_defined_once_where_it_is_used() -> None:
    """One definition in a refutation, none in the other appendices."""
    for name in NAMES:
        item = checked(name)
        text = words(typeset(item))
        refutes = isinstance(item.certificate.proof, NoAlgebraicSolution)
        assert text.count("fails is called a \\emph{counter-prime}") == int(refutes)
        assert ("counter-prime" in text) == refutes


def test_the_letters_never_clash() -> None:
    """Whatever the author's letters are, ours are other ones, all different."""
    for x, y in (("p", "b"), ("z", "w"), ("rho", "psi"), ("k", "H"), ("a", "V"), ("m", "k")):
        symbols = choose_symbols(Letters(variable=x, function=y))
        values = [str(getattr(symbols, name)).strip() for name in Symbols.__slots__]
        assert len(values) == len(set(values))


def test_a_polynomial_beyond_the_limits_is_described() -> None:
    """More than 400 terms, or 20000 characters: size and file instead of the formula."""
    printer = Printer("x", "tide.json")
    wide = Polynomial.from_integers([7] * 401)
    huge = Polynomial.from_integers([1, 10**20_000])
    assert printer.polynomial("a", wide).startswith(r"\certgenomitted{400}{401}{1}")
    assert printer.polynomial("a", huge).startswith(r"\certgenomitted{1}{2}{20001}")
    exact = Polynomial.from_integers([7] * 400)
    shown = printer.polynomial("a", exact)
    assert shown.startswith(r"\certgenformula{a}{")
    assert write_polynomial(read_latex_polynomial(formulas(shown)["a"])) == str(exact)


def test_too_many_bases_are_not_listed_and_keep_their_signs_apart() -> None:
    """Above 60 bases the two sides of the minimal equation are products by sign."""
    shifted = " + ".join(f"({k}/101)/(x - {10**9 + k})" for k in range(-40, 41) if k)
    item = certify(f"y' = ({shifted})*y", id="crowd").checked
    text = words(typeset(item))
    assert "too many to be listed" in text and "\\certgenstep{Step 1}{by machine}" in text
    assert "\\prod_{n_i>0} v_i^{n_i}" in text and "\\prod_{n_i<0} v_i^{-n_i}" in text


# --------------------------------------------------------------------------
# what a referee found


def test_a_refutation_says_first_that_the_fraction_is_in_lowest_terms() -> None:
    """Poles and roots of b are the same only then: (x^2-2) + (x+1)*(x+1) = 1 modulo 2."""
    text = words(typeset(checked("hasty-claim")))
    assert "\\certgenstep{Lowest terms}{by hand} $a/b$ is in lowest terms" in text
    assert "the prime $2$ does not divide the leading coefficient of $b$" in text
    assert formulas(text)["lowest-terms-right"] == "x + 1"
    assert text.index("Lowest terms") < text.index("certgenheading{Criterion}")
    assert "by the criterion, $a/b$ being in lowest terms, $b$ has simple roots" in text
    x = sympy.Poly("x", modulus=2)
    assert (x**2 - 2) + (x + 1) * (x + 1) == sympy.Poly(1, x.gen, modulus=2)


@pytest.mark.parametrize(
    ("equation", "how", "reason"),
    [
        ("y' = y/(x^3-x-1)", "by sight", "$a$ is a constant other than $0$, so $a/b$"),
        ("y' = (x+1)*y", "by sight", "$b$ is a constant, so $a/b$ is in lowest terms."),
        (LONG, "by machine", "some combination of $b$ and $a$ is $1$"),
    ],
)
def test_the_other_reasons_for_lowest_terms(equation: str, how: str, reason: str) -> None:
    """A constant on either side is seen; a large pair is left to the machine."""
    text = words(typeset(certify(equation, id="some").checked))
    assert f"\\certgenstep{{Lowest terms}}{{{how}}}" in text and reason in text


@pytest.mark.parametrize("item", _all_checked(), ids=lambda i: i.certificate.claim.id)
def test_every_refutation_and_nothing_else_has_the_step_of_lowest_terms(
    item: CheckedCertificate,
) -> None:
    """Once in a refutation, and its Bezout line holds modulo the prime of the file."""
    text = words(typeset(item))
    proof, claim = item.certificate.proof, item.certificate.claim
    refutes = isinstance(proof, NoAlgebraicSolution)
    assert text.count("\\certgenstep{Lowest terms}") == int(refutes)
    assert "by the criterion $b$ has" not in text
    names = [key for key, _ in printed_formulas(text)]
    assert names.count("lowest-terms-left") <= 1 and names.count("lowest-terms-right") <= 1
    if isinstance(proof, NoAlgebraicSolution) and "lowest-terms-right" in names:
        p, printed = proof.lowest_terms_prime, _read_back(item)
        assert claim.equation.denominator.numerators[-1] % p
        step = text[text.index("Lowest terms"):text.index("{Criterion}")]
        written = "${}+{}$" in step or "certgenbreak ${} +{}$" in step
        left = printed.get("lowest-terms-left", Polynomial.from_integers([int(written)]))
        total = poly(left, p) * poly(claim.equation.denominator, p)
        total += poly(printed["lowest-terms-right"], p) * poly(claim.equation.numerator, p)
        assert total == sympy.Poly(1, X, modulus=p)


def test_a_wrong_closed_form_of_the_constants_is_not_called_a_constant() -> None:
    """y' = 0 with the square root of x^2 - 1: the residue 1/2 at 1 refutes."""
    item = certify("y' = 0", id="still", solution="(x^2-1)^(1/2)").checked
    assert item.certificate.verdict == "refuted"
    text = words(typeset(item))
    assert "closed form of the author is a constant" not in text
    assert formulas(text)["disagreement-claimed"] == "1/2"
    right = certify("y' = 0", id="still", solution="3^(0)").checked
    assert "closed form" in words(typeset(right))


def test_a_pole_of_the_closed_form_alone_is_tested_against_the_bases() -> None:
    """b = 2x is 0 modulo 2, so nothing is said of b modulo a prime, but of the base x."""
    one = words(typeset(certify("y'=y/(2*x)", id="one", solution="(x-1)^(1/2)").checked))
    assert "$b$ is not zero but \\certgenformula{disagreement-b}{2} there" in one
    two = words(typeset(certify("y'=y/(2*x)", id="two",
                                solution="x^(1/2)*(x^2-2)^(1/2)").checked))
    assert "for $g$ and the base below,{} which is $b$ up to a constant (Step 2)" in two
    for text in (one, two):
        assert "$b$ and $g$" not in text and "$g$ and $b$" not in text


def test_no_refutation_is_counted_or_called_independent() -> None:
    """After two obstructions the next is no second one; the last shares (a) and (b)."""
    for item in (checked("every-trouble"), checked("hasty-claim")):
        text = words(typeset(item))
        assert "independent" not in text and "A second" not in text and "A third" not in text
        assert "A separate refutation: the counter-prime" in text
    assert "With (a) and (b) as before, this replaces (c)." in text


@pytest.mark.parametrize(
    ("name", "sentence"),
    [
        ("three-currents", "and neither $0$ nor $1$ is a root"),
        ("hasty-claim", "and none of $0$, $1$ and $2$ is a root"),
    ],
)
def test_the_residue_classes_without_a_root_are_named(name: str, sentence: str) -> None:
    """x^3 + x + 1 modulo 2, x^2 + 1 modulo 3."""
    assert sentence in words(typeset(checked(name)))


def test_the_eisenstein_theorem_speaks_of_rational_coefficients() -> None:
    """Over C it is false: a constant pi has no such L."""
    text = words(typeset(checked("mixed-knots")))
    assert "every algebraic power series with rational coefficients has such" in text


def test_a_refuted_closed_form_does_not_rest_on_the_degree() -> None:
    """The residues refute; Step 4 is for the degree of the actual solutions."""
    text = words(typeset(checked("misprint")))
    assert "the refutation needs the rules of differentiation, nothing else; that" in text
    assert "the actual solutions is exactly $2$ rests on the argument in Step 4" in text


def test_twice_and_the_place_of_a_pole() -> None:
    """A double pole at 0: twice, not 2 times; one at the roots of x^2+1 has no number."""
    text = words(typeset(checked("whirlpool")))
    assert "pole of order $2$ at \\certgenformula{multiple-pole-root-1}{0}, the root" in text
    assert "exactly twice (see below)" in text and "any more" not in text
    other = words(typeset(certify("(x^2+1)^3*y' = y", id="round").checked))
    assert "at every root of" in other and "exactly $3$ times (see below)" in other


def test_the_page_says_where_simple_roots_come_from() -> None:
    """Residues are a/b' at simple roots alone, and orders are exact if S has simple roots."""
    whole = words(typeset(checked("hasty-claim")))
    assert "which is $b$ and has simple roots by (a) below" in whole
    mixed = words(typeset(certify("(x^2-2)*(x-1)^2*y' = y", id="mixed").checked))
    assert "simple ones of $b$ by the squarefree part and (a) below" in mixed
    assert "that the roots of $S$ are simple is shown in (a) below" in mixed


def test_a_strip_of_bad_primes_alone_is_left_out() -> None:
    """It would show nothing."""
    bad = [PrimeStatus(p=p, status="bad") for p in (2, 3, 5)]
    assert build_strip(bad).rows == ()
    assert len(build_strip([*bad, PrimeStatus(p=7, status="zero")]).rows) == 1


def test_the_minimal_polynomial_is_written_like_the_solution() -> None:
    """Nine long bases: v_1, v_2, ... in Step 3 and in Step 4."""
    logs = " + ".join(f"1/{k}*(7*x^6 + {k})/(x^7 + {k}*x + 10000000000000000000000000003)"
                      for k in range(2, 11))
    item = certify(f"y' = ({logs})*y", id="nine").checked
    text = words(typeset(item))
    minimal = text[text.index("the difference of the two sides of"):]
    assert "v_{9}^{252}" in minimal[:600] and "x^{7}" not in minimal[:600]


def test_superfluous_marks_are_gone() -> None:
    """No (4(t)), no exponent 1 at p = 2, no sum that repeats the number before it."""
    lamp = words(typeset(certify("y'=y/(2*x)", id="lamp").checked))
    assert "1 + 4{}$\\certgenformula{expansion-1}{t}.}" in lamp
    assert "^{1}" not in words(typeset(checked("three-currents")))
    rational = words(typeset(certify("y'=-(2*x+3)/(x^2+3*x+1)*y", id="whole").checked))
    assert "$N\\,a ={}$\\certgenformula{spot-a}{-7}${} = 1\\cdot (-7)$." in rational


def test_a_last_short_term_stays_on_its_line() -> None:
    """No place to break before + 1, also where it is + a = 1."""
    text = typeset(certify("y' = 1/(x^3-x-1)*y", id="short").checked)
    assert not re.search(r"certgenbreak\s+[+-] [0-9a-z]{1,3}\}", text)
    assert "\\certgenbreak ${}\\equiv" not in words(text)


def test_where_no_spot_check_exists_the_page_says_so() -> None:
    """Degree 60 modulo p is for the machine; a small one is not."""
    item = certify("(x^60 + 2*x^7 + 3)*y' = (x^11 + 3)*y", id="large").checked
    assert "There is no short spot check for (a), (b) and (c)." in words(typeset(item))
    assert "no short spot check" not in words(typeset(checked("hasty-claim")))


# --------------------------------------------------------------------------
# several certificates


def test_several_certificates_make_one_appendix_with_a_table() -> None:
    """A row for each, the macros once, every body in full."""
    items = [checked(name) for name in NAMES]
    fragment = typeset_many(items)
    assert fragment.count("\\providecommand{\\certgenformula}") == 1
    for item in items:
        body = printed_formulas(typeset(item))
        assert all(pair in printed_formulas(fragment) for pair in body)
        assert item.digest[:8] in fragment
    assert max(map(len, fragment.split("\n"))) < 80


def test_one_certificate_in_a_table_is_singular() -> None:
    """No orphaned plural."""
    text = words(typeset_many([checked("ferry")]))
    assert "This claim was decided and checked exactly (a solution is a non-zero one); " in text


def test_no_certificate_or_the_same_twice_is_refused() -> None:
    """An empty appendix, or two files of one name, help nobody."""
    with pytest.raises(ClaimError):
        typeset_many([])
    with pytest.raises(ClaimError):
        typeset_many([checked("ferry"), checked("ferry")])


def test_the_summary_of_a_notebook_is_one_formula() -> None:
    """Mathematics only, no macros of ours."""
    for name in NAMES:
        text = latex_summary(checked(name))
        assert text.startswith("$") and text.endswith("$") and "certgen" not in text
    assert "s" in latex_summary(checked("mixed-knots"))
    assert "counter-prime }3" in latex_summary(checked("hasty-claim"))


# --------------------------------------------------------------------------
# the templates


def test_templates_are_strict_and_escape_by_default() -> None:
    """A missing name, a number or None in a template is an error; text is escaped."""
    environment = _environment()
    assert environment.from_string("<<x>>").render(x="50% & \\input") == (
        "50\\% \\& \\textbackslash{}input"
    )
    assert environment.from_string("<<x>>").render(x=Latex("$x$")) == "$x$"
    with pytest.raises(UndefinedError):
        environment.from_string("<<nothing>>").render()
    for value in (3, 1.5, None, Fraction(1, 2), b"x"):
        with pytest.raises(DefectError, match="a template prints"):
            environment.from_string("<<x>>").render(x=value)


def test_templates_hold_wording_and_no_numbers_of_a_certificate() -> None:
    """Two certificates of one kind differ only where something is inserted."""
    with pytest.raises(UndefinedError):
        render("algebraic_solution.tex.j2")


def test_facts_of_another_proof_are_a_defect() -> None:
    """A builder refuses facts that do not belong to its proof object."""
    from certgen.appendix.algebraic import build_algebraic
    from certgen.appendix.closed_form import build_closed_form
    from certgen.appendix.refutation import build_refutation

    with pytest.raises(DefectError):
        build_algebraic(checked("whirlpool"))
    with pytest.raises(DefectError):
        build_closed_form(checked("ferry"))
    with pytest.raises(DefectError):
        build_refutation(checked("ferry"))


def test_a_stand_alone_document_needs_amsmath_alone() -> None:
    """The document around a fragment keeps the fragment as it is."""
    fragment = typeset(checked("ferry"))
    document = standalone(fragment)
    assert fragment in document and "\\usepackage{amsmath}" in document


def test_irrational_residues_are_matched_with_their_facts() -> None:
    """Two irrational residues in one certificate keep their own numerators."""
    item = certify("y' = y/(x^2-2) + y/(x^2-3)", id="two-roots").checked
    proof = item.certificate.proof
    assert isinstance(proof, NoAlgebraicSolution)
    kinds = [o for o in proof.obstructions if isinstance(o, IrrationalResidue)]
    printed = formulas(typeset(item))
    for k, o in enumerate(proof.obstructions, 1):
        if isinstance(o, IrrationalResidue):
            assert read_latex_polynomial(printed[f"residue-factor-{k}"]) == o.factor
    assert kinds
