"""Written forms on paper: MathML, Typst and LaTeX, with symbols and with values."""

from __future__ import annotations

from collections.abc import Callable
from xml.etree import ElementTree

import pytest
import typst as typst_compiler
from hypothesis import given, settings
from hypothesis import strategies as st
from written_trees import forms

from calcbook.formulas.register import formulas
from calcbook.records.printed import MINUS
from calcbook.records.written import latex, mathml, typst
from calcbook.records.written.tree import Node, parse, symbols_of, walk, write

HOSTILE = [
    "</math><script>alert(1)</script>",
    "a & b < c > d",
    "\"quoted\" 'and' \\escaped\\",
    "$x$ #let a = 1; #panic() @ref <label> [b] *c* _d_ `e` //f /*g*/",
    "\\input{file} {} % ~ ^ &",
    "עברית 🙂 \N{ZERO WIDTH JOINER}",
]
HOSTILE_TEXTS = pytest.mark.parametrize("text", HOSTILE)


def as_xml(inner: str) -> ElementTree.Element:
    return ElementTree.fromstring(f"<math>{inner}</math>")


def plain(inner: str) -> str:
    """The characters that MathML shows."""
    return "".join(as_xml(inner).itertext())


def tags(inner: str) -> list[str]:
    return [element.tag for element in as_xml(inner).iter()]


def compiles(sources: list[str]) -> None:
    """Typst accepts every source as mathematics."""
    document = "#set page(height: auto)\n" + "\n\n".join(f"$ {source} $" for source in sources)
    assert typst_compiler.compile(document.encode(), format="svg")


def values_of(node: Node, text: str) -> dict[str, str]:
    return {write(symbol): text for symbol in symbols_of(node)}


# --- what stands on paper ---


def test_a_motor_current_reads_as_the_trade_writes_it() -> None:
    node = parse("P_2/(sqrt(3)*U_r*eta*cos_phi)")
    texts = {"P_2": "45 kW", "U_r": "400 V", "eta": "0.936", "cos_phi": "0.86"}
    assert latex.symbols(node) == (r"\frac{P_{\mathrm{2}}}{\sqrt{3} \, U_{\mathrm{r}} \, \eta \, \cos\,\varphi}")
    assert latex.values(node, texts) == (
        r"\frac{\text{45 kW}}{\sqrt{3} \cdot \text{400 V} \cdot \text{0.936} \cdot \text{0.86}}"
    )
    assert typst.symbols(node).startswith('frac(italic("P")_("2"), sqrt("3") thin italic("U")_("r")')
    assert plain(mathml.symbols(node)) == "P23Urηcosφ"
    assert "msqrt" in tags(mathml.symbols(node))


def test_units_and_subscripts_are_upright() -> None:
    assert "<msub><mi>U</mi><mtext>rN</mtext></msub>" in mathml.symbols(parse("U_rN"))
    assert typst.symbol("I_t_req") == 'italic("I")_("t,req")'
    assert latex.symbol("P_1[C-014]") == r"P_{\mathrm{1,C-014}}"
    assert mathml.values(parse("U_r"), {"U_r": "400 V"}) == "<mn>400 V</mn>"


@pytest.mark.parametrize(
    ("printed", "bracketed"),
    [
        (mathml.values, '<msup><mrow><mo fence="true">(</mo><mn>80 A</mn><mo fence="true">)</mo></mrow>'),
        (typst.values, 'attach(lr(("80 A")), t: "2")'),
        (latex.values, r"{\left( \text{80 A} \right)}^{2}"),
    ],
)
def test_a_value_under_a_power_gets_brackets(printed: Callable[..., str], bracketed: str) -> None:
    assert bracketed in printed(parse("I_B^2*R"), {"I_B": "80 A", "R": "0.1 Ω"})
    assert bracketed not in printed(parse("I_B*R"), {"I_B": "80 A", "R": "0.1 Ω"})


def test_a_symbol_under_a_power_gets_none_and_a_function_does() -> None:
    assert latex.symbols(parse("I_B^2")) == r"{I_{\mathrm{B}}}^{2}"
    assert latex.symbols(parse("cos_phi^2")) == r"{\left( \cos\,\varphi \right)}^{2}"
    assert latex.symbols(parse("(U/I)^2")) == r"{\left( \frac{U}{I} \right)}^{2}"
    assert latex.symbols(parse("sqrt(I)^2")) == r"{\left( \sqrt{I} \right)}^{2}"


def test_a_negative_value_gets_brackets_after_a_sign() -> None:
    cold = f"{MINUS}5 °C"
    difference = latex.values(parse("theta_max - theta_a"), {"theta_max": "70 °C", "theta_a": cold})
    assert difference == rf"\text{{70 °C}} - \left( \text{{{cold}}} \right)"
    product = latex.values(parse("R*theta"), {"R": "2", "theta": cold})
    assert product == rf"\text{{2}} \cdot \left( \text{{{cold}}} \right)"
    assert latex.values(parse("theta_a + 1"), {"theta_a": cold}).startswith(rf"\text{{{cold}}} +")
    assert latex.symbols(parse("U*-I")) == r"U \, \left( - I \right)"


def test_symbols_stand_side_by_side_and_values_are_parted_by_a_dot() -> None:
    assert latex.symbols(parse("U*I")) == r"U \, I"
    assert latex.symbols(parse("2*3*U")) == r"2 \cdot 3 \, U"
    assert latex.values(parse("U*I"), {"U": "400 V", "I": "16 A"}) == r"\text{400 V} \cdot \text{16 A}"
    assert latex.symbols(parse("U*2^2")) == r"U \cdot {2}^{2}"


def test_a_fraction_bar_a_root_and_an_exponent_group_without_brackets() -> None:
    assert latex.symbols(parse("(U + U_N)/(R*I)")) == r"\frac{U + U_{\mathrm{N}}}{R \, I}"
    assert latex.symbols(parse("sqrt((U + U_N))")) == r"\sqrt{U + U_{\mathrm{N}}}"
    assert latex.symbols(parse("U^(1/2)")) == r"{U}^{\frac{1}{2}}"
    assert latex.symbols(parse("(U + U_N)*I")) == r"\left( U + U_{\mathrm{N}} \right) \, I"


def test_functions_on_paper() -> None:
    assert latex.symbols(parse("hypot(R, R_th)")) == r"\sqrt{{R}^{2} + {R_{\mathrm{th}}}^{2}}"
    assert plain(mathml.symbols(parse("max(I, I_B/1.45)"))) == "max(I,IB1.45)"
    assert plain(mathml.symbols(parse("log10(C)"))) == "lg(C)"
    assert latex.symbols(parse("abs(U - U_N)")) == r"\left| U - U_{\mathrm{N}} \right|"
    assert latex.symbols(parse("exp(-t/T)")) == r"{\mathrm{e}}^{\frac{- t}{T}}"
    assert "≤" in plain(mathml.symbols(parse("choose(I <= I_B, U, U_N)")))
    assert latex.symbols(parse("2*pi*t")) == r"2 \pi \, t"
    assert latex.symbols(parse("integral(u_1^2, t, 0, T)")).startswith(r"\int_{0}^{T}")


def test_a_sum_over_lines_shows_its_terms_and_cuts_a_long_one() -> None:
    node = parse("sum(P_1)")
    assert latex.symbols(node) == r"\sum \, P_{\mathrm{1}}"
    assert latex.values(node, {"P_1": ["1 kW", "2 kW"]}) == r"\text{1 kW} + \text{2 kW}"
    many = [f"{number} kW" for number in range(1, 10)]
    assert latex.values(node, {"P_1": "one line only"}) == r"\sum \, \text{one line only}"
    assert latex.values(node, {"P_1": []}) == r"\sum \, \text{}"
    in_product = latex.values(parse("k_s*sum(P_1)"), {"k_s": "0.8", "P_1": ["1 kW", f"{MINUS}2 kW"]})
    terms = rf"\text{{1 kW}} + \left( \text{{{MINUS}2 kW}} \right)"
    assert in_product == rf"\text{{0.8}} \cdot \left( {terms} \right)"
    assert latex.values(node, {"P_1": many}) == r"\text{1 kW} + \text{2 kW} + \dots + \text{9 kW}"


def test_numbers_and_signs_are_those_of_print() -> None:
    assert MINUS in plain(mathml.symbols(parse("U - U_N")))
    assert MINUS in typst.symbols(parse("U - U_N"))


def test_a_value_can_link_to_its_source_line() -> None:
    shown = mathml.values(parse("U*I"), {"U": "400 V", "I": "16 A"}, {"U": 'C-014.html#U"><b>'})
    link = as_xml(shown).find(".//a")
    assert link is not None
    assert (link.get("href"), link.text) == ('C-014.html#U"><b>', "400 V")


# --- every form, and texts that would be markup ---


@given(forms())
def test_mathml_of_every_form_is_well_formed(node: Node) -> None:
    as_xml(mathml.symbols(node))
    shown = plain(mathml.values(node, values_of(node, "1 < 2 & 3")))
    assert ("1 < 2 & 3" in shown) == bool(symbols_of(node))


@given(st.lists(forms(), min_size=1, max_size=4))
def test_latex_brackets_of_every_form_match(nodes: list[Node]) -> None:
    for node in nodes:
        for source in (latex.symbols(node), latex.values(node, values_of(node, "{}\\$%#&_^~"))):
            bare = source.replace(r"\{", "").replace(r"\}", "")
            assert bare.count("{") == bare.count("}")
            assert source.count(r"\left") == source.count(r"\right")


def test_typst_accepts_every_formula_of_the_register() -> None:
    trees = [formula.tree for formula in formulas().values()]
    compiles([typst.symbols(tree) for tree in trees])
    compiles([typst.values(tree, values_of(tree, HOSTILE[3])) for tree in trees])


@settings(max_examples=15)
@given(st.lists(forms(2), min_size=20, max_size=20))
def test_typst_accepts_every_form(nodes: list[Node]) -> None:
    compiles([typst.symbols(node) for node in nodes] + [typst.values(node, values_of(node, '"\\#$')) for node in nodes])


@HOSTILE_TEXTS
def test_mathml_shows_a_hostile_text_as_it_is(text: str) -> None:
    shown = mathml.values(parse("U*I^2"), {"U": text, "I": text})
    assert plain(shown).count(text) == 2
    assert set(tags(shown)) <= {"math", "mrow", "mo", "mtext", "msup", "mn", "mspace"}
    assert plain(mathml.symbol(text)) == text


@HOSTILE_TEXTS
def test_typst_takes_a_hostile_text_as_a_string(text: str) -> None:
    compiles([typst.string(text), typst.symbol(text), typst.values(parse("U"), {"U": text})])
    assert typst.string(text).replace("\\\\", "").replace('\\"', "").count('"') == 2


@HOSTILE_TEXTS
def test_latex_escapes_a_hostile_text(text: str) -> None:
    escaped = latex.text(text).removeprefix(r"\text{").removesuffix("}")
    for special in "$&#_%":
        assert escaped.count(special) == escaped.count("\\" + special) == text.count(special)
    assert r"\input" not in escaped
    commands = (r"\backslash{}", r"\char94{}", r"\sim{}", r"\{", r"\}", r"\$", r"\&", r"\#", r"\_", r"\%")
    for command in commands:
        escaped = escaped.replace(command, "")
    assert not set("\\{}^~") & set(escaped)


def test_an_unknown_symbol_is_printed_as_its_text() -> None:
    assert latex.symbol("x_9") == r"\text{x\_9}"
    assert typst.symbol("x_9") == '"x_9"'
    assert mathml.symbol("x_9") == "<mtext>x_9</mtext>"


@given(forms())
def test_printing_needs_no_more_than_the_tree(node: Node) -> None:
    """The longest print is in proportion to the number of parts: nothing is written twice over."""
    assert len(mathml.symbols(node)) < 200 * (1 + sum(1 for _ in walk(node)))
