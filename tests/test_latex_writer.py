"""The LaTeX writer: formulas that are read back, user text that does no harm."""

from __future__ import annotations

import json
import re
import subprocess
import unicodedata
from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certgen.claim import GREEK_LETTERS, FirstOrderEquation, Letters, Power
from certgen.notation import (
    read_closed_form,
    read_equation,
    read_latex_polynomial,
    read_rational_function,
)
from certgen.notation.latex_writer import (
    LATEX_MACROS,
    Latex,
    equation,
    escape,
    fraction,
    inline,
    integer,
    letter,
    long_formula,
    polynomial,
    power_product,
    rational,
    wrap_source,
)
from certgen.polynomial import Polynomial

TRUTHS = json.loads((Path(__file__).parent / "truths/hostile_inputs.json").read_text())
NAMES = [r for r in TRUTHS["records"] if r["kind"] == "name-in-latex"]

NUMBERS = st.integers(-9, 9) | st.integers(-10**40, 10**40)
COEFFICIENTS = NUMBERS | st.builds(Fraction, NUMBERS, st.integers(1, 10**20))
POLYNOMIALS = st.lists(COEFFICIENTS, max_size=9).map(Polynomial.from_coefficients)
INTEGRAL = st.lists(NUMBERS, max_size=6).map(Polynomial.from_integers)
VARIABLES = st.sampled_from(["x", "t", "alpha"])


def primitive(p: Polynomial) -> Polynomial:
    sign = -1 if p.numerators[-1] < 0 else 1
    return Polynomial.from_integers(sign * c // p.content for c in p.numerators)


# -- formulas, word for word


@pytest.mark.parametrize(
    ("coefficients", "expected"),
    [
        ([], "0"),
        ([-7], "-7"),
        ([0, 1], "x"),
        ([0, -1], "-x"),
        ([-1, 0, 3], r"3x^{2} \certgenbreak - 1"),
        ([1, Fraction(-1, 2), 0, 1], r"x^{3} \certgenbreak - \frac{1}{2}x \certgenbreak + 1"),
        ([0] * 12 + [-1], "-x^{12}"),
    ],
)
def test_polynomials_are_printed_as_people_write_them(
    coefficients: list[int | Fraction], expected: str
) -> None:
    """By descending degree; a place to break before every later sign."""
    assert polynomial(Polynomial.from_coefficients(coefficients), "x") == expected


def test_numbers_get_places_to_break() -> None:
    """After every five digits beyond 12 digits; long fractions on one line."""
    assert integer(-123456789012) == "-123456789012"
    assert integer(1234567890123) == r"12345\certgendigits 67890\certgendigits 123"
    assert rational(Fraction(-2, 3)) == r"-\frac{2}{3}"
    assert rational(-4) == "-4"
    assert rational(Fraction(1, 1234567890123)) == (
        r"(1/12345\certgendigits 67890\certgendigits 123)")
    assert len(integer(10**6000).replace(r"\certgendigits ", "")) == 6001


def test_letters_and_equations() -> None:
    """Greek letters are macros; factors of one term have no parentheses."""
    assert (letter("x"), letter("alpha")) == ("x", "\\alpha ")
    x, one = Polynomial((0, 1)), Polynomial((1,))
    square = Polynomial((-1, 0, 1))
    greek = Letters(variable="alpha", function="phi")
    assert equation(one, square, Letters()) == (
        r"(x^{2} \certgenbreak - 1)\,y' \certgenbreak = y")
    assert equation(Polynomial((-1,)), x, greek) == (
        r"\alpha\,\phi ' \certgenbreak = -\phi")
    assert equation(Polynomial(()), one, Letters()) == r"y' \certgenbreak = 0"
    assert fraction(one, square, "x") == r"\frac{1}{x^{2} - 1}"
    assert fraction(square, one, "x") == r"x^{2} \certgenbreak - 1"


def test_products_of_powers() -> None:
    """An exponent 1 is not written; the empty product is 1."""
    x, square = Polynomial((0, 1)), Polynomial((-1, 0, 1))
    half = Power(base=x, exponent=Fraction(1, 2))
    third = Power(base=square, exponent=Fraction(-1, 3))
    assert power_product([half, third], "x") == (
        r"x^{1/2} \certgenbreak (x^{2} \certgenbreak - 1)^{-1/3}")
    plain = Power(base=Polynomial((0, 0, 1)), exponent=Fraction(1))
    assert power_product([plain], "t") == "t^{2}"
    assert power_product([], "x") == "1"


# -- formulas, read back


@settings(deadline=None)
@given(POLYNOMIALS, VARIABLES)
def test_polynomials_are_read_back(p: Polynomial, variable: str) -> None:
    """As printed, as an inline formula, and with wrapped source lines."""
    text = polynomial(p, variable)
    for form in (text, long_formula(text), wrap_source(long_formula(text))):
        assert read_latex_polynomial(form, variable) == p
        assert form.isascii()


@settings(deadline=None)
@given(INTEGRAL, INTEGRAL.filter(lambda p: not p.is_zero), VARIABLES)
def test_fractions_and_equations_are_read_back(
    a: Polynomial, b: Polynomial, variable: str
) -> None:
    """The printed fraction and the printed equation mean a/b."""
    n, d = read_rational_function(fraction(a, b, variable), variable)
    letters = Letters(variable=variable, function="psi")
    found = FirstOrderEquation(numerator=n, denominator=d)
    for form in (equation(a, b, letters), long_formula(equation(a, b, letters))):
        assert read_equation(form, letters=letters).equation == found
    wrapped = wrap_source(equation(n, d, letters))
    assert read_equation(wrapped, letters=letters).equation == found
    for x in (Fraction(10**50 + 1), Fraction(1, 3)):  # a * d = n * b at two points
        at = [sum(c * x**k for k, c in enumerate(p.coefficients)) for p in (a, b, n, d)]
        assert at[0] * at[3] == at[2] * at[1]


@settings(deadline=None)
@given(st.dictionaries(
    INTEGRAL.filter(lambda p: not p.is_constant).map(primitive),
    st.fractions(-9, 9, max_denominator=99).filter(bool), max_size=4), VARIABLES)
def test_products_of_powers_are_read_back(
    powers: dict[Polynomial, Fraction], variable: str
) -> None:
    """Each base with its exponent; a monomial base is read as a power of x."""
    product = [Power(base=b, exponent=powers[b])
               for b in sorted(powers, key=lambda p: p.sort_key)]
    letters = Letters(variable=variable, function="y")
    found = {p.base: p.exponent
             for p in read_closed_form(power_product(product, variable), letters)}
    expected: dict[Polynomial, Fraction] = {}
    for base, exponent in powers.items():
        monomial = not any(base.numerators[:-1])
        key = Polynomial((0, 1)) if monomial else base
        step = exponent * base.degree if monomial else exponent
        expected[key] = expected.get(key, Fraction(0)) + step
    assert found == {b: e for b, e in expected.items() if e}


def test_long_formulas_are_closed_and_opened_again() -> None:
    """After 50 terms, at a sign, which keeps its space by an empty group."""
    p = Polynomial.from_integers(range(1, 202))
    text = long_formula(polynomial(p, "x"))
    pieces = re.findall(r"\$([^$]*)\$", text)
    assert [piece.count("x") for piece in pieces] == [50, 50, 50, 50, 0]
    assert all(piece.startswith("{}+ ") for piece in pieces[1:])
    assert re.sub(r"\$[^$]*\$", "", text).split() == [r"\certgenbreak"] * 4
    assert read_latex_polynomial(text, "x") == p
    assert inline([Latex("y' ="), Latex("x"), Latex("y")]) == "$y' = x y$"


def test_a_formula_is_never_closed_within_braces() -> None:
    """Breaks inside of an argument do not end the formula."""
    text = r"\frac{" + r"1 \certgenbreak + " * 60 + "1}{2}" + r" \certgenbreak + 1"
    assert long_formula(text).count("$") == 4
    assert read_latex_polynomial(long_formula(text)) == Polynomial((63,), 2)


# -- source lines


@settings(deadline=None)
@given(POLYNOMIALS)
def test_wrapped_lines_are_short_and_change_only_spaces(p: Polynomial) -> None:
    """Every line has at most 78 columns; without white space nothing has changed."""
    text = long_formula(polynomial(p, "x"))
    wrapped = wrap_source(text)
    assert max(map(len, wrapped.split("\n"))) <= 78
    assert "".join(wrapped.split()) == "".join(text.split())


def test_wrapping_keeps_what_tex_reads() -> None:
    """Comments and control words stay whole; a long word breaks behind a %."""
    comment = "word " * 10 + "% " + "never broken " * 10
    assert wrap_source(comment).endswith("% " + "never broken " * 10)
    title = "A" * 200
    assert [len(line) for line in wrap_source(title).split("\n")] == [78, 78, 46]
    assert wrap_source(title).replace("%\n", "") == title
    assert wrap_source("\\" + "a" * 100) == "\\" + "a" * 100
    assert wrap_source("x" * 60 + " a-b" * 10).split("\n")[0].endswith("a-b")
    formula = "$" + "x" + "+x" * 60 + "$"
    assert "".join(wrap_source(formula).split("\n")) == formula
    assert wrap_source("short\n\nlines") == "short\n\nlines"
    assert wrap_source("a" * 77 + "\\ " + "b" * 10).replace("%\n", "") == (
        "a" * 77 + "\\ " + "b" * 10)


# -- user text


def test_all_names_are_here() -> None:
    """21 payloads for names in LaTeX, and one that is too long, among 135 records."""
    assert (len(TRUTHS["records"]), len(NAMES)) == (135, 21)


def visible(text: str) -> str:
    """What must be seen on the page: white space as one space, no code points."""
    text = unicodedata.normalize("NFC", text)
    shown = [c if c.isascii() or ord(c) < 0x180 else f"[U+{ord(c):04X}]" for c in text]
    return " ".join("".join(shown).split())


SAFE = re.compile(
    r"\\(?:textbackslash|textasciicircum|textasciitilde|textless|textgreater|textbar|ss|ae|AE"
    r"|oe|OE|o|O|l|L|i)\{\}|\\[{}$&#%_]|\{\\ttfamily\\char34 \}|\{[][*]\}|\{\}|~"
    r"|\\[`'^~=u.\"rHvc]\{(?:[A-Za-z]|\\[ij])\}"
)


@settings(deadline=None)
@given(st.text(max_size=40))
def test_escaped_text_is_made_of_safe_pieces(text: str) -> None:
    """ASCII only; every backslash, brace and special belongs to a known piece."""
    escaped = escape(text)
    assert isinstance(escaped, Latex) and escaped.isascii()
    rest = SAFE.sub("", escaped)
    assert not re.search(r"[\\{}$&#%_^~<>|\"\n]", rest)
    assert not re.search(r"--|''|``|[?!]`|,,", escaped)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("G\u00f6del \u0141ukasiewicz", r'G\"{o}del \L{}ukasiewicz'),
        ("\u00ef\u00e7\u0159\u00c5\u0151\u0123", r'\"{\i}\c{c}\v{r}\r{A}\H{o}\c{g}'),
        ("G\u006f\u0308del", r'G\"{o}del'),
        ("\u00df\u0105\u0110", r"\ss{}{[}U+0105{]}{[}U+0110{]}"),
        ("\u6570\u202e", "{[}U+6570{]}{[}U+202E{]}"),
        ("two\n\nlines", "two  lines"),
        ("a_b^c", r"a\_b\textasciicircum{}c"),
    ],
)
def test_text_that_is_not_ascii(text: str, expected: str) -> None:
    """Accents as ASCII source where every font has them, else the code point."""
    assert escape(text) == expected


@pytest.mark.parametrize("record", NAMES, ids=lambda r: r["id"])
def test_hostile_names_are_inert(record: dict[str, str]) -> None:
    """Nothing is left of them that TeX would act on."""
    escaped = escape(record["payload"])
    rest = SAFE.sub("", escaped)
    assert escaped.isascii()
    assert not re.search(r"[\\{}$&#%_^~<>|\"\n]", rest)


# -- the printed page


def compile_pdf(body: str, folder: Path, preamble: str = "") -> str:
    """Compile a document and return the text of its PDF; the log must be clean."""
    source = "\n".join([
        r"\documentclass{article}", preamble, r"\usepackage{amsmath}", LATEX_MACROS,
        r"\pagestyle{empty}\begin{document}", body, "the end of the document",
        r"\end{document}", ""])
    (folder / "page.tex").write_text(source, encoding="ascii")
    run = subprocess.run(
        ["pdflatex", "-interaction=nonstopmode", "-halt-on-error", "page.tex"],
        cwd=folder, capture_output=True, timeout=120, check=False)
    assert run.returncode == 0, run.stdout.decode("latin-1")[-2000:]
    log = (folder / "page.log").read_text(encoding="latin-1")
    assert "Missing character" not in log
    assert "Overfull" not in log
    subprocess.run(["pdftotext", "-raw", "page.pdf"], cwd=folder, check=True, timeout=60)
    return (folder / "page.txt").read_text(encoding="utf-8")


def squeezed(text: str) -> str:
    """Without white space, and with the apostrophes that TeX prints."""
    for shown, meant in (("\u2019", "'"), ("\u2018", "`"), ("\u02dc", "~"), ("\u02c6", "^")):
        text = text.replace(shown, meant)
    return "".join(unicodedata.normalize("NFKC", text).split())


@pytest.mark.needs_pdflatex
@pytest.mark.needs_pdftotext
@pytest.mark.parametrize(
    "preamble", ["", r"\usepackage[T1]{fontenc}\usepackage{lmodern}"], ids=["OT1", "T1"])
def test_hostile_names_are_printed_literally(tmp_path: Path, preamble: str) -> None:
    """Every payload stands in the PDF character for character, with the tail.

    In the oldest encoding an underscore is a rule and the stroke of L a second
    character, so that pdftotext cannot see them.
    """
    payloads = [r["payload"] for r in NAMES]
    body = r"\hyphenpenalty=10000 " + "\n\n".join(
        wrap_source(rf"\noindent {k}: " + escape(text) + r"\sloppy\par")
        for k, text in enumerate(payloads))
    page = squeezed(compile_pdf(body, tmp_path, preamble))
    for k, text in enumerate(payloads):
        seen = squeezed(f"{k}:" + visible(text))
        if not preamble:
            seen = seen.replace("_", "").replace("\u0141", "L")
        assert seen in page, text
    assert "theendofthedocument" in page
    assert not list(tmp_path.glob("pwned*")) and not (tmp_path / "certificate.json").exists()


@pytest.mark.needs_pdflatex
@pytest.mark.needs_pdftotext
def test_letters_with_accents_are_printed(tmp_path: Path) -> None:
    """All letters of Latin-1 and Latin Extended-A compile in the oldest font encoding."""
    letters = [chr(k) for k in range(0xA1, 0x180) if chr(k).isalpha()]
    body = r"\raggedright " + wrap_source(" ".join(escape(c) for c in letters)) + r"\par"
    page = squeezed(compile_pdf(body, tmp_path))
    assert "theendofthedocument" in page
    for c in letters:  # letters that are not made of accents are all there as such
        if "[U+" in escape(c).replace("{", "").replace("}", ""):
            assert f"[U+{ord(c):04X}]" in page


@pytest.mark.needs_pdflatex
@pytest.mark.needs_pdftotext
def test_every_digit_of_long_formulas_is_printed(tmp_path: Path) -> None:
    """Long numbers, 120 terms, all Greek letters: no overfull box, all digits there."""
    numbers = [7**k * 10**9 + k for k in range(120)]
    p = Polynomial.from_integers(numbers)
    greek = " ".join(f"${letter(name)}x$" for name in sorted(GREEK_LETTERS))
    body = "\n".join([
        r"\binoppenalty=10000 \relpenalty=10000 \raggedright \noindent",
        wrap_source(long_formula(polynomial(p, "x"))), r"\par", greek, r"\par",
        f"${equation(Polynomial((1, 2)), Polynomial((3, 4)), Letters(function='phi'))}$",
    ])
    page = squeezed(compile_pdf(body, tmp_path))
    digits = re.sub(r"[^0-9]", "", page)
    for n in numbers:
        assert str(n) in digits
