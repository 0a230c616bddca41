"""Exact numbers from their text, as FLINT balls or rationals.

The grammar is what a certificate holds: decimals, exponents, fractions,
products with powers, square roots and pi. Nothing here shares code with the
program that wrote the certificate.
"""

import ast
from fractions import Fraction

from flint import acb, arb, ctx, fmpq


def rational(text):
    """The rational number a text denotes, or None if it is not rational."""
    return _evaluate_rational(_parse(text))


def ball(text):
    """A ball that contains the number, at the current precision."""
    tree = _parse(text)
    exact = _evaluate_rational(tree)
    if exact is not None:
        return arb(fmpq(exact.numerator, exact.denominator))
    return _evaluate_ball(tree)


def cell(value):
    """A cell (text, or a list of real and imaginary text) as a complex ball."""
    if isinstance(value, list):
        return acb(ball(value[0]), ball(value[1]))
    return acb(ball(value))


def double(text):
    """A hexadecimal double, exactly."""
    number = float.fromhex(text)
    if number != number or number in (float("inf"), float("-inf")):
        raise ValueError(f"{text} is not a finite double")
    return arb(number)


def _parse(text):
    for sign, plain in (("−", "-"), ("·", "*"), ("×", "*"), ("÷", "/"), ("^", "**"), ("π", "pi")):
        text = text.replace(sign, plain)
    while "√" in text:
        at = text.index("√")
        end = at + 1
        if end < len(text) and text[end] == "(":
            text = text[:at] + "sqrt" + text[end:]
            continue
        while end < len(text) and (text[end].isdigit() or text[end] == "."):
            end += 1
        text = f"{text[:at]}sqrt({text[at + 1:end]}){text[end:]}"
    return ast.parse(text.strip(), mode="eval").body, text.strip()


def _number(node, source):
    literal = ast.get_source_segment(source, node)
    return Fraction(literal.replace("_", ""))


def _evaluate_rational(parsed):
    node, source = parsed
    match node:
        case ast.Constant():
            return _number(node, source)
        case ast.UnaryOp(op=ast.USub(), operand=operand):
            inner = _evaluate_rational((operand, source))
            return None if inner is None else -inner
        case ast.UnaryOp(op=ast.UAdd(), operand=operand):
            return _evaluate_rational((operand, source))
        case ast.BinOp(left=left, op=operation, right=right):
            a = _evaluate_rational((left, source))
            b = _evaluate_rational((right, source))
            if a is None or b is None:
                return None
            match operation:
                case ast.Add():
                    return a + b
                case ast.Sub():
                    return a - b
                case ast.Mult():
                    return a * b
                case ast.Div():
                    return a / b
                case ast.Pow() if b.denominator == 1:
                    return a ** int(b)
    return None


def _evaluate_ball(parsed):
    node, source = parsed
    exact = _evaluate_rational(parsed)
    if exact is not None:
        return arb(fmpq(exact.numerator, exact.denominator))
    match node:
        case ast.Name(id="pi"):
            return arb.pi()
        case ast.Call(func=ast.Name(id="sqrt"), args=[argument]):
            return _evaluate_ball((argument, source)).sqrt()
        case ast.UnaryOp(op=ast.USub(), operand=operand):
            return -_evaluate_ball((operand, source))
        case ast.BinOp(left=left, op=operation, right=right):
            a, b = _evaluate_ball((left, source)), _evaluate_ball((right, source))
            match operation:
                case ast.Add():
                    return a + b
                case ast.Sub():
                    return a - b
                case ast.Mult():
                    return a * b
                case ast.Div():
                    return a / b
                case ast.Pow():
                    return a**b
    raise ValueError(f"not understood: {source} (precision {ctx.prec})")
