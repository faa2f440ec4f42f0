"""Which letter is the variable, which the unknown function.

The unknown function is the letter that carries the prime, stands in dy/dx, or
follows d/dx or D; the variable is the letter in dx or in y(x), else the only
other letter if it is a usual name of a variable (in y' = a*y the letter a may be
a constant).  Anything that is not clear is an error.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from itertools import pairwise

from certgen.claim import Letters
from certgen.errors import ClaimError, ExpressionError
from certgen.notation.source import Source
from certgen.notation.tokens import Kind, Token

__all__ = ["find_letters", "mark_derivatives", "word_place"]

_USUAL_VARIABLES = frozenset(
    [*"tuvxyzTXYZ", "zeta", "theta", "xi"]
)

_APPLIED = r"(?:\([nd]\))?"
_DERIVATIVE = re.compile(rf"F\(d([nd]){_APPLIED}\)\(d([nd])\)")
_QUOTIENT = re.compile(
    rf"(?:\(d([nd]){_APPLIED}\)|d([nd]){_APPLIED})/(?:\(d([nd])\)|d([nd]))"
)
_OPERATOR = re.compile(
    r"F\(d\)\(d([nd])\)|\(d/d([nd])\)|(?:\(d\)|d)/(?:\(d([nd])\)|d([nd]))"
)
_SECOND = re.compile(r"d\^(?:2|\(2\))[nd]?(?:\([nd]\))?\)?(?:/|\(d)")


@dataclass(frozen=True, slots=True)
class _Marks:
    """The symbols with derivatives marked, and the letters that they show."""

    tokens: list[Token]
    functions: list[Token]
    variables: list[Token]


def _signature(tokens: list[Token]) -> str:
    """One character per symbol, so that regular expressions find patterns."""
    return "".join(map(_character, tokens))


def _character(token: Token) -> str:
    if token.kind is Kind.NAME:
        return "d" if token.value == "d" else "D" if token.value == "D" else "n"
    if token.kind is Kind.NUMBER:
        return "2" if token.value.isdigit() and token.value != "1" else "1"
    if token.kind is Kind.OPERATOR:
        return token.value
    simple = {Kind.OPEN: "(", Kind.CLOSE: ")", Kind.FRACTION: "F", Kind.PRIME: "'"}
    return simple.get(token.kind, ".")


def mark_derivatives(source: Source, tokens: list[Token]) -> _Marks:
    """Replace dy/dx and d/dx by one symbol each.

    The value of the new symbol is the function, or empty for an operator that
    stands before the function.  Raises ExpressionError for d^2y/dx^2.
    """
    signature = _signature(tokens).replace("D", "n")
    if second := _SECOND.search(signature):
        token = tokens[second.start()]
        raise _second_order(source, token)
    marks = _Marks([], [], [])
    position = 0
    while position < len(tokens):
        position = _mark(tokens, signature, position, marks)
    return marks


def _second_order(source: Source, token: Token) -> ExpressionError:
    return source.error(token.start, token.end, "second order is not supported",
                        "an equation of first order has y' and y")


def _mark(tokens: list[Token], signature: str, position: int, marks: _Marks) -> int:
    for pattern in (_DERIVATIVE, _QUOTIENT, _OPERATOR):
        if match := pattern.match(signature, position):
            groups = [k for k in range(1, pattern.groups + 1) if match[k]]
            names = [tokens[match.start(k)] for k in groups]
            start, end = tokens[match.start()].start, tokens[match.end() - 1].end
            marks.variables.append(names[-1])
            marks.functions.extend(names[:-1])
            function = names[0].value if names[:-1] else ""
            marks.tokens.append(Token(Kind.DERIVATIVE, function, start, end))
            return match.end()
    marks.tokens.append(tokens[position])
    return position + 1


def find_letters(
    source: Source, tokens: list[Token], letters: Letters | None
) -> tuple[list[Token], Letters]:
    """Return the symbols with all derivatives marked, and the two letters.

    Given `letters` are kept.  Raises ExpressionError when no function, or no
    single function or variable, can be found.
    """
    try:
        marks = _mark_operators(source, mark_derivatives(source, tokens), letters)
        if letters is None:
            letters = _infer(source, marks)
    except ExpressionError:
        for token in tokens:
            if token.error is not None:
                raise token.error from None
        raise
    return marks.tokens, letters


def _operand(tokens: list[Token], k: int) -> Token | None:
    """The letter right after position k, alone or as (y) or (y(x))."""
    following = [*tokens[k + 1 : k + 4], *[tokens[-1]] * 3]
    if following[0].kind is Kind.OPEN:
        closes = following[2].kind in (Kind.CLOSE, Kind.OPEN, Kind.PRIME)
        return following[1] if following[1].kind is Kind.NAME and closes else None
    return following[0] if following[0].kind is Kind.NAME else None


def _mark_operators(source: Source, marks: _Marks, letters: Letters | None) -> _Marks:
    """Find the functions of d/dx, and mark D where it is an operator too."""
    tokens = list(marks.tokens)
    functions = [*marks.functions]
    for k, token in enumerate(tokens):
        if token.kind is Kind.DERIVATIVE and not token.value:
            functions.append(_operand_of(source, tokens, k))
    functions += [a for a, b in pairwise(tokens)
                  if a.kind is Kind.NAME and b.kind is Kind.PRIME]
    if letters is None and not functions:
        functions = _mark_capital(source, tokens, None)
    elif letters is not None and "D" not in (letters.variable, letters.function):
        _mark_capital(source, tokens, letters.function)
    return _Marks(tokens, functions, marks.variables)


def _operand_of(source: Source, tokens: list[Token], k: int) -> Token:
    operand = _operand(tokens, k)
    if operand is None:
        token = tokens[k]
        raise source.error(token.start, token.end,
                           "a derivative must stand before the unknown function",
                           "differentiate nothing but y itself")
    return operand


def _mark_capital(source: Source, tokens: list[Token], function: str | None) -> list[Token]:
    """Mark each D before the function, or before any letter; return those letters."""
    signature = _signature(tokens)
    found = []
    for k, token in enumerate(tokens):
        if token.kind is Kind.NAME and token.value == "D":
            if signature.startswith(("D^2", "D^(2"), k):
                raise _second_order(source, token)
            operand = _operand(tokens, k)
            if operand is not None and operand.value == (function or operand.value):
                tokens[k] = token._replace(kind=Kind.DERIVATIVE, value="")
                found.append(operand)
    return found


def _distinct(candidates: list[Token]) -> list[Token]:
    seen: dict[str, Token] = {}
    for token in candidates:
        seen.setdefault(token.value, token)
    return list(seen.values())


def word_place(source: Source, token: Token) -> int:
    """Where the run of letters begins in which a letter stands."""
    if len(token.word) <= 1 or token.word == token.value or token.word[0] == "\\":
        return token.start
    return source.text.rfind(token.word, 0, token.start + len(token.word))


def _infer(source: Source, marks: _Marks) -> Letters:
    if not any(token.is_operator("=") for token in marks.tokens):
        end = len(source.text)
        raise source.error(0, min(end, 40), "not an equation: write ... = ...")
    functions = _distinct(marks.functions)
    if not functions:
        raise source.error(
            0, 0, "no unknown function in the equation",
            "mark it with a derivative: y', dy/dx or D y")
    if len(functions) > 1:
        raise _two(source, "unknown function", functions)
    function = functions[0].value
    variable = _infer_variable(source, marks, function)
    try:
        return Letters(variable=variable, function=function)
    except ClaimError as error:
        token = functions[0]
        raise source.error(token.start, token.end, str(error)) from None


def _infer_variable(source: Source, marks: _Marks, function: str) -> str:
    shown = _distinct(marks.variables + _arguments(marks.tokens, function))
    if len(shown) > 1:
        raise _two(source, "variable", shown)
    if shown:
        return shown[0].value
    others = _distinct([
        token for token in marks.tokens
        if token.kind is Kind.NAME and token.value not in (function, "pi")
    ])
    for k, token in enumerate(marks.tokens):
        if token.kind is Kind.NAME and token.value == "D" and _follows(marks, k, function):
            raise source.error(
                token.start, token.end, "D may be the variable or a derivative",
                f"write D*{function} for a product, or {function}(D) everywhere")
    if len(others) > 1:
        for token in others:
            if len(token.word) > 1 and token.word[0] != "\\" and token.word != token.value:
                start = word_place(source, token)
                raise source.error(
                    start, start + len(token.word), f"unknown name '{token.word}'",
                    "a name is one letter; write products with *")
        raise _two(source, "variable", others)
    if others and others[0].value not in _USUAL_VARIABLES:
        token = others[0]
        raise source.error(
            token.start, token.end,
            f"'{token.value}' may be the variable or a constant",
            f"write {function}({token.value}) or d{function}/d{token.value} if it is the "
            "variable; parameters are not supported")
    return others[0].value if others else ("t" if function == "x" else "x")


def _follows(marks: _Marks, k: int, function: str) -> bool:
    operand = _operand(marks.tokens, k)
    return operand is not None and operand.value == function


def _arguments(tokens: list[Token], function: str) -> list[Token]:
    """The letters X in y(X) and y'(X)."""
    found = []
    for k, token in enumerate(tokens):
        if token.kind is Kind.NAME and token.value == function:
            while tokens[k + 1].kind is Kind.PRIME:
                k += 1
            kinds = [t.kind for t in tokens[k + 1 : k + 4]]
            if kinds == [Kind.OPEN, Kind.NAME, Kind.CLOSE] and "{" not in tokens[k + 1].value:
                found.append(tokens[k + 2])
    return found


def _two(source: Source, what: str, tokens: list[Token]) -> ExpressionError:
    names = " and ".join(f"'{t.value}'" for t in tokens[:2])
    hint = (
        "an equation has one unknown function" if what == "unknown function"
        else "write y(x) to say which it is; other parameters are not supported"
    )
    return source.error(tokens[1].start, tokens[1].end,
                        f"two candidates for the {what}: {names}", hint)
