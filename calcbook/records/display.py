"""What JupyterLab shows for a line: the record, LaTeX in markdown, plain text; no HTML, which it would not trust."""

from __future__ import annotations

from typing import Any

from calcbook.records.line import (
    BroughtForwardLine,
    ChoiceLine,
    ConclusionLine,
    DatumLine,
    DerivationLine,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    TableLine,
)
from calcbook.records.trace import LINE_MIME, line_to_json
from calcbook.records.written import latex
from calcbook.records.written.tree import Symbol, parse


def bundle(line: Line) -> dict[str, Any]:
    """The display data of one line."""
    return {LINE_MIME: line_to_json(line), "text/markdown": _markdown(line), "text/plain": _plain(line)}


def texts_of(line: StepLine) -> dict[str, str | list[str]]:
    """The printed values of a step's symbols, by label."""
    return {
        binding.symbol: binding.texts[0] if binding.rests_on == (binding.symbol,) else list(binding.texts)
        for binding in line.bindings
    }


def _markdown(line: Line) -> str:
    match line:
        case StepLine():
            tree = parse(line.written)
            parts = [latex.symbol(line.label), latex.symbols(tree)]
            if not isinstance(tree, Symbol):
                parts.append(latex.values(tree, texts_of(line)))
            equation = f"${' = '.join([*parts, latex.text(line.calculated_text)])}$"
            adopted = f" · adopted: ${latex.symbol(line.label)} = {latex.text(line.text)}$" if line.adopted else ""
            return equation + adopted
        case DatumLine() | TableLine() | BroughtForwardLine():
            return f"${latex.symbol(line.label)} = {latex.text(line.text)}$ · {line.description}"
        case InequalityLine():
            sign = {"<=": r"\le", ">=": r"\ge"}[line.operator]
            symbols = f"{latex.symbol(line.left)} {sign} {latex.symbol(line.right)}"
            values = f"{latex.text(line.left_text)} {sign} {latex.text(line.right_text)}"
            return f"${symbols}$: ${values}$: **{line.verdict}**"
        case DerivationLine():
            return f"${latex.symbols(parse(line.left))} = {latex.symbols(parse(line.right))}$ · {line.reason}"
        case ChoiceLine() | RuleLine() | ConclusionLine():
            return f"${latex.text(_plain(line))}$"


def _plain(line: Line) -> str:
    match line:
        case StepLine():
            adopted = f"; adopted {line.text}" if line.adopted else ""
            return f"{line.label} = {line.written} = {line.calculated_text}{adopted}"
        case DatumLine() | TableLine() | BroughtForwardLine():
            return f"{line.label} = {line.text}"
        case ChoiceLine():
            return f"{line.description}: {line.text}"
        case InequalityLine():
            values = f"{line.left_text} {line.operator} {line.right_text}"
            return f"{line.left} {line.operator} {line.right}: {values}: {line.verdict}"
        case RuleLine():
            return f"{line.requirement}: {line.found or 'nothing stated'}: {line.verdict}"
        case DerivationLine():
            return f"{line.left} = {line.right} ({line.standing})"
        case ConclusionLine():
            return f"{line.verdict}; governing: {line.governing or 'none'}"
