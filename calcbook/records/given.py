"""What calcbook hands to a workbook beside its parameters: the reserved parameter `given`, read into one record."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any

from calcbook.records.notation import Name
from calcbook.records.project import Adopted, Origin, SignOff
from calcbook.records.quantity import Quantity, read_quantity


@dataclass(frozen=True)
class Given:
    """Number of the sheet; origin by parameter; adopted values by label of a line; sign-offs by table; editions by
    standard; values brought forward by parameter; texts of the project's own tables by key. A repeated parameter has
    its key behind it: "shaft_power[C-014]". Empty when a template runs alone.
    """

    sheet: str = "alone"
    title: str = ""
    origins: Mapping[str, Any] = field(default_factory=dict)
    adopted: Mapping[str, Any] = field(default_factory=dict)
    signed_off: Mapping[str, Any] = field(default_factory=dict)
    editions: Mapping[str, str] = field(default_factory=dict)
    brought_forward: Mapping[str, Any] = field(default_factory=dict)
    tables: Mapping[str, str] = field(default_factory=dict)

    def origin(self, parameter: str) -> Origin:
        """Where a parameter's value comes from; alone it is a parameter of the run, to be confirmed."""
        origin = self.origins.get(parameter)
        return Origin(**origin) if origin else Origin(file="parameters", tag=self.sheet, column=parameter)

    def adopted_value(self, entry: Name, label: str) -> Adopted | None:
        """The value adopted in place of a step's, if there is one."""
        found = self.adopted.get(label)
        if found is None:
            return None
        value = read_quantity(str(found["value"]), entry.kind)
        return Adopted(label, value, str(found["reason"]), str(found["by"]), str(found["date"]))

    def sign_off(self, table: str) -> SignOff | None:
        """Who compared a table with a licensed copy."""
        found = self.signed_off.get(table)
        return SignOff(**found) if found else None

    def brought(self, parameter: str) -> tuple[Quantity, float, str, str] | None:
        """A value that another sheet worked out: quantity, SI value, text as printed there, id of that line."""
        found = self.brought_forward.get(parameter)
        if found is None:
            return None
        quantity = Quantity(float(found["number"]), str(found["unit"]), str(found["kind"]))
        return quantity, float(found["si"]), str(found["text"]), str(found["source"])

    def dated(self, reference: str) -> str:
        """A reference with the edition that the basis states behind each standard: IEC 60364-4-43:2008, 433.1."""
        for standard, edition in self.editions.items():
            reference = reference.replace(f"{standard},", f"{standard}:{edition},")
        return reference

    def own_table(self, key: str) -> str:
        """What is printed where a table is the project's own, in place of calcbook's or beside them."""
        return f"table of the project, tables/{key}.csv" if key in self.tables else ""

    def other_edition(self, standard: str, edition: str) -> str:
        """What is printed where the table in store is of another edition than the basis states."""
        stated = self.editions.get(standard, edition)
        return "" if stated == edition else f"table of edition {edition}; the basis states {stated}"


def flat_parameters(parameters: Mapping[str, Any]) -> dict[str, str]:
    """The texts among a notebook's names; a repeated parameter, a dict of texts by key, as "name[key]"."""
    plain = (str, int, float)  # `papermill -p runs 2` hands over a number
    flat = {name: str(value) for name, value in parameters.items() if type(value) in plain and not name.startswith("_")}
    for group in (value for name, value in parameters.items() if isinstance(value, dict) and name != "given"):
        for key, texts in group.items():
            if isinstance(texts, dict):
                flat |= {f"{name}[{key}]": text for name, text in texts.items() if isinstance(text, str)}
    return flat
