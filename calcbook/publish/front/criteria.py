"""The compliance matrix, and the criteria nearest to failing."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import replace

from calcbook.publish import anchors, cautions
from calcbook.publish.front.listing import Column, Listing, Part, columns, counted, words
from calcbook.publish.front.material import Material, conclusion, criteria, to_line, to_sheet, verdict
from calcbook.publish.rows import found, in_words, prose, sides
from calcbook.publish.view import Paragraph, Span
from calcbook.records.conclude import severity
from calcbook.records.line import CriterionLine, InequalityLine, RuleLine
from calcbook.records.result import SheetResult

#: criteria side by side on one landscape page
_ACROSS = 7
_NEAREST = 10


def compliance(material: Material) -> Part:
    """Every sheet against every criterion by name, with the clause and edition of each criterion."""
    sheets = [sheet for sheet in material.sheets if criteria(sheet) or sheet.failure is not None]
    names = list(dict.fromkeys(line.name for sheet in sheets for line in criteria(sheet)))
    groups = [names[start : start + _ACROSS] for start in range(0, len(names), _ACROSS)]
    opening = (
        "Each cell has the utilisation of the criterion on that sheet, 1 being its limit, and the verdict; a rule has "
        "a verdict alone. A dash: the criterion does not apply to the sheet.",
    )
    matrices = tuple(_matrix(sheets, group, index, len(groups)) for index, group in enumerate(groups, 1))
    return Part("compliance", "Compliance matrix", opening, (_meanings(sheets, names), *matrices), wide=True)


def _meanings(sheets: Sequence[SheetResult], names: Sequence[str]) -> Listing:
    """What each criterion says and where it stands in the standards."""
    lines = [line for sheet in sheets for line in criteria(sheet)]
    rows = tuple(_meaning(name, [line for line in lines if line.name == name]) for name in names)
    heads = columns(Criterion="auto", What_must_hold="2fr", Clause_and_edition="1.6fr", Sheets="auto", Verdicts="1fr")
    return Listing("Criteria", heads, rows, "No sheet has a criterion.")


def _meaning(name: str, lines: Sequence[CriterionLine]) -> tuple[Paragraph, ...]:
    said = dict.fromkeys(line.requirement if isinstance(line, RuleLine) else in_words(line) for line in lines)
    verdicts = [line.verdict for line in lines]
    return (
        words(name),
        prose("; ".join(said)),
        words("; ".join(dict.fromkeys(line.reference for line in lines if line.reference))),
        words(str(len({line.sheet for line in lines}))),
        words(", ".join(f"{verdicts.count(each)} {each}" for each in dict.fromkeys(verdicts))),
    )


def _matrix(sheets: Sequence[SheetResult], names: Sequence[str], index: int, of: int) -> Listing:
    heads = [Column(words("Sheet")), Column(words("Title"), "1.8fr"), *(Column(words(name), "1fr") for name in names)]
    rows = tuple(
        ((to_sheet(sheet.number),), words(sheet.title), *_cells(sheet, names), _whole(sheet)) for sheet in sheets
    )
    caption = "Matrix" if of == 1 else f"Matrix, part {index} of {of}"
    return Listing(caption, (*heads, Column(words("Sheet as a whole"), "1.2fr")), rows)


def _cells(sheet: SheetResult, names: Sequence[str]) -> Iterator[Paragraph]:
    for name in names:
        lines = sorted((line for line in criteria(sheet) if line.name == name), key=severity, reverse=True)
        yield _cell(lines[0], len(lines)) if lines else words("–")


def _cell(worst: CriterionLine, count: int) -> Paragraph:
    said = Span(worst.verdict, strong=worst.verdict != "met")
    if isinstance(worst, InequalityLine):
        spans: Paragraph = (to_line(worst, worst.utilisation_text), Span(" "), said)
    else:
        spans = (replace(said, link=to_line(worst, "").link),)
    return (*spans, Span(f" (worst of {count})")) if count > 1 else spans


def _whole(sheet: SheetResult) -> Paragraph:
    return (Span(cautions.NOT_FOR_ISSUE if sheet.failure else verdict(sheet), strong=True),)


def nearest(material: Material) -> Part:
    """The criteria with the least in hand: all that are not met or not shown, then those nearest to failing.

    Comparisons of sizes, which never govern while they are met, are left out of the latter.
    """
    lines = sorted((line for sheet in material.sheets for line in criteria(sheet)), key=severity, reverse=True)
    failing = [line for line in lines if line.verdict != "met"]
    close = [line for line in lines if line.verdict == "met" and isinstance(line, InequalityLine) and line.governs][
        :_NEAREST
    ]
    rooms = _headrooms(material)
    executed = counted(len(material.made), "sheet")
    heads = columns(
        Sheet="auto", Criterion="1.4fr", Comparison="1fr", Utilisation="auto", Verdict="auto", Clause="1.3fr",
        Headroom="1.4fr",
    )  # fmt: skip
    none = f"None{f' on the {executed} executed' if material.failed else ''}."
    listings = (
        Listing("Not met or not shown", heads, tuple(_near(line, rooms) for line in failing), none),
        Listing("Met, nearest to failing first", heads, tuple(_near(line, rooms) for line in close), none),
    )
    return Part("nearest", "Criteria nearest to failing", (), listings, wide=True)


def _headrooms(material: Material) -> dict[tuple[str, str], Paragraph]:
    """Sheet and criterion -> how far a datum may move."""
    found: dict[tuple[str, str], Paragraph] = {}
    for sheet in material.made:
        end = conclusion(sheet)
        for room in end.headrooms if end else ():
            datum = Span(room.datum, symbol=True)
            limit = Span(room.limit_text, anchors.to_sheet(sheet.number, room.criterion))
            said = (Span(" limit "), limit) if room.limit_text else (Span(f" {room.remark}"),)
            found[sheet.number, room.criterion] = (datum, Span(f" at present {room.present_text},"), *said)
    return found


def _near(line: CriterionLine, rooms: dict[tuple[str, str], Paragraph]) -> tuple[Paragraph, ...]:
    home = anchors.to_sheet(line.sheet)
    if isinstance(line, InequalityLine):
        left, sign, right = sides(line)
        comparison: Paragraph = (Span(left.text, home + left.link), sign, Span(right.text, home + right.link))
        utilisation: Paragraph = (to_line(line, line.utilisation_text),)
    else:
        comparison, utilisation = words(found(line).text), ()
    return (
        (to_line(line, line.sheet),),
        prose(in_words(line)),
        comparison,
        utilisation,
        (Span(line.verdict, strong=True),),
        words(line.reference),
        rooms.get((line.sheet, line.label), ()),
    )
