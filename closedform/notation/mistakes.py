"""What people do wrong in a formula, and the shortest texts that do it."""

from __future__ import annotations

__all__ = ["MISTAKES"]

MISTAKES: tuple[tuple[str, str, tuple[str, ...]], ...] = (
    (
        "the formula is empty",
        "write a number or a formula",
        ("", " "),
    ),
    (
        "a closing bracket is missing",
        "close the bracket marked here",
        ("(x", "(2", "((x)", "("),
    ),
    (
        "a closing bracket has no opening one",
        "take it away, or open a bracket before it",
        ("x)", "2)", "(x))", ")"),
    ),
    (
        "there is nothing between the brackets",
        "write a formula between them",
        ("()",),
    ),
    (
        "two operators stand side by side",
        "take one away, or write what belongs between them",
        (
            *("x+*x", "x+/x", "x+^x", "x-*x", "x-/x", "x-^x", "x**/x"),
            *("x*/x", "x*^x", "x/*x", "x//x", "x/^x", "x^*x", "x^/x", "x^^x"),
            "x* *x",
        ),
    ),
    (
        "an operator has nothing before it",
        "write what it applies to on its left",
        ("*x", "/x", "^x", "(*x)", "(/x)", "(^x)"),
    ),
    (
        "an operator has nothing after it",
        "write what it applies to on its right",
        ("x+", "x-", "x*", "x/", "x^", "(x+)", "(x-)", "(x*)", "(x/)", "(x^)"),
    ),
    (
        "a function stands without a bracket",
        "write its argument in brackets, as in sin(2*t), and a power of it as sin(t)^2",
        (
            *("sin", "sin x", "sin 2", "sin cos(x)", "(sin)"),
            *("sin+x", "sin-x", "sin*x", "sin/x", "sin^2(x)"),
        ),
    ),
    (
        "a name stands before a bracket, and it is no function",
        (
            "write a product with *, as in k*(x + 1); the functions are exp, sin, cos, sinh, "
            "cosh and sqrt, and a state is written without its time"
        ),
        ("x(x)",),
    ),
    (
        "two numbers stand side by side",
        "write * between them, or join the digits",
        ("2 2",),
    ),
    (
        "a number stands after what it multiplies",
        "write the number first, or * before it",
        ("x 2", "(x)2"),
    ),
    (
        "a number is not well formed",
        "a number has one decimal point at most, as in 12, 1.25, .5 or 1e-3",
        ("1.2.3", "1..2", "."),
    ),
    (
        "a character does not belong to a formula",
        (
            "formulas are made of numbers, names, + - * / ^, round brackets and functions; the "
            "decimal mark is a point"
        ),
        ("x # x", "$", "_x"),
    ),
)
"""What is wrong, what to do, and the shortest wrong inputs.

The reader stops at one token and knows the token before it; that pair is looked up among
the pairs at which it stops in these inputs.
"""
