"""The reader of LaTeX: the same equations, and the traps of TeX."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from certgen.claim import GREEK_LETTERS, Letters
from certgen.errors import ExpressionError, LimitError
from certgen.notation import (
    read_closed_form,
    read_equation,
    read_latex_polynomial,
    read_rational_function,
)
from certgen.polynomial import Polynomial, write_polynomial
from tests.notation_forms import closed_form, failure

CUBIC = "(2*x^3 - 2*x)*y' = (3*x^2 - 1)*y"


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        (r"y'(x) = \frac{3x^2-1}{2(x^3-x)}\,y(x)", CUBIC),
        (r"$y' = \dfrac{3x^2 - 1}{2\left(x^3-x\right)} \cdot y$", CUBIC),
        (r"\[ 2(x^{3}-x) y^{\prime} = \left[ 3x^2-1 \right] y \]", CUBIC),
        (r"\(\frac{y'}{y} = \tfrac{3x^2-1}{2x^3-2x}\)", CUBIC),
        (r"$$ 2(x^3-x)\;\frac{dy}{dx} \quad = \quad (3x^2-1)\!y(x) $$", CUBIC),
        (r"\frac{d}{dx} y = \frac1x y", "(x)*y' = (1)*y"),
        (r"\frac{d}{dx}\left(y(x)\right) = \frac yx", "(x)*y' = (1)*y"),
        (r"\frac{\mathrm{d}y}{\mathrm{d}x} = \frac{y}{x}", "(x)*y' = (1)*y"),
        (r"\frac{\operatorname{d} y(x)}{\operatorname{d} x} = x^{-1} y", "(x)*y' = (1)*y"),
        (r"\mathrm{D} y = \frac12 y\,x", "(2)*y' = (x)*y"),
        (r"\phi'(\alpha) = \alpha\phi(\alpha)", "(1)*y' = (x)*y"),
        (r"\frac{d\phi}{d\alpha} = \alpha \times \phi", "(1)*y' = (x)*y"),
        (r"{x} {y'} = 2{}-1+x^{10}/x^{10} % two terms" + "\n" + r" \; y", None),
        (r"y' = 2\frac{x}{3} y", "(3)*y' = (2*x)*y"),
        (r"y' = {x}^{2} y", "(1)*y' = (x^2)*y"),
        (r"y^\prime = 3 \ast y~", "(1)*y' = (3)*y"),
        ("y' = {12} y", "(1)*y' = (12)*y"),
        (r"\frac{1}{y} \frac{dy}{dx} = \frac{1}{x}", "(x)*y' = (1)*y"),
    ],
)
def test_latex_equations_are_read(text: str, expected: str | None) -> None:
    """The same as in plain notation; spaces and comments mean nothing."""
    if expected is None:
        failure(read_equation, text)  # x y' = 2 - 1 + 1*y is not homogeneous
        return
    read = read_equation(text)
    assert str(read.equation) == expected
    assert read_equation(text, letters=read.letters) == read
    assert read_equation(read.echo, letters=read.letters).equation == read.equation


def test_the_letters_of_latex_are_found() -> None:
    """Greek letters by name; the echo is plain ASCII."""
    read = read_equation(r"\frac{d\phi}{d\alpha} = \frac{\phi}{2\alpha}")
    assert read.letters == Letters(variable="alpha", function="phi")
    assert read.echo == "phi' = phi/(2*alpha)"


@pytest.mark.parametrize("name", sorted(GREEK_LETTERS))
def test_every_greek_letter_is_a_letter(name: str) -> None:
    """As function and as variable, in both notations."""
    other = "xi" if name != "xi" else "zeta"
    for text in (f"\\{name}' = \\{other} \\{name}", f"{name}' = {other}*{name}"):
        assert read_equation(text).letters == Letters(variable=other, function=name)
    text = f"\\frac{{d\\{other}}}{{d\\{name}}} = \\{name}\\{other}"
    assert read_equation(text).letters == Letters(variable=name, function=other)


@pytest.mark.parametrize(
    ("text", "column", "message"),
    [
        (r"y' = \frac{x}{1} x^23 y", 20, "TeX raises only the first digit"),
        (r"y' = {x}^-1 y", 10, "expected an exponent in braces"),
        (r"y' = {x}^(2) y", 10, "expected an exponent in braces"),
        (r"y' = {x}**2 y", 10, "unexpected '*'"),
        (r"y' = 1\, 2 y", 10, "two numbers side by side"),
        (r"y' = {x}2 y", 9, "a number after a factor"),
        (r"y' = 2\frac13 y", 7, "a number before a fraction of numbers is ambiguous"),
        (r"y' = \frac123 y", 13, "a number after a factor"),
        (r"y' = 1/2{x} y", 9, "a product without a sign after a division is ambiguous"),
        (r"y' = {x \over 2} y", 9, r"write \frac{numerator}{denominator}"),
        (r"y' = \left( x y", 6, r"'\left(' is never closed"),
        (r"y' = \left( x ) y", 15, r"expected an operator or '\right)'"),
        (r"y' = ( x \right) y", 10, "expected an operator or ')'"),
        (r"y' = \left. x \right) y", 6, "unsupported delimiter"),
        (r"y' = {x y", 6, "'{' is never closed"),
        (r"y' = x} y", 7, "unexpected '}'"),
        (r"y' = \frac{x}", 14, "the expression ends too early"),
        (r"y' = \frac{x}\cdot", 14, r"an argument of \frac in braces"),
        (r"y' = \frac{}{x} y", 12, "empty parentheses"),
        (r"y' = \frac{x}{0} y", 6, "division by zero"),
        (r"y' = \foo y", 6, r"the macro \foo is not supported"),
        (r"y' = \alphay", 6, r"the macro \alphay is not supported"),
        (r"y' = \varphi y", 6, r"the macro \varphi is not supported"),
        (r"\dot{y} = y", 1, "write y'"),
        (r"y' = \input{x} y", 6, r"the macro \input is not supported"),
        (r"\begin{equation} y' = y \end{equation}", 1, "environments are not read"),
        (r"\begin", 1, "this is not LaTeX"),
        (r"y' &= y \\", 4, "without line breaks or alignment"),
        (r"y' = y \\", 8, "without line breaks or alignment"),
        (r"$y' = y", 8, "'$' is never closed"),
        (r"y' = y$", 7, "'$' is misplaced"),
        (r"$y' = y\)", 8, r"'\)' is misplaced"),
        (r"$y' = {$x$} y$", 8, "'$' is misplaced"),
        (r"$y' = y$ hence", 10, "text outside of the formula"),
        (r"$y' = y$ \cdot", 10, "text outside of the formula"),
        (r"Let $y' = y$", 5, "'$' is misplaced"),
        (r"$y'' = y$", 2, "second order is not supported"),
        (r"y^{\prime\prime} = y", 1, "second order is not supported"),
        (r"\frac{d^2 y}{dx^2} = y", 7, "second order is not supported"),
        (r"\frac{d^{2}}{dx^{2}} y = y", 7, "second order is not supported"),
        (r"y^{(2)} = y'", 1, "not linear"),
        (r"y' = \sqrt{x} y", 6, "only rational functions"),
        (r"y' = {a} x y", 10, "two candidates for the variable"),
        (r"y' = {x}_1 y", 9, "subscripts are not supported"),
        (r"y' = 0.5\, y", 7, "a decimal point is not read"),
        (r"y' = {1e5} y", 8, "scientific notation is not read"),
        (r"y' = \pi y", 6, r"unknown name '\pi'"),
        (r"y' = \mathrm{x} y", 6, "only \\mathrm{d} and \\mathrm{D} are read"),
        ("y' = {\u2212}y", 7, "U+2212 MINUS SIGN"),
        ("y' = {x}!y", 9, "unexpected character '!'"),
        (r"y' = -\,-y", 9, "a repeated sign"),
        (r"y' = \,", 8, "the expression ends too early"),
    ],
)  # fmt: skip
def test_what_cannot_be_read_is_refused_at_its_place(
    text: str, column: int, message: str
) -> None:
    """One ExpressionError says what is wrong, where, and what would be right."""
    error = failure(read_equation, text)
    assert message in str(error), str(error)
    assert (error.line, error.column) == (1, column), str(error)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (r"y' = 1/{x}y", "a product without a sign after a division is ambiguous"),
        (r"y' = {12}{3} y", "two numbers side by side"),
        (r"y' = x{3} y", "a number after a factor"),
        (r"y' = 2{\frac12} y", "a number before a fraction of numbers is ambiguous"),
        (r"y' = 1/{2x} \cdot y", "braces hold together"),
        (r"y' = 2{x+1} y", "braces hold together"),
        (r"y' = x{-1} y", "braces hold together"),
        (r"y' = {1/2} x y", "braces hold together"),
        (r"y' = {2x}^2 y", "braces hold together"),
        (r"y' = {-x}^2 y", "braces hold together"),
        (r"y' = {x^2}^3 y", "braces hold together"),
        (r"y' - {y+y} = 0", "braces hold together"),
        (r"y' = {(x+1)(x-1)}^2 y", "braces hold together"),
        (r"y' = \frac{1}{2}^2 y", "a power of a fraction without parentheses"),
        (r"{y'}(x) = y", "the argument of y, or a product"),
        (r"y' = {y}(x+1)", "the argument of y, or a product"),
        (r"y' = y^{(1)}", "a power or a derivative"),
    ],
)
def test_what_is_printed_otherwise_is_refused(text: str, message: str) -> None:
    """TeX prints no braces: 2{x+1} looks like 2x+1, and {12}{3} like 123."""
    assert message in str(failure(read_equation, text))


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        (r"\frac{dy}{dx}(x) = y(x)", "(1)*y' = (1)*y"),
        (r"\frac{dy}{dx}\left(x\right) = \frac{y}{x}", "(x)*y' = (1)*y"),
        (r"{\frac {3\,{x}^{2}-1}{2\,{x}^{3}-2\,x}}y = y'", CUBIC),
        (r"y' = {\left(x+1\right)}^{2} y", "(1)*y' = (x^2 + 2*x + 1)*y"),
        (r"y' = {-x}y + {x^2}{y}", "(1)*y' = (x^2 - x)*y"),
        (r"y' = \frac{{x+1}}{{x-1}} {y}", "(x - 1)*y' = (x + 1)*y"),
        (r"{y'} - {y/x} = 0", "(x)*y' = (1)*y"),
    ],
)
def test_braces_that_change_nothing_are_read(text: str, expected: str) -> None:
    """The formula as TeX prints it has the same meaning."""
    assert str(read_equation(text).equation) == expected


def test_the_place_counts_lines_of_latex() -> None:
    """Line 2, column 3."""
    error = failure(read_equation, "y' =\n  \\foo y")
    assert (error.line, error.column, error.fragment) == (2, 3, "\\foo")


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (r"\frac{" * 101 + "x" + "}{2}" * 101, "nested more than 100"),
        (r"\frac" * 400, None),
        (r"\sqrt" * 400, None),
        ("{" + "7" * 20_001 + "}", "an integer of 20001 digits"),
        ("{" + "77777\\certgendigits " * 4_001 + "}", "an integer of 20005 digits"),
        ("{x}^{999999999}", "degree 999999999"),
        (r"\sqrt[1234567890]{x}", "the order of a root"),
    ],
)
def test_limits_hold_for_latex(text: str, message: str | None) -> None:
    """LimitError before the work; a chain of macros is an error and no deep stack."""
    if message is None:
        failure(read_rational_function, text)
        return
    with pytest.raises(LimitError, match=message):
        read_rational_function(text)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        (r"\sqrt[3]{x^2-1}", {"x^2 - 1": "1/3"}),
        (r"1/\sqrt{1-4x}", {"4*x - 1": "-1/2"}),
        (r"(x/(x+1))^{1/3}", {"x": "1/3", "x + 1": "-1/3"}),
        (r"\frac{C}{\sqrt[4]{x}}\,\left(x^2+1\right)^{-\frac{2}{3}}",
         {"x": "-1/4", "x^2 + 1": "-2/3"}),
        (r"$y(x) = \pi\sqrt2\,x^{\frac12}$", {"x": "1/2"}),
        (r"x^{1/2}(x^2-1)^{1/2}", {"x": "1/2", "x^2 - 1": "1/2"}),
    ],
)  # fmt: skip
def test_latex_closed_forms_are_read(text: str, expected: dict[str, str]) -> None:
    """Roots with an index, fractions in exponents, constants dropped."""
    assert closed_form(text) == expected


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (r"\sqrt[0]{x}", "a root of order zero"),
        (r"\sqrt[n]{x}", "a number"),
        (r"\sqrt[3{x}", "expected an operator or ']'"),
        (r"\sqrt", "ends too early"),
        (r"\sqrt{x}+1", "a closed form is one product of powers"),
        (r"x^{\sqrt{2}}", "a closed form is one product of powers"),
        (r"e^{x}", "unknown name 'e'"),
    ],
)
def test_closed_forms_that_are_none_are_refused(text: str, message: str) -> None:
    """Each with its own message."""
    with pytest.raises(ExpressionError) as caught:
        read_closed_form(text, Letters())
    assert message in str(caught.value)


@settings(deadline=None)
@given(st.lists(st.integers(-10**30, 10**30), min_size=1, max_size=8).map(
    Polynomial.from_integers), st.sampled_from(["x", "t", "lambda"]))
def test_polynomials_read_the_same_in_both_notations(p: Polynomial, variable: str) -> None:
    """x^12 becomes x^{12}, * becomes a cdot; the polynomial is the same."""
    plain = write_polynomial(p, "x")
    latex = "".join("^{" + part.replace(" ", "} ", 1) if k and " " in part else
                    "^{" + part + "}" if k else part
                    for k, part in enumerate(plain.split("^")))
    latex = latex.replace("*", r"\cdot ")
    latex = latex.replace("x", f"\\{variable} " if len(variable) > 1 else variable)
    assert read_latex_polynomial(latex, variable) == p


def test_latex_is_what_contains_its_characters() -> None:
    """Without backslash, brace or dollar, x^12 is a twelfth power."""
    assert read_rational_function("x^12")[0].degree == 12
    with pytest.raises(ExpressionError, match="only the first digit"):
        read_rational_function("$x^12$")
