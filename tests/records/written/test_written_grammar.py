"""The grammar of written forms: one text, one tree; and every bound on what is read."""

from __future__ import annotations

import time

import pytest
from hypothesis import given
from written_trees import forms

from calcbook.errors import WrittenFormFault
from calcbook.records.written.tree import (
    DEEPEST,
    Binary,
    Bracket,
    Call,
    Negative,
    Node,
    Number,
    Symbol,
    parse,
    rename,
    symbols_of,
    walk,
    write,
)


def fault(text: str) -> str:
    """What is said to a text that is refused, within half a second."""
    started = time.perf_counter()
    with pytest.raises(WrittenFormFault) as caught:
        parse(text)
    assert time.perf_counter() - started < 0.5
    assert len(str(caught.value)) < 400
    return str(caught.value)


@given(forms())
def test_what_is_written_reads_back_as_the_same_tree(node: Node) -> None:
    assert parse(write(node)) == node


@given(forms())
def test_spaces_do_not_matter(node: Node) -> None:
    assert parse("  " + write(node).replace(" ", "   ") + "\n") == node


def test_precedence_and_brackets_stand_as_written() -> None:
    a, b, c = Symbol("a"), Symbol("b"), Symbol("c")
    assert parse("a - b - c") == Binary("-", Binary("-", a, b), c)
    assert parse("a/b*c") == Binary("*", Binary("/", a, b), c)
    assert parse("a + b*c") == Binary("+", a, Binary("*", b, c))
    assert parse("(a + b)*c") == Binary("*", Bracket(Binary("+", a, b)), c)
    assert parse("-a^2") == Negative(Binary("^", a, Number("2")))
    assert parse("a^-2") == Binary("^", a, Negative(Number("2")))
    assert parse("a*-b") == Binary("*", a, Negative(b))
    assert parse("sqrt(3)*P_1[C-014]") == Binary("*", Call("sqrt", (Number("3"),)), Symbol("P_1", "C-014"))


def test_symbols_in_the_order_in_which_they_are_written() -> None:
    node = parse("sqrt(b)*a/(b + pi*c[L1])")
    assert symbols_of(node) == (Symbol("b"), Symbol("a"), Symbol("c", "L1"))
    assert sum(1 for _ in walk(node)) == 11


def test_renaming_puts_the_labels_of_lines_in_place_of_symbols() -> None:
    form = parse("choose(a <= b, -(a), sum(b^2))")
    renamed = rename(form, {"a": Symbol("I_B", "C-014"), "b": Symbol("I_Z")})
    assert write(renamed) == "choose(I_B[C-014] <= I_Z, -(I_B[C-014]), sum(I_Z^2))"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "the end found where a value belongs"),
        ("P_2 +", "the end found where a value belongs"),
        ("* P_2", '"*" found where a value belongs'),
        ("P_2 U_r", '"U_r" does not belong here'),
        ("2P", '"P" does not belong here'),
        ("(P_2", '")" is missing'),
        ("P_2)", '")" does not belong here'),
        ("a^b^c", "a power of a power needs brackets"),
        ("a^(b^2)", "a power within an exponent"),
        ("a^13", "exponent 13; allowed is 12"),
        ("a^-13", "exponent 13; allowed is 12"),
        ("--a", '"-" found where a value belongs'),
        ("sqrt", 'function "sqrt" needs brackets'),
        ("sqroot(3)", '"sqroot" is not a function; did you mean "sqrt"?'),
        ("eval(3)", '"eval" is not a function; allowed: abs, acos'),
        ("hypot(a)", "hypot takes 2 to 8 values, got 1"),
        ("sqrt(a, b)", "sqrt takes 1 values, got 2"),
        ("choose(a, b, c)", "choose needs a comparison first: choose(a <= b, p, q)"),
        ("a <= b", '"<=" does not belong here'),
        ("P[", "character '[' is not part of the grammar"),
        ("P[a b]", "character '[' is not part of the grammar"),
        ("P[[a]]", "character '[' is not part of the grammar"),
        ("1,5", '"," does not belong here'),
        ("1..5", "character '.' is not part of the grammar"),
        (".5", "character '.' is not part of the grammar"),
        ("a = b", "character '=' is not part of the grammar"),
        ("a;b", "character ';' is not part of the grammar"),
        ("a**2", '"*" found where a value belongs'),
        ("__import__('os')", "character '_' is not part of the grammar"),
        ("a.real", "character '.' is not part of the grammar"),
        ("'a'", 'character "\'" is not part of the grammar'),
        ("a\x00", "character '\\x00' is not part of the grammar"),
        ("√3", "character '√' is not part of the grammar"),
        ("I²", "character '²' is not part of the grammar"),
        ("٣*P", "character '٣' is not part of the grammar"),
        ("φ", "character 'φ' is not part of the grammar"),
        ("Ｐ_2", "character 'Ｐ' is not part of the grammar"),
        ("a\N{NO-BREAK SPACE}+ b", "character '\\xa0' is not part of the grammar"),
        ("1e999", "number 1e999 is too large"),
        ("2e30", "number 2e30 is too large"),
        ("9^9^9^9", "a power of a power needs brackets"),
        ("9^(9^(9^9))", "a power within an exponent"),
    ],
)
def test_what_the_grammar_does_not_know_is_refused(text: str, message: str) -> None:
    assert message in fault(text)


def test_a_fault_names_its_place() -> None:
    assert fault("P_2 / (sqrt(3)*U_r*etä)") == (
        "written form 'P_2 / (sqrt(3)*U_r*etä)', character 22: character 'ä' is not part of the grammar"
    )


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("(" * 10_000 + "1" + ")" * 10_000, "20001 characters; allowed are 2000"),
        ("(" * 900 + "1" + ")" * 900, f"brackets deeper than {DEEPEST}"),
        ("sqrt(" * 300 + "1" + ")" * 300, f"brackets deeper than {DEEPEST}"),
        ("a" * 5_000, "5000 characters; allowed are 2000"),
        ("1" * 1_999, "is too large"),
        ("a+" * 990 + "a", "more than 600 parts"),
        ("a^2*" * 480 + "a", "more than 600 parts"),
        ("[" * 1_999, "is not part of the grammar"),
        ("9^" * 999 + "9", "a power of a power needs brackets"),
        ("1e" + "9" * 1_500, "is too large"),
    ],
    ids=lambda part: part[:24],
)
def test_every_size_is_bounded(text: str, message: str) -> None:
    assert message in fault(text)


def test_what_is_just_inside_the_bounds_is_read() -> None:
    assert parse("(" * (DEEPEST - 1) + "1" + ")" * (DEEPEST - 1))
    assert parse("a+" * 299 + "a")
    assert parse("a^12")
    assert parse("1e30")
    assert parse("P[" + "x" * 64 + "]")
