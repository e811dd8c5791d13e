"""What a template imports: a sheet on which every line is recorded and displayed as it is made.

sheet = open_sheet("three-phase-power", globals())
P_2 = sheet.datum("shaft_power")
I_L = sheet.step("I_L", three_phase.CURRENT_OF_MOTOR, P_2=P_2, U_r=U_r, eta=eta, cos_phi=cos_phi)
sheet.criterion("design current", I_B <= I_r, cite="IEC 60364-4-43, 433.1 (1)", headroom=["shaft_power"])
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import partial
from typing import Any

from IPython.display import display

from calcbook.errors import CalcbookError, SheetFault, nearest
from calcbook.formulas.formula import Formula, written_out
from calcbook.formulas.register import DERIVATIONS, formulas
from calcbook.records.binding import argument, binding, check_range, keyed, quantities, symbol_of
from calcbook.records.conclude import conclusion
from calcbook.records.dimension import coherent_number
from calcbook.records.display import bundle
from calcbook.records.given import Given, flat_parameters
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
    Verdict,
)
from calcbook.records.notation import Name, named, names_of_parameter
from calcbook.records.printed import print_calculated, print_given, print_number, tell_apart
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.recompute import judge, judge_rule
from calcbook.records.trace import line_from_json, line_to_json
from calcbook.records.value import Choice, Comparison, Value
from calcbook.records.written.tree import rename, symbols_of, write
from calcbook.reference.table import NO_OWN, table, tables

_UNPUBLISHED = "no published example"


def open_sheet(template: str, parameters: Mapping[str, Any]) -> Sheet:
    """A sheet for a template.

    Parameters: `template` its name; `parameters` the notebook's `globals()`, of which only the template's parameters
    are read: texts by parameter name, repeated ones as a dict of texts by key, and `given`.
    """
    return Sheet(template, flat_parameters(parameters), parameters.get("given") or {})


class Sheet:
    """One sheet in the making. Every method that makes a line records it, displays it and hands back its name."""

    def __init__(self, template: str, parameters: Mapping[str, str], given: Mapping[str, Any]) -> None:
        self.template = template
        self.parameters = dict(parameters)
        self.given = Given(**given)
        self.number = self.given.sheet
        self.lines: list[Line] = []

    def stated(self, *parameters: str, key: str = "") -> str:
        """The one parameter of several that is not empty: how the load is given."""
        found = [name for name in parameters if self.parameters.get(keyed(name, key), "").strip()]
        if len(found) != 1:
            what = " and ".join(found) or "none"
            raise self._fault("", f"exactly one of {', '.join(parameters)} is needed; stated: {what}")
        return found[0]

    def begin(self, template: str) -> None:
        """The lines that follow belong to another template of the same workbook."""
        self.template = template

    def datum(self, parameter: str, symbol: str = "", key: str = "") -> Value:
        """A quantity from the inputs.

        Parameters: `parameter` of the template; `symbol` where one parameter may stand for several names of the
        notation list; `key` of a repeated line. Raises SheetFault where it is empty, not a quantity of the name's
        kind, or out of its range.
        """
        entry = self._entry_of(parameter, symbol)
        parameter = keyed(parameter, key)
        text = self._text_of(parameter, entry.name)
        try:
            quantity = read_quantity(text, entry.kind)
            check_range(entry, quantity)
        except CalcbookError as error:
            raise self._fault(entry.name, f"{parameter}: {error}") from error
        return self._valued(
            DatumLine(
                **self._identity(entry.name, key),
                description=entry.description,
                value=quantity,
                si=coherent_number(quantity),
                text=print_given(quantity),
                parameter=parameter,
                origin=self.given.origin(parameter),
            )
        )

    def brought_forward(self, parameter: str, symbol: str = "", key: str = "") -> Value:
        """A value that another sheet worked out, taken where an earlier template brought it; else the datum."""
        entry = self._entry_of(parameter, symbol)
        for line in self.lines:
            if line.label == keyed(entry.name, key) and line.template != self.template and isinstance(line, Valued):
                return Value(line.label, line.value, line.si, line.text)
        brought = self.given.brought(keyed(parameter, key))
        if brought is None:
            return self.datum(parameter, symbol, key)
        quantity, si, text, source = brought
        if quantity.kind != entry.kind:
            raise self._fault(entry.name, f"{source} is {quantity.kind}, needed is {entry.kind}")
        return self._valued(
            BroughtForwardLine(
                **self._identity(entry.name, key),
                description=entry.description,
                value=quantity,
                si=si,
                text=text,
                source=source,
            )
        )

    def choice(self, parameter: str, description: str, key: str = "") -> Choice:
        """A word from the inputs, e.g. the method of installation; one that an earlier template made is taken."""
        label = keyed(parameter, key)
        for line in self.lines:
            if isinstance(line, ChoiceLine) and line.label == label and line.template != self.template:
                return Choice(line.label, line.text)
        text = self.parameters.get(label)
        if text is None:
            raise self._fault(label, f"is not a parameter; {nearest(label, self.parameters)}")
        self._keep(
            ChoiceLine(
                **self._identity(parameter, key),
                description=description,
                parameter=label,
                text=text,
                origin=self.given.origin(label),
            )
        )
        return Choice(label, text)

    def taken(self, parameter: str) -> Value:
        """A value that an earlier template of this workbook worked out, else the datum of that parameter."""
        names = [entry.name for entry in names_of_parameter(parameter)]
        for line in self.lines:
            if line.label in names and isinstance(line, Valued):
                return Value(line.label, line.value, line.si, line.text)
        return self.datum(parameter)

    def table_value(self, name: str, table_key: str, /, key: str = "", **arguments: Value | Choice | str) -> Value:
        """A value looked up in a published table; `arguments` are its keys, lines of the sheet or fixed words.

        The same look-up by an earlier template of this workbook is taken.
        """
        bound = tuple(argument(name_of_key, value) for name_of_key, value in arguments.items())
        earlier = self._looked_up_before(keyed(name, key), table_key, bound)
        if earlier is not None:
            return earlier
        source = table(table_key, self.given.tables)
        keys: dict[str, str | Quantity] = {
            argument: value if isinstance(value, str) else value.text if isinstance(value, Choice) else value.quantity
            for argument, value in arguments.items()
        }
        try:
            if source.value_name.kind != named(name).kind:
                raise self._fault(name, f"table {source.title} holds {source.value_name.name}")
            found = source.look_up(keys)
        except SheetFault:
            raise
        except CalcbookError as error:
            raise self._fault(name, str(error)) from error
        other_edition = self.given.other_edition(source.header["standard"], source.header["edition"])
        return self._valued(
            TableLine(
                **self._identity(name, key),
                description=named(name).description,
                value=found.value,
                si=coherent_number(found.value),
                text=print_given(found.value),
                table=table_key,
                arguments=bound,
                citation=Citation(
                    standard=source.header["standard"],
                    edition=source.header["edition"],
                    table=source.header["table"],
                    title=source.header["title"],
                    row=found.row,
                    column=found.column,
                    status=found.status,
                    conditions=source.header.get("conditions", ""),
                    signed_off=self.given.sign_off(source.title),
                    remark="; ".join(filter(None, (found.remark, other_edition, self.given.own_table(table_key)))),
                ),
            )
        )

    def _looked_up_before(self, label: str, table_key: str, arguments: tuple[Argument, ...]) -> Value | None:
        for line in self.lines:
            if not isinstance(line, TableLine) or line.template == self.template:
                continue
            if (line.label, line.table, line.arguments) == (label, table_key, arguments):
                return Value(line.label, line.value, line.si, line.text)
        return None

    def step(
        self, name: str, formula: Formula, /, remark: str = "", key: str = "", **bindings: Value | Sequence[Value]
    ) -> Value:
        """One line of calculation: `formula` with its symbols bound to lines of the sheet, several in sum, min or max.

        Raises SheetFault where a symbol is unbound or unknown, a kind, unit or range does not fit, there is no
        finite value, or algebra and written form disagree.
        """
        label = keyed(name, key)
        try:
            entry = named(name)
            if entry.kind != formula.result_name.kind:
                raise self._fault(label, f"is {entry.kind}, formula {formula.name} gives {formula.result_name.kind}")
            formula, bindings = written_out(formula, bindings)
            value, second = formula.evaluate({symbol: quantities(bound) for symbol, bound in bindings.items()})
            adopted = self.given.adopted_value(entry, label)
            final = adopted.value if adopted else value
            check_range(entry, final)
        except SheetFault:
            raise
        except CalcbookError as error:
            raise self._fault(label, str(error)) from error
        tree = rename(formula.tree, {symbol: symbol_of(bound) for symbol, bound in bindings.items()})
        bound_by = {write(symbol_of(bound)): bound for bound in bindings.values()}
        unpublished = _UNPUBLISHED if formula.derivation and not formula.published else ""
        return self._valued(
            StepLine(
                **self._identity(name, key),
                description=entry.description,
                value=final,
                si=coherent_number(final),
                text=print_given(final) if adopted else print_calculated(final),
                formula=formula.name,
                written=write(tree),
                bindings=tuple(binding(label, bound_by[label]) for label in map(write, symbols_of(tree))),
                reference=self.given.dated(formula.reference),
                second=second,
                calculated=value,
                calculated_text=print_calculated(value),
                adopted=adopted,
                valid=formula.valid,
                remark="; ".join(filter(None, (remark, unpublished))),
            )
        )

    def criterion(  # noqa: PLR0913 - what a criterion says
        self,
        name: str,
        comparison: Comparison,
        /,
        *,
        cite: str,
        description: str = "",
        headroom: Sequence[str] = (),
        otherwise: Verdict = "not met",
    ) -> None:
        """What must hold, as an inequality.

        `headroom` names parameters; the greatest change is worked out of the first of them that is a datum here.
        Temperatures are compared as (left <= right).over(ambient), sizes as (left >= right).of_sizes().
        `otherwise` is the verdict where it does not hold: "not shown" where that puts a datum in doubt.
        """
        left, right, above = comparison.left, comparison.right, comparison.above
        utilisation, holds = judge(comparison.operator, left.si, right.si, 0.0 if above is None else above.si)
        left_text, right_text = tell_apart(left.quantity, left.text, right.quantity, right.text)
        data = {line.parameter: line.label for line in self.lines if isinstance(line, DatumLine)}
        self._keep(
            InequalityLine(
                **self._identity(name),
                description=description,
                operator=comparison.operator,
                left=left.label,
                right=right.label,
                left_text=left_text,
                right_text=right_text,
                utilisation=utilisation,
                utilisation_text=print_number(utilisation),
                verdict="met" if holds else otherwise,
                reference=self.given.dated(cite),
                otherwise=otherwise,
                headroom_of=next((data[parameter] for parameter in headroom if parameter in data), ""),
                above="" if above is None else above.label,
                governs=comparison.governs,
            )
        )

    def rule(self, name: str, found: Choice, /, *, allowed: Sequence[str], requirement: str, cite: str) -> None:
        """What must hold, as a rule: the word found is one of those allowed."""
        self._keep(
            RuleLine(
                **self._identity(name),
                description=name,
                requirement=requirement,
                rests_on=found.label,
                found=found.text,
                allowed=tuple(allowed),
                verdict=judge_rule(found.text, tuple(allowed)),
                reference=self.given.dated(cite),
            )
        )

    def derivation(self, key: str) -> None:
        """Every stage of a derivation, each proven anew by algebra as it is recorded."""
        if key not in DERIVATIONS:
            raise self._fault(key, f"there is no such derivation; {nearest(key, DERIVATIONS)}")
        subject = DERIVATIONS[key]
        for stage in subject.stages:
            try:
                proof = "" if stage.is_premise else subject.prove(stage)
                reached = subject.reached(stage)
            except CalcbookError as error:
                raise self._fault(stage.name, str(error)) from error
            self._keep(
                DerivationLine(
                    **self._identity(f"{key}: {stage.name}"),
                    description=formulas()[stage.formula].purpose if stage.formula else "",
                    left=stage.left,
                    right=stage.right,
                    standing="premise" if stage.is_premise else "proven",
                    reason=stage.reason,
                    proof=proof,
                    reached=reached,
                    formula=stage.formula,
                )
            )

    def conclude(self) -> None:
        """The end of the sheet: order of the criteria, governing one, headroom, open items, cautions."""
        steps = [line.label for line in self.lines if isinstance(line, StepLine)]
        unused = [label for label in self.given.adopted if label not in steps]
        if unused:
            raise self._fault(
                unused[0],
                f"adopted.csv has a value for it, but this sheet has no such step; {nearest(unused[0], steps)}",
            )
        self._keep(conclusion(self._identity("conclusion"), self.lines, partial(look_up, own=self.given.tables)))

    def _keep(self, line: Line) -> None:
        if any(line.label == other.label for other in self.lines):
            raise self._fault(line.label, "stands on this sheet already; a name is given once")
        line = line_from_json(line_to_json(line))  # what is displayed is what the schema allows
        self.lines.append(line)
        display(bundle(line), raw=True)

    def _valued(self, line: DatumLine | TableLine | BroughtForwardLine | StepLine) -> Value:
        self._keep(line)
        return Value(line.label, line.value, line.si, line.text)

    def _identity(self, name: str, key: str = "") -> dict[str, Any]:
        return {"sheet": self.number, "template": self.template, "name": name, "key": key}

    def _fault(self, line: str, message: str) -> SheetFault:
        return SheetFault(self.number, self.template, line, message)

    def _entry_of(self, parameter: str, symbol: str) -> Name:
        entries = [entry for entry in names_of_parameter(parameter) if symbol in ("", entry.name)]
        if not entries:
            raise self._fault(parameter, f'the notation list has no "{symbol or parameter}" for this parameter')
        return entries[0]

    def _text_of(self, parameter: str, name: str) -> str:
        text = self.parameters.get(parameter)
        if text is None:
            raise self._fault(name, f'"{parameter}" is not a parameter; {nearest(parameter, self.parameters)}')
        if not text.strip():
            raise self._fault(name, f"{parameter} is empty; it is needed here")
        return text


def look_up(key: str, arguments: Mapping[str, str | Quantity], own: Mapping[str, str] = NO_OWN) -> Quantity:
    """A table value without its citation, of `own` tables first: what recomputation is handed."""
    return table(key, own).look_up(arguments).value


def prime() -> None:
    """Fill the caches that every sheet would fill: formulas compiled, tables read, schemas built."""
    for formula in formulas().values():
        formula.evaluate(formula.example_inputs())
    tables()
