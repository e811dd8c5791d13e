"""What a template imports: a sheet on which every line is recorded and displayed as it is made.

sheet = open_sheet("three-phase-power", globals())
P_2 = sheet.datum("shaft_power")
I_L = sheet.step("I_L", three_phase.CURRENT_OF_MOTOR, P_2=P_2, U_r=U_r, eta=eta, cos_phi=cos_phi)
sheet.criterion("design current", I_B <= I_r, cite="IEC 60364-4-43, 433.1 (1)", headroom=["shaft_power"])
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from typing import Any

from IPython.display import display

from calcbook.errors import CalcbookError, DimensionFault, SheetFault, nearest
from calcbook.formulas.formula import Formula
from calcbook.formulas.register import DERIVATIONS, formulas
from calcbook.records.conclude import conclusion
from calcbook.records.dimension import coherent_number, in_unit
from calcbook.records.display import bundle
from calcbook.records.line import (
    Argument,
    Binding,
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
from calcbook.records.notation import Name, named, names_of_parameter, out_of_range
from calcbook.records.printed import print_calculated, print_given, print_number, tell_apart
from calcbook.records.project import Adopted, Origin, SignOff
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.recompute import judge, judge_rule
from calcbook.records.trace import line_from_json, line_to_json
from calcbook.records.value import Choice, Comparison, Value
from calcbook.records.written.algebra import number_function
from calcbook.records.written.tree import Symbol, rename, symbols_of, write
from calcbook.reference.table import table, tables

_UNPUBLISHED = "no published example"


def open_sheet(template: str, parameters: Mapping[str, Any]) -> Sheet:
    """A sheet for a template.

    Parameters: `template` its name; `parameters` the notebook's `globals()`, of which only the template's parameters
    are read: texts by parameter name, and `given` (origins, adopted values, sign-offs, number and title).
    """
    return Sheet(template, _texts(parameters), parameters.get("given") or {})


class Sheet:
    """One sheet in the making. Every method that makes a line records it, displays it and hands back its name."""

    def __init__(self, template: str, parameters: Mapping[str, str], given: Mapping[str, Any]) -> None:
        self.template = template
        self.parameters = dict(parameters)
        self.number = str(given.get("sheet", "alone"))
        self.origins: Mapping[str, Any] = given.get("origins", {})
        self.adopted: Mapping[str, Any] = given.get("adopted", {})
        self.signed_off: Mapping[str, Any] = given.get("signed_off", {})
        self.editions: Mapping[str, str] = given.get("editions", {})
        self.lines: list[Line] = []

    def stated(self, *parameters: str) -> str:
        """The one parameter of several that is not empty: how the load is given."""
        found = [parameter for parameter in parameters if self.parameters.get(parameter, "").strip()]
        if len(found) != 1:
            what = " and ".join(found) or "none"
            raise self._fault("", f"exactly one of {', '.join(parameters)} is needed; stated: {what}")
        return found[0]

    def begin(self, template: str) -> None:
        """The lines that follow belong to another template of the same workbook."""
        self.template = template

    def datum(self, parameter: str, symbol: str = "") -> Value:
        """A quantity from the inputs.

        Parameters: `parameter` of the template; `symbol` where one parameter may stand for several names of the
        notation list. Raises SheetFault where it is empty, not a quantity of the name's kind, or out of its range.
        """
        entry = self._entry_of(parameter, symbol)
        text = self._text_of(parameter, entry.name)
        try:
            quantity = read_quantity(text, entry.kind)
            _check_range(entry, quantity)
        except CalcbookError as error:
            raise self._fault(entry.name, f"{parameter}: {error}") from error
        return self._valued(
            DatumLine(
                **self._identity(entry.name),
                description=entry.description,
                value=quantity,
                si=coherent_number(quantity),
                text=print_given(quantity),
                parameter=parameter,
                origin=self._origin(parameter),
            )
        )

    def choice(self, parameter: str, description: str) -> Choice:
        """A word from the inputs, e.g. the method of installation; one that an earlier template made is taken."""
        for line in self.lines:
            if isinstance(line, ChoiceLine) and line.label == parameter and line.template != self.template:
                return Choice(line.label, line.text)
        text = self.parameters.get(parameter)
        if text is None:
            raise self._fault(parameter, f"is not a parameter; {nearest(parameter, self.parameters)}")
        self._keep(
            ChoiceLine(
                **self._identity(parameter),
                description=description,
                parameter=parameter,
                text=text,
                origin=self._origin(parameter),
            )
        )
        return Choice(parameter, text)

    def taken(self, parameter: str) -> Value:
        """A value that an earlier template of this workbook worked out, else the datum of that parameter."""
        names = [entry.name for entry in names_of_parameter(parameter)]
        for line in self.lines:
            if line.label in names and isinstance(line, Valued):
                return Value(line.label, line.value, line.si, line.text)
        return self.datum(parameter)

    def table_value(self, name: str, key: str, /, **arguments: Value | Choice | str) -> Value:
        """A value looked up in a published table; `arguments` are its keys, lines of the sheet or fixed words."""
        source = table(key)
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
        sign_off = self.signed_off.get(source.title)
        return self._valued(
            TableLine(
                **self._identity(name),
                description=named(name).description,
                value=found.value,
                si=coherent_number(found.value),
                text=print_given(found.value),
                table=key,
                arguments=tuple(_argument(argument, value) for argument, value in arguments.items()),
                citation=Citation(
                    standard=source.header["standard"],
                    edition=source.header["edition"],
                    table=source.header["table"],
                    title=source.header["title"],
                    row=found.row,
                    column=found.column,
                    status=found.status,
                    conditions=source.header.get("conditions", ""),
                    signed_off=SignOff(**sign_off) if sign_off else None,
                    remark="; ".join(filter(None, (found.remark, self._other_edition(source.header)))),
                ),
            )
        )

    def step(self, name: str, formula: Formula, /, remark: str = "", **bindings: Value) -> Value:
        """One line of calculation: `formula` with its symbols bound to lines of the sheet.

        Raises SheetFault where a symbol is unbound or unknown, a kind, unit or range does not fit, there is no
        finite value, or algebra and written form disagree.
        """
        try:
            entry = named(name)
            if entry.kind != formula.result_name.kind:
                raise self._fault(name, f"is {entry.kind}, formula {formula.name} gives {formula.result_name.kind}")
            value, second = formula.evaluate({symbol: bound.quantity for symbol, bound in bindings.items()})
            adopted = self._adopted(entry)
            final = adopted.value if adopted else value
            _check_range(entry, final)
        except SheetFault:
            raise
        except CalcbookError as error:
            raise self._fault(name, str(error)) from error
        tree = rename(formula.tree, {symbol: Symbol(*_label_parts(bound.label)) for symbol, bound in bindings.items()})
        values = {bound.label: bound for bound in bindings.values()}
        labels = [write(symbol) for symbol in symbols_of(tree)]
        unpublished = _UNPUBLISHED if formula.derivation and not formula.published else ""
        return self._valued(
            StepLine(
                **self._identity(name),
                description=entry.description,
                value=final,
                si=coherent_number(final),
                text=print_given(final) if adopted else print_calculated(final),
                formula=formula.name,
                written=write(tree),
                bindings=tuple(
                    Binding(symbol=label, rests_on=(label,), texts=(values[label].text,)) for label in labels
                ),
                reference=self._dated(formula.reference),
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
        `otherwise` is the verdict where it does not hold: "not shown" where that puts a datum in doubt.
        """
        left, right = comparison.left, comparison.right
        utilisation, holds = judge(comparison.operator, left.si, right.si)
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
                reference=self._dated(cite),
                otherwise=otherwise,
                headroom_of=next((data[parameter] for parameter in headroom if parameter in data), ""),
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
                reference=self._dated(cite),
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
        unused = [label for label in self.adopted if label not in steps]
        if unused:
            raise self._fault(
                unused[0],
                f"adopted.csv has a value for it, but this sheet has no such step; {nearest(unused[0], steps)}",
            )
        self._keep(conclusion(self._identity("conclusion"), self.lines, look_up))

    def _keep(self, line: Line) -> None:
        if any(line.label == other.label for other in self.lines):
            raise self._fault(line.label, "stands on this sheet already; a name is given once")
        line = line_from_json(line_to_json(line))  # what is displayed is what the schema allows
        self.lines.append(line)
        display(bundle(line), raw=True)

    def _valued(self, line: DatumLine | TableLine | StepLine) -> Value:
        self._keep(line)
        return Value(line.label, line.value, line.si, line.text)

    def _identity(self, name: str) -> dict[str, Any]:
        return {"sheet": self.number, "template": self.template, "name": name}

    def _fault(self, line: str, message: str) -> SheetFault:
        return SheetFault(self.number, self.template, line, message)

    def _dated(self, reference: str) -> str:
        """A reference with the edition that the basis states behind each standard: IEC 60364-4-43:2008, 433.1."""
        for standard, edition in self.editions.items():
            reference = reference.replace(f"{standard},", f"{standard}:{edition},")
        return reference

    def _other_edition(self, header: Mapping[str, str]) -> str:
        """What is printed where the table in store is of another edition than the basis states."""
        stated = self.editions.get(header["standard"], header["edition"])
        return "" if stated == header["edition"] else f"table of edition {header['edition']}; the basis states {stated}"

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

    def _origin(self, parameter: str) -> Origin:
        origin = self.origins.get(parameter)
        return Origin(**origin) if origin else Origin(file="parameters", tag=self.number, column=parameter)

    def _adopted(self, entry: Name) -> Adopted | None:
        found = self.adopted.get(entry.name)
        if found is None:
            return None
        value = read_quantity(str(found["value"]), entry.kind)
        return Adopted(entry.name, value, str(found["reason"]), str(found["by"]), str(found["date"]))


def _texts(parameters: Mapping[str, Any]) -> dict[str, str]:
    """The parameters among a notebook's names, as texts: `papermill -p runs 2` hands over a number."""
    plain = (str, int, float)
    return {name: str(value) for name, value in parameters.items() if type(value) in plain and not name.startswith("_")}


def look_up(key: str, arguments: Mapping[str, str | Quantity]) -> Quantity:
    """A table value without its citation: what recomputation is handed."""
    return table(key).look_up(arguments).value


def prime() -> None:
    """Fill the caches that every sheet would fill: formulas compiled, tables read, schemas built."""
    for formula in formulas().values():
        formula.evaluate(formula.example_inputs())
        number_function(formula.written)
    tables()


def _check_range(entry: Name, quantity: Quantity) -> None:
    fault = out_of_range(entry, in_unit(coherent_number(quantity), entry.unit, entry.kind))
    if fault:
        raise DimensionFault(fault)


def _argument(name: str, value: Value | Choice | str) -> Argument:
    if isinstance(value, str):
        return Argument(name=name, rests_on="", text=value)
    quantity = value.quantity if isinstance(value, Value) else None
    return Argument(name=name, rests_on=value.label, text=value.text, quantity=quantity)


def _label_parts(label: str) -> tuple[str, str]:
    name, _, key = label.partition("[")
    return name, key.rstrip("]")
