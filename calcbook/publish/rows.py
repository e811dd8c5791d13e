"""From a line's record to the row that is printed: every text on paper is chosen here, once for HTML and PDF."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field

from calcbook.publish import anchors
from calcbook.publish.cautions import NOT_COMPARED, numbered
from calcbook.publish.view import DataRow, Equation, Formula, Paragraph, Span, WorkRow
from calcbook.records.display import texts_of
from calcbook.records.line import (
    Argument,
    BroughtForwardLine,
    ChoiceLine,
    Citation,
    DatumLine,
    DerivationLine,
    InequalityLine,
    Line,
    RuleLine,
    StepLine,
    TableLine,
    Valued,
)
from calcbook.records.notation import notation
from calcbook.records.project import Adopted, Origin
from calcbook.records.written.tree import parse

_SIGNS = {"<=": "≤", ">=": "≥"}
#: status of a table's row -> how its value was obtained, in words
_OBTAINED = {
    "public": "read in a public text",
    "formula": "recalled and reproduced by formula",
    "memory": "from memory",
    "definition": "by definition",
}


@dataclass(frozen=True)
class Setting:
    """What rows of a sheet need to know beyond their own line.

    `in_package`: the inputs page, the tables page and other sheets stand beside, so that links to them resolve.
    `derivations`: formula name -> sheet and line where it is derived. `governing`: label of the governing criterion.
    """

    in_package: bool = False
    derivations: Mapping[str, tuple[str, str]] = field(default_factory=dict)
    governing: str = ""

    def outward(self, address: str) -> str:
        """An address on another page, or none where there is no other page."""
        return address if self.in_package else ""


def sentence(*texts: str) -> Paragraph:
    """A paragraph of plain text; empty texts are left out."""
    return (Span(", ".join(text for text in texts if text)),)


def prose(text: str) -> Paragraph:
    """One of our own sentences: the names of the notation list in it, as I_2, are set as symbols."""
    parts = re.split(r"\b([A-Za-z]+_\w+)\b", text)
    return tuple(Span(part, symbol=index % 2 == 1 and part in notation()) for index, part in enumerate(parts) if part)


def data_row(line: DatumLine | ChoiceLine, setting: Setting) -> DataRow:
    """A datum or a choice in the compact table."""
    origin = line.origin
    return DataRow(
        anchor=anchors.anchor(line.label),
        label=line.label if isinstance(line, DatumLine) else "",
        description=prose(line.description),
        value=Span(line.text, setting.outward(anchors.to_datum(origin))),
        place=place(origin),
        document=document(origin),
        status=origin.status,
        remark=origin.remark,
    )


def place(origin: Origin) -> str:
    """Where a datum stands in the inputs: file, tag, column."""
    return ", ".join(part for part in (origin.file, origin.tag, origin.column) if part)


def document(origin: Origin) -> str:
    """The source document of a datum with its revision and page."""
    revision = f"rev. {origin.revision}" if origin.revision else ""
    page = f"p. {origin.page}" if origin.page else ""
    return ", ".join(part for part in (origin.document, revision, page) if part)


def work_row(line: Line, setting: Setting) -> WorkRow:
    """A line of working as it is printed."""
    match line:
        case TableLine():
            return _table_value(line, setting)
        case BroughtForwardLine():
            return _brought_forward(line, setting)
        case StepLine():
            return _step(line, setting)
        case InequalityLine():
            return _inequality(line, setting)
        case RuleLine():
            return _rule(line, setting)
        case DerivationLine():
            return _derivation(line)
    raise TypeError(f"{type(line).__name__} is not a line of working")


def _value(line: Valued, text: str, link: str = "", before: str = "") -> Paragraph:
    start = (Span(before),) if before else ()
    return (*start, Span(line.label, symbol=True), Span(" = "), Span(text, link))


def _table_value(line: TableLine, setting: Setting) -> WorkRow:
    citation = line.citation
    standard = f"{citation.standard}:{citation.edition}" if citation.edition else citation.standard
    cell = ", ".join(f"{name} {text}" for name, text in (("row", citation.row), ("column", citation.column)) if text)
    notes = [sentence("; ".join(text for text in (cell, citation.remark, compared(citation)) if text))]
    ending = f"; {citation.conditions}" if citation.conditions and line.arguments else citation.conditions
    rests_on = _arguments(line.arguments) if line.arguments else ()
    if rests_on or ending:
        notes.append((*rests_on, *((Span(ending),) if ending else ())))
    return WorkRow(
        anchor=anchors.anchor(line.label),
        reference=(sentence(standard), sentence(numbered(citation.table))),
        description=prose(line.description),
        equations=(),
        notes=tuple(notes),
        result=(_value(line, line.text, setting.outward(anchors.to_cell(line))),),
    )


def compared(citation: Citation) -> str:
    """Whether the table has been compared with a licensed copy, and by whom."""
    signed = citation.signed_off
    if signed is None:
        obtained = " and ".join(_OBTAINED.get(part, part) for part in citation.status.split("+") if part)
        return ", ".join(text for text in (obtained, NOT_COMPARED) if text)
    return f"compared with {signed.document} by {signed.by}, {signed.date}"


def _arguments(arguments: tuple[Argument, ...]) -> Paragraph:
    spans: list[Span] = [Span("for ")]
    for index, argument in enumerate(arguments):
        spans.append(Span(f"{', ' if index else ''}{argument.name.replace('_', ' ')} "))
        spans.append(Span(argument.text, anchors.to_line(argument.rests_on) if argument.rests_on else ""))
    return tuple(spans)


def _brought_forward(line: BroughtForwardLine, setting: Setting) -> WorkRow:
    sheet, label = anchors.source_of(line.source)
    source = (Span(f"brought forward from {sheet}, line "), Span(label, symbol=True))
    return WorkRow(
        anchor=anchors.anchor(line.label),
        reference=((Span(f"sheet {sheet}", setting.outward(anchors.to_sheet(sheet))),),),
        description=prose(line.description),
        equations=(),
        notes=(source,),
        result=(_value(line, line.text, setting.outward(anchors.to_source(line.source))),),
    )


def _step(line: StepLine, setting: Setting) -> WorkRow:
    node = parse(line.written)
    links = {
        binding.symbol: anchors.to_line(binding.rests_on[0]) for binding in line.bindings if len(binding.rests_on) == 1
    }
    equations = [Equation(Span(line.label, symbol=True), "=", Formula(node))]
    if line.bindings:
        equations.append(Equation(None, "=", Formula(node, texts_of(line), links)))
    notes = [_terms(binding.rests_on, binding.texts) for binding in line.bindings if len(binding.rests_on) > 1]
    said = "; ".join(text for text in (f"holds for: {line.valid}" if line.valid else "", line.remark) if text)
    if said:
        notes.append(prose(said))
    own = anchors.to_line(line.label)
    result = [_value(line, line.calculated_text, own)]
    if line.adopted:
        notes.append(_adopted(line, line.adopted))
        result = [_value(line, line.calculated_text, own, "calculated "), _value(line, line.text, own, "adopted ")]
    return WorkRow(
        anchor=anchors.anchor(line.label),
        reference=_reference_of_step(line, setting),
        description=prose(line.description),
        equations=tuple(equations),
        notes=tuple(notes),
        result=tuple(result),
    )


def _reference_of_step(line: StepLine, setting: Setting) -> tuple[Paragraph, ...]:
    reference = [sentence(line.reference)] if line.reference else []
    if line.formula in setting.derivations:
        sheet, label = setting.derivations[line.formula]
        reference.append((Span("derived: "), Span(sheet, setting.outward(anchors.to_sheet(sheet, label)))))
    return tuple(reference)


def _terms(rests_on: tuple[str, ...], texts: tuple[str, ...]) -> Paragraph:
    """The keyed lines of a sum, each with its value: the sum itself may shorten them."""
    spans: list[Span] = [Span("terms: ")]
    for index, (label, text) in enumerate(zip(rests_on, texts, strict=True)):
        spans += [Span(", ")] if index else []
        spans += [Span(label, symbol=True), Span(" = "), Span(text, anchors.to_line(label))]
    return tuple(spans)


def _adopted(line: StepLine, adopted: Adopted) -> Paragraph:
    reason = adopted.reason.rstrip(". ")
    return (
        Span("adopted ", strong=True),
        Span(line.label, symbol=True),
        Span(f" = {line.text} in place of {line.calculated_text}: {reason} ({adopted.by}, {adopted.date})"),
    )


def sides(line: InequalityLine) -> tuple[Span, Span, Span]:
    """The two sides as printed, with the sign between them."""
    return (
        Span(line.left_text, anchors.to_line(line.left)),
        Span(f" {_SIGNS[line.operator]} "),
        Span(line.right_text, anchors.to_line(line.right)),
    )


def in_words(line: InequalityLine | RuleLine) -> str:
    """What a criterion is called on paper."""
    return line.description or line.label


def utilisation(line: InequalityLine) -> Span:
    """The utilisation of a criterion, which links to the criterion."""
    return Span(line.utilisation_text, anchors.to_line(line.label))


def _inequality(line: InequalityLine, setting: Setting) -> WorkRow:
    sign = _SIGNS[line.operator]
    left, _, right = sides(line)
    equations = (
        Equation(Span(line.left, symbol=True), sign, Span(line.right, symbol=True)),
        Equation(left, sign, right),
    )
    result = [_verdict(line.verdict), (Span("utilisation "), utilisation(line))]
    if line.label == setting.governing:
        result.append(sentence("governs"))
    return _criterion(line, equations, (), tuple(result))


def _rule(line: RuleLine, setting: Setting) -> WorkRow:
    notes = (
        sentence(line.requirement),
        (Span("found: "), found(line)),
        sentence(f"allowed: {', '.join(line.allowed)}"),
    )
    result = [_verdict(line.verdict)]
    if line.label == setting.governing:
        result.append(sentence("governs"))
    return _criterion(line, (), notes, tuple(result))


def found(line: RuleLine) -> Span:
    """The word that a rule found, which links to where it stands."""
    return Span(line.found or "nothing stated", anchors.to_line(line.rests_on) if line.rests_on else "")


def _verdict(verdict: str) -> Paragraph:
    return (Span(verdict, strong=True),)


def _criterion(
    line: InequalityLine | RuleLine,
    equations: tuple[Equation, ...],
    notes: tuple[Paragraph, ...],
    result: tuple[Paragraph, ...],
) -> WorkRow:
    reference = (sentence(line.reference),) if line.reference else ()
    return WorkRow(anchors.anchor(line.label), reference, prose(in_words(line)), equations, notes, result)


def _derivation(line: DerivationLine) -> WorkRow:
    reached = (Equation(Span("algebra: "), "", Formula(parse(line.reached))),) if line.reached else ()
    standing: Paragraph = (Span(line.standing),)
    return WorkRow(
        anchor=anchors.anchor(line.label),
        reference=(sentence(f"formula: {line.formula.replace('_', ' ')}"),) if line.formula else (),
        description=prose(line.reason),
        equations=(Equation(Formula(parse(line.left)), "=", Formula(parse(line.right))), *reached),
        notes=(),
        result=(standing, sentence(line.proof)) if line.proof else (standing,),
    )
