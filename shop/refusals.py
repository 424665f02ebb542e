"""What a service says no with, in words a form can show beside its fields."""

from __future__ import annotations

from collections.abc import Mapping


class Refused(ValueError):
    """Input that cannot be used: `faults` maps a form field ("" for the whole form) to words."""

    def __init__(self, faults: Mapping[str, str] | str) -> None:
        self.faults = {"": faults} if isinstance(faults, str) else dict(faults)
        super().__init__("; ".join(self.faults.values()))


class Stale(Exception):
    """Somebody else saved the row since this form was opened."""

    def __init__(self, row: object) -> None:
        self.row = row
        super().__init__(f"{row} was changed by somebody else since this page was opened")
