"""The appendix: what is printed, that it can be read back, and what is refused."""

from __future__ import annotations

import re
from fractions import Fraction
from pathlib import Path

import pytest
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
from certgen.appendix.symbols import Symbols, choose_symbols
from certgen.certificate import (
    AlgebraicSolution,
    IrrationalResidue,
    MultiplePole,
    NoAlgebraicSolution,
    PolynomialPart,
    ResidueOutsidePrimeField,
)
from certgen.checker import CheckedCertificate, check
from certgen.claim import Letters
from certgen.errors import ClaimError, DefectError, RejectedError
from certgen.notation import read_latex_polynomial
from certgen.notation.latex_writer import Latex
from certgen.polynomial import Polynomial, read_polynomial, write_polynomial
from tests.handmade import NAMES, handmade, stored

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
    plain = text.replace("\\certgenhere ", "").replace("{}", "")
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


def _expected(item: CheckedCertificate) -> dict[str, Polynomial]:
    """What the proof rests on, from the certificate, under the printed names."""
    claim, proof = item.certificate.claim, item.certificate.proof
    out = {"a": claim.equation.numerator, "b": claim.equation.denominator}
    if isinstance(proof, NoAlgebraicSolution):
        for k, o in enumerate(proof.obstructions, 1):
            if isinstance(o, PolynomialPart):
                out["quotient"] = o.quotient
            elif isinstance(o, MultiplePole):
                out[f"multiple-pole-{k}"] = o.factor
            else:
                out[f"residue-factor-{k}"] = o.factor
                out[f"residue-polynomial-{k}"] = o.residue_polynomial
        witness = proof.counter_prime.witness
        if isinstance(witness, ResidueOutsidePrimeField):
            out["witness-residue"] = witness.residue
        if hasattr(witness, "factor"):
            out["witness-factor"] = witness.factor
        if proof.p_curvature is not None:
            out["p-curvature"] = proof.p_curvature.numerator
        return out
    if not isinstance(proof, AlgebraicSolution):
        out["disagreement-factor"] = proof.disagreement.factor
        proof = proof.actual
    for k, power in enumerate(proof.solution, 1):
        out[f"base-{k}"] = power.base
        out[f"exponent-{k}"] = Polynomial.from_coefficients([power.exponent])
    if [t.factor for t in proof.partial_fractions] != [p.base for p in proof.solution]:
        for k, term in enumerate(proof.partial_fractions, 1):
            out[f"factor-{k}"] = term.factor
            out[f"residue-{k}"] = Polynomial.from_coefficients([term.residue])
    return out


@pytest.mark.parametrize("name", NAMES)
def test_what_a_proof_rests_on_is_read_back_from_the_page(name: str) -> None:
    """Each printed formula, read by the notation reader, is the stored one."""
    item = checked(name)
    letters = item.certificate.claim.letters
    z = str(choose_symbols(letters).z)
    printed = formulas(typeset(item))
    expected = _expected(item)
    if item.certificate.claim.equation.numerator.is_zero:
        expected = {key: expected[key] for key in "ab"}
    assert expected.keys() <= printed.keys()
    for key, value in expected.items():
        letter = z if key.startswith("residue-polynomial") else letters.variable
        assert read_latex_polynomial(printed[key], letter) == value, key


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


# --------------------------------------------------------------------------
# the wording


def test_one_and_many_bases() -> None:
    """One base has no index and no plural; several have both."""
    one, many = words(typeset(checked("ferry"))), words(typeset(checked("mixed-knots")))
    assert "There is one base $v$" in one and "v_{1}" not in one
    assert "There are $2$ bases $v_i$" in many and "v_{2}" in many
    assert "Their least common denominator is $N = 6$" in many
    assert "It is an integer, so put $N = 1$" in one


def test_the_degree_is_argued_by_sight_where_all_factors_are_linear() -> None:
    """Distinct linear factors need no machine; others name the prime."""
    assert "\\certgenstep{Step 4}{by sight}" in typeset(checked("mixed-knots"))
    item = certify("y' = x/(x^2+1)*y + y/(2*(x-3))", id="round").checked
    assert item.certificate.verdict == "proved"
    text = words(typeset(item))
    assert "\\certgenstep{Step 4}{by machine}" in text and "modulo the prime" in text


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
    assert "the product of Step 3 \\certgenhow{by sight}" in words(
        typeset(checked("mixed-knots"))
    )
    other = certify("(x^2-1)*y' = x*y", id="split", solution="(x-1)^(1/2)*(x+1)^(1/2)")
    assert other.verdict == "proved"
    assert "too \\certgenhow{by machine}" in words(typeset(other.checked))
    assert "closed form of the author" not in words(typeset(checked("ferry")))


def test_a_closed_form_that_disagrees_shows_the_factor_first() -> None:
    """The disagreement comes before the actual solution, with both residues."""
    text = words(typeset(checked("misprint")))
    assert text.index("Where the claimed closed form fails") < text.index("Step 1")
    printed = formulas(typeset(checked("misprint")))
    assert printed["disagreement-residue"] == r"\frac{1}{2}"
    assert printed["disagreement-claimed"] == r"\frac{1}{3}"
    stray = words(typeset(checked("stray-lamp")))
    assert "have no common factor: modulo the prime $2$" in stray
    assert "$g^{2}$ is the exact power of $g$ in" in stray


def test_a_quadratic_residue_polynomial_stands_between_two_squares() -> None:
    """8z^2 - 8z + 1 has discriminant 64 - 32 = 32, between 25 and 36."""
    text = words(typeset(checked("hasty-claim")))
    assert "= 32$" in text and "$5^2 < D < 6^2$" in text
    item = certify("y' = y/(x^2+1)", id="turning").checked  # residues +-i/2
    assert "a negative number" in words(typeset(item))


def test_a_cubic_residue_polynomial_uses_a_prime() -> None:
    """23z^3 + 3z - 1 is 1 at both points of F_2."""
    text = words(typeset(checked("three-currents")))
    assert "no root modulo the prime $2$" in text and "discriminant of $R$" not in text


def test_the_obstructions_come_shortest_first_and_only_one_is_the_first() -> None:
    """Three kinds of obstruction, each with its own heading."""
    text = words(typeset(checked("every-trouble")))
    assert text.count("An obstruction over the rational numbers") == 1
    assert text.count("A further obstruction") == 2
    assert "A second, independent refutation: the counter-prime $3$" in text


def test_a_refutation_without_printed_obstruction_rests_on_the_prime() -> None:
    """Where the residue polynomial is too large, the counter-prime comes alone."""
    item = certify(LONG, id="long").checked
    proof = item.certificate.proof
    assert isinstance(proof, NoAlgebraicSolution)
    second = "A second, independent refutation" in words(typeset(item))
    assert second == bool(proof.obstructions)


@pytest.mark.parametrize(
    ("name", "sentence"),
    [
        ("whirlpool", "There is no smaller prime than $2$"),
        ("drifting-pairs", "at $2$ the $p$-curvature is zero."),
        ("floating-lamps", "$2$ is not good."),
    ],
)
def test_the_smaller_primes_in_correct_english(name: str, sentence: str) -> None:
    """None, one bad, one with p-curvature zero."""
    assert sentence in words(typeset(checked(name)))


def test_many_smaller_primes_are_joined_by_and() -> None:
    """y' = 30030*y passes until 17: all smaller primes have p-curvature zero."""
    text = words(typeset(certify("y' = 30030*y", id="slow").checked))
    assert "at $2$, $3$, $5$, $7$, $11$ and $13$ the $p$-curvature is zero." in text
    assert "the counter-prime $17$" in text


def test_only_what_is_used_is_cited() -> None:
    """Chebotarev for a density, nobody for the constants."""
    assert "Chebotarev" in typeset(checked("hasty-claim"))
    assert "Chebotarev" not in typeset(checked("whirlpool"))
    assert "Nothing: every step is proved above" in words(typeset(checked("still-water")))
    assert "Eisenstein" in typeset(checked("ferry")) and "Katz" not in typeset(checked("ferry"))


def test_counter_prime_is_defined_once_where_it_is_used() -> None:
    """One definition in a refutation, none in the other appendices."""
    for name in NAMES:
        item = checked(name)
        text = words(typeset(item))
        refutes = isinstance(item.certificate.proof, NoAlgebraicSolution)
        assert text.count("is a prime of good reduction at which") == int(refutes)
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
    assert "This claim was decided and checked exactly; the certificate follows." in text


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
