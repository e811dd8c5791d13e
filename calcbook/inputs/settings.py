"""inputs.toml: its tables and keys as values by the rules of their fields; nothing here knows of circuits."""

from __future__ import annotations

import re
import tomllib
from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass, field
from functools import cache

from calcbook.errors import nearest
from calcbook.inputs.faults import FaultList
from calcbook.inputs.fields import Field, fields_of
from calcbook.inputs.heads import unknown_name
from calcbook.inputs.items import item_in_words, read_item
from calcbook.inputs.text import LONGEST_TEXT, nearest_name, shown, wrong_tag, wrong_text
from calcbook.inputs.value import Value, number_in
from calcbook.records.project import SignOff, TitleBlock

FILE = "inputs.toml"
TABLES = ("project", "basis", "files", "signed_off", "boards", "sources", "cases", "couplers")
TAGGED = ("boards", "sources", "cases", "couplers")
CSV_FILES = ("circuits.csv", "routes.csv", "notes.csv", "adopted.csv")
_PLACE_IN_TOML = re.compile(r"(.*) \(at (line \d+, column \d+|end of document)\)", re.DOTALL)
_IN_WORDS = {"Cannot overwrite a value": "a key stands twice in its table"}


@dataclass
class Settings:
    """What inputs.toml says.

    `values` by tag ("basis", "boards.MB", "sources.T1") and key; `decimals` is the decimal mark by CSV file; `wrong`
    holds tag and key of what has a fault; `readable` is False where inputs.toml is missing or not TOML at all.
    """

    title: TitleBlock = field(default_factory=lambda: TitleBlock("", ""))
    editions: dict[str, str] = field(default_factory=dict)
    values: dict[str, dict[str, Value]] = field(default_factory=dict)
    signed_off: dict[str, SignOff] = field(default_factory=dict)
    decimals: dict[str, str] = field(default_factory=dict)
    readable: bool = True

    def decimal(self, file: str) -> str:
        """The decimal mark of a CSV file."""
        return self.decimals.get(file, ".")

    def names_of(self, kind: str) -> tuple[str, ...]:
        """The names of the tables of one kind: the boards of `[boards.MB]`, or sources, cases, couplers."""
        return tuple(tag.removeprefix(f"{kind}.") for tag in self.values if tag.startswith(f"{kind}."))


def read_settings(text: str, faults: FaultList, own_titles: Collection[str] = ()) -> Settings | None:
    """Everything inputs.toml says, every fault reported; None where it is not TOML at all.

    `own_titles` names the tables of the project, which may be signed off as those of calcbook.
    """
    document = _parsed(text, faults)
    if document is None:
        return None
    for name in document:
        if name not in TABLES:
            faults.add(FILE, "", f"[{shown(name)[1:-1]}] is not known; {nearest(name[:60], TABLES)}")
    settings = Settings()
    title = _read_table("project", "project", document.get("project"), faults)
    texts = {key: value.text for key, value in title.items()}
    settings.title = TitleBlock(**{"number": "", "title": "", **texts})
    settings.values["basis"] = _read_table("basis", "basis", document.get("basis"), faults)
    settings.editions = _read_editions(document.get("basis"), faults)
    _check_voltages(settings.values["basis"], faults)
    for kind in TAGGED:
        for name, table in _tables_of(kind, document.get(kind, {}), faults):
            settings.values[f"{kind}.{name}"] = _read_table(kind, f"{kind}.{name}", table, faults)
    if not document.get("boards"):
        faults.add(FILE, "", "no board; a project has at least one, such as [boards.MB]")
    settings.signed_off = _read_sign_offs(document.get("signed_off", {}), own_titles, faults)
    for name, table in _tables_of("files", document.get("files", {}), faults):
        if name not in CSV_FILES:
            faults.add(FILE, "[files]", f"{shown(name)} is not a file of the inputs; {nearest(name[:60], CSV_FILES)}")
        decimal = _read_table("files", f'files."{name}"', table, faults).get("decimal")
        settings.decimals[name] = decimal.text if decimal else "."
    return settings


def _parsed(text: str, faults: FaultList) -> dict[str, object] | None:
    try:
        return tomllib.loads(text)
    except RecursionError:
        faults.add(FILE, "", "is not valid TOML: nested too deeply")
    except ValueError as error:
        match = _PLACE_IN_TOML.fullmatch(str(error))
        message, place = (match[1], match[2]) if match else ("a number is too long", "")
        faults.add(FILE, place, f"is not valid TOML: {shown(_IN_WORDS.get(message, message), LONGEST_TEXT)[1:-1]}")
    return None


def _tables_of(kind: str, item: object, faults: FaultList) -> Iterator[tuple[str, object]]:
    """The named tables under `[kind]`, those with a fault in their name left out."""
    if not isinstance(item, dict):
        faults.add(FILE, f"[{kind}]", f"is not a table of tables; each is written [{kind}.NAME], its keys below")
        return
    seen: dict[str, str] = {}
    for name, table in item.items():
        wrong = wrong_tag(name) if kind in TAGGED else wrong_text(name)
        if not wrong and name.lower() in seen:
            wrong = f"{shown(name)} differs from {shown(seen[name.lower()])} only in capital letters"
        if wrong:
            faults.add(FILE, f"[{kind}]", wrong)
        else:
            seen[name.lower()] = name
            yield name, table


def _read_table(place: str, heading: str, table: object, faults: FaultList) -> dict[str, Value]:
    if table is None:
        faults.add(FILE, "", f"the table [{heading}] is missing")
        return {}
    if not isinstance(table, dict):
        faults.add(FILE, f"[{heading}]", f"is not a table of keys; write [{heading}] and its keys below")
        return {}
    fields, values, wrong = fields_of(place), {}, set()
    for name, item in _flat(table, fields):
        known = fields.get(name)
        value = read_item(known, item) if known else unknown_name(place, name)
        if isinstance(value, str):
            faults.add(FILE, f"[{heading}]" + (f", {name}" if known else ""), value)
            wrong.add(name)
        elif value.text:
            values[name] = value
    for name, known in fields.items():
        if known.needed and known.holds != "table" and name not in values and name not in wrong:
            faults.add(FILE, f"[{heading}]", f'the key "{name}" is missing')
    _check_only_for(fields, values, heading, faults)
    return values


def _flat(table: Mapping[str, object], fields: Mapping[str, Field]) -> Iterator[tuple[str, object]]:
    """Keys with their items; those of a sub-table as "drop_limits.lighting". Tables of free keys are left out."""
    for key, item in table.items():
        if key in fields and fields[key].holds == "table":
            continue
        if isinstance(item, dict) and key not in fields and item:
            yield from ((f"{key}.{inner}", value) for inner, value in item.items())
        else:
            yield key, item


#: the standards whose clauses sheets cite beside the tables, which carry their own edition
CITED = ("IEC 60364-4-43", "IEC 60364-5-52")


def _read_editions(basis: object, faults: FaultList) -> dict[str, str]:
    table = basis.get("editions") if isinstance(basis, dict) else {}
    if table == {} and not isinstance(basis, dict):
        return {}
    if not isinstance(table, dict) or not table:
        faults.add(
            FILE, "[basis.editions]", 'is missing; it names the edition of each standard: "IEC 60364-5-52" = "2009"'
        )
        return {}
    editions = {}
    for standard, edition in table.items():
        if not isinstance(edition, str) or not edition.strip():
            wrong = f"{item_in_words(edition)} is not an edition; write it as text, in quotation marks"
        else:
            wrong = wrong_text(standard) or wrong_text(edition)
            editions[standard] = str(edition).strip()
        if wrong:
            faults.add(FILE, "[basis.editions]", wrong)
    for standard in CITED:
        if standard not in table:
            faults.add(FILE, "[basis.editions]", f'"{standard}" is missing; sheets cite it with its edition')
    return editions


def _read_sign_offs(item: object, own_titles: Collection[str], faults: FaultList) -> dict[str, SignOff]:
    found = {}
    for name, table in _tables_of("signed_off", item, faults):
        values = _read_table("signed_off", f'signed_off."{name}"', table, faults)
        if name not in _table_titles() and name not in own_titles:
            message = f"{shown(name)} is not a table of calcbook; {nearest_name(name, _table_titles())}"
            faults.add(FILE, "[signed_off]", message)
        if len(values) == len(fields_of("signed_off")):
            found[name] = SignOff(**{key: value.text for key, value in values.items()})
    return found


@cache
def _table_titles() -> tuple[str, ...]:
    from calcbook.reference.table import tables  # loads the unit library; only sign-offs need it

    return tuple(table.title for table in tables().values())


def _check_voltages(basis: Mapping[str, Value], faults: FaultList) -> None:
    line, earth = basis.get("nominal_voltage"), basis.get("line_to_earth_voltage")
    if not (line and earth and line.quantity and earth.quantity):
        return
    ratio = number_in(line.quantity, "V") / number_in(earth.quantity, "V")
    if not 1.6 <= ratio <= 1.9:
        faults.add(
            FILE,
            "[basis], line_to_earth_voltage",
            f'"{earth.text}" does not go with nominal_voltage "{line.text}": their ratio is {ratio:.3g}; '
            "in a three-phase system it is about 1.73, allowed is from 1.6 to 1.9",
        )


def _check_only_for(fields: Mapping[str, Field], values: Mapping[str, Value], heading: str, faults: FaultList) -> None:
    kind = values.get("kind")
    for name in values:
        allowed = fields[name].only_for
        if kind and allowed and kind.text not in allowed:
            wrong = f'is not a key of a source of kind "{kind.text}"; it belongs to {", ".join(allowed)}'
            faults.add(FILE, f"[{heading}], {name}", wrong)
