"""The list that gathers faults while the inputs are read."""

from __future__ import annotations

from calcbook.errors import Fault, InputFaults

MOST_FAULTS = 1000


class FaultList:
    """Faults of one reading of the inputs, in the order in which they were found."""

    def __init__(self) -> None:
        """Begin with no fault."""
        self._faults: list[Fault] = []
        self._stopped: set[str] = set()

    def add(self, file: str, place: str, message: str) -> None:
        """Note one fault; raises InputFaults at once when there are so many that reading on helps nobody."""
        self._faults.append(Fault(file, place, message))
        if len(self._faults) == MOST_FAULTS:
            self._faults.append(Fault(file, "", f"more than {MOST_FAULTS} faults; the rest was not read"))
            self.raise_if_any()

    def stop(self, file: str, place: str, message: str) -> None:
        """Note a fault after which a file is not read on."""
        self._stopped.add(file)
        self.add(file, place, message)

    def stopped(self, file: str) -> bool:
        """Whether a part of a file was not read."""
        return file in self._stopped

    def any_in(self, file: str) -> bool:
        """Whether a file has a fault so far."""
        return any(fault.file == file for fault in self._faults)

    def raise_if_any(self) -> None:
        """Raise all faults in one InputFaults, each once."""
        if self._faults:
            raise InputFaults(tuple(dict.fromkeys(self._faults)))
