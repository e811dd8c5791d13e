"""What a formula is: a written form with its symbols, where it comes from, and a worked example."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import cast

from calcbook.errors import DimensionFault
from calcbook.records.binding import Bound
from calcbook.records.dimension import coherent_number, in_unit
from calcbook.records.notation import Name, named, out_of_range, range_in_words
from calcbook.records.quantity import Quantity, read_quantity
from calcbook.records.units import UNITS, kind_in_words
from calcbook.records.value import Value
from calcbook.records.written.algebra import number_function
from calcbook.records.written.dimensions import check_dimensions
from calcbook.records.written.evaluate import evaluate, rounding_scale
from calcbook.records.written.tree import Call, Node, Symbol, expand_sums, parse, spread, symbols_of, walk, write


@dataclass(frozen=True)
class Example:
    """A worked example: inputs by symbol, the result as printed by its source, and the source."""

    inputs: Mapping[str, str]
    result: str
    source: str = "our own arithmetic, not a published example"


@dataclass(frozen=True)
class Formula:
    """One formula, one page.

    `result` and every symbol of `written` are names of the notation list, which gives their unit, kind and range.
    `derivation` names the derivation that proves it, or `citation` the standard's clause that states it: one of the two
    is required. `reference` is what stands in the left column of a sheet. `published` names the sources of the
    published examples it is tested with; empty is printed as "no published example".
    """

    name: str
    purpose: str
    result: str
    written: str
    valid: str
    reference: str
    example: Example
    derivation: str = ""
    citation: str = ""
    published: tuple[str, ...] = ()

    @cached_property
    def tree(self) -> Node:
        """The written form as a tree, its dimensions checked once."""
        tree = parse(self.written)
        check_dimensions(tree, {name.name: name.unit for name in self.symbols}, self.result_name.unit)
        return tree

    @cached_property
    def symbols(self) -> tuple[Name, ...]:
        """The notation entries of the symbols, in the order in which they are written."""
        return tuple(named(symbol.name) for symbol in symbols_of(parse(self.written)))

    @property
    def result_name(self) -> Name:
        """The notation entry of the result."""
        return named(self.result)

    def spans(self, name: str) -> bool:
        """Whether a symbol stands alone under min( ) or max( ), where it may be bound to several lines."""
        return any(
            isinstance(part, Call) and part.function in ("min", "max") and part.arguments == (Symbol(name),)
            for part in walk(parse(self.written))
        )

    def over(self, counts: Mapping[str, int]) -> Formula:
        """The same formula with `min(x)` and `max(x)` written out: min(x[1], x[2]) where x stands for two lines."""
        keyed = {name: [Symbol(name, str(at + 1)) for at in range(count)] for name, count in counts.items()}
        return replace(self, written=write(spread(parse(self.written), keyed)))

    def check(self, quantities: Mapping[str, Quantity | Sequence[Quantity]]) -> None:
        """Kinds and ranges of what is bound to the symbols; DimensionFault names the symbol and what it needs."""
        entries = {write(symbol): named(symbol.name) for symbol in symbols_of(parse(self.written))}
        wanted = set(entries)
        if wanted != set(quantities):
            missing, extra = sorted(wanted - set(quantities)), sorted(set(quantities) - wanted)
            faults = [f"lacks {name}" for name in missing] + [f"does not know {name}" for name in extra]
            raise DimensionFault(f"formula {self.name} {' and '.join(faults)}; it takes {', '.join(sorted(wanted))}")
        for label, entry in entries.items():
            bound = quantities[label]
            for quantity in (bound,) if isinstance(bound, Quantity) else bound:
                self._check_one(entry, quantity)

    def _check_one(self, entry: Name, quantity: Quantity) -> None:
        if quantity.kind != entry.kind:
            raise DimensionFault(
                f"formula {self.name}: {entry.name} needs {kind_in_words(entry.kind)}, "
                f"got {kind_in_words(quantity.kind)} ({quantity.number:g} {quantity.unit})"
            )
        fault = out_of_range(entry, in_unit(coherent_number(quantity), entry.unit, entry.kind))
        if fault:
            raise DimensionFault(f"formula {self.name}: {fault}")

    def evaluate(self, quantities: Mapping[str, Quantity | Sequence[Quantity]]) -> tuple[Quantity, float]:
        """The result by the algebra's function, and beside it the written form's own number (coherent unit).

        Raises DimensionFault where kinds or ranges do not fit or where the two numbers differ by more than 1e-12 of
        the line's largest term, EvaluationFault where there is no finite real number.
        """
        self.check(quantities)
        values = {label: _coherent(quantities[label]) for label in map(write, symbols_of(self.tree))}
        second = evaluate(self.tree, values)
        first = self._by_algebra(values)
        allowed = 1e-12 * rounding_scale(self.tree, values)
        if abs(first - second) > allowed:
            raise DimensionFault(f"formula {self.name}: algebra gives {first!r}, the written form {second!r}")
        if abs(first) <= allowed:
            first = 0.0  # what is left of terms that cancel is rounding, and prints as nothing
        return in_unit(first, self.result_name.unit, self.result_name.kind), second

    def _by_algebra(self, values: Mapping[str, float | list[float]]) -> float:
        """The number of the sympy expression; a sum over lines is written out term by term first."""
        counts = {name: len(value) for name, value in values.items() if isinstance(value, list)}
        if not counts:
            return float(number_function(self.written)(*values.values()))
        written_out = expand_sums(self.tree, counts)
        terms = {f"{name}[{at}]": term for name in counts for at, term in enumerate(cast("list[float]", values[name]))}
        flat = {**values, **terms}
        return float(number_function(written_out)(*(flat[write(symbol)] for symbol in symbols_of(written_out))))

    def example_inputs(self) -> dict[str, Quantity | list[Quantity]]:
        """The inputs of the worked example as quantities; several for a symbol of a sum, parted by "; "."""
        return {name: _example(text, named(name).kind) for name, text in self.example.inputs.items()}

    def page(self) -> str:
        """The formula's page, made from the data above: purpose, form, symbols, range, source, example."""
        lines = [self.purpose, "", f"    {self.result} = {self.written}", ""]
        for entry in (*self.symbols, self.result_name):
            unit = UNITS[entry.unit].printed or "-"
            allowed = f", {range_in_words(entry.range)}" if entry.range else ""
            lines.append(f"    {entry.name:8} {entry.description} [{unit}{allowed}]")
        lines += ["", f"Valid     {self.valid}"]
        source = f"derived, sheet D-{self.derivation}" if self.derivation else self.citation
        lines.append(f"Source    {source}")
        inputs = ", ".join(f"{name} = {text}" for name, text in self.example.inputs.items())
        lines.append(f"Example   {inputs} -> {self.result} = {self.example.result} ({self.example.source})")
        lines.append(f"Published {'; '.join(self.published) or 'no published example'}")
        return "\n".join(lines)


def _coherent(bound: Quantity | Sequence[Quantity]) -> float | list[float]:
    if isinstance(bound, Quantity):
        return coherent_number(bound)
    return [coherent_number(quantity) for quantity in bound]


def _example(text: str, kind: str) -> Quantity | list[Quantity]:
    quantities = [read_quantity(part, kind) for part in text.split("; ")]
    return quantities if len(quantities) > 1 else quantities[0]


def written_out(formula: Formula, bindings: Mapping[str, Bound]) -> tuple[Formula, dict[str, Bound]]:
    """The formula with min( ) and max( ) over several lines written out, each line bound to a symbol of its own."""
    found = dict(bindings)
    extremes = {name: lines for name, lines in bindings.items() if not isinstance(lines, Value) and formula.spans(name)}
    for name, lines in extremes.items():
        del found[name]
        found |= {f"{name}[{at}]": line for at, line in enumerate(lines, start=1)}
    return (formula.over({name: len(lines) for name, lines in extremes.items()}) if extremes else formula), found
