"""The plan of a project: one sheet a circuit in the order of the file, then one sheet of derivations a subject."""

from __future__ import annotations

from dataclasses import asdict

from calcbook.plan.parameters import parameters_of
from calcbook.records.project import Adopted, Circuit, Plan, Project, SheetPlan
from calcbook.records.quantity import Quantity

#: subject of a template and of its derivation -> title of the derivation sheet
SUBJECTS = {"three-phase-power": "Derivation of three-phase power", "cable-current": "Derivation of cable current"}


def make_plan(project: Project) -> Plan:
    """Which sheets exist and what is handed to their templates.

    Parameters: `project` as read. Result: the sheets in the order of the register.
    """
    circuits = tuple(_circuit_sheet(circuit, project) for circuit in project.circuits)
    return Plan(circuits + tuple(_derivation_sheet(subject, title) for subject, title in SUBJECTS.items()))


def spelled(quantity: Quantity) -> str:
    """A quantity as the inputs would write it, with every digit of its number: "82 A", "0.91"."""
    number = repr(quantity.number).removesuffix(".0")
    return number if quantity.unit == "1" else f"{number} {quantity.unit}"


def _circuit_sheet(circuit: Circuit, project: Project) -> SheetPlan:
    parameters = parameters_of(circuit, project.basis)
    given: dict[str, object] = {
        "sheet": circuit.tag,
        "title": circuit.description,
        "origins": {name: asdict(datum.origin) for name, datum in parameters.items() if datum},
        "adopted": {adopted.line: _adopted(adopted) for adopted in circuit.adopted},
        "signed_off": {table: asdict(sign_off) for table, sign_off in project.signed_off.items()},
        "editions": dict(project.editions),
    }
    texts = {name: datum.text if datum else "" for name, datum in parameters.items()}
    return SheetPlan(circuit.tag, circuit.description, tuple(SUBJECTS), texts, given)


def _derivation_sheet(subject: str, title: str) -> SheetPlan:
    number = f"D-{subject}"
    given: dict[str, object] = {"sheet": number, "title": title}
    return SheetPlan(number, title, ("derivations",), {"subject": subject}, given)


def _adopted(adopted: Adopted) -> dict[str, str]:
    return {"value": spelled(adopted.value), "reason": adopted.reason, "by": adopted.by, "date": adopted.date}
