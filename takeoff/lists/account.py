"""Rows read = rows accounted for: the account of a sheet, of a file, of a run. It is checked at every run."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from dataclasses import asdict, dataclass

from takeoff.errors import AccountError


@dataclass(frozen=True, slots=True)
class Account:
    """How many rows there were from the first with content to the last, and what each was."""

    rows: int = 0
    weighed: int = 0
    assumed: int = 0
    not_weighed: int = 0
    heading: int = 0
    total: int = 0
    blank: int = 0
    other: int = 0

    def __add__(self, other: Account) -> Account:
        return Account(*(a + b for a, b in zip(asdict(self).values(), asdict(other).values(), strict=True)))

    @property
    def members(self) -> int:
        return self.weighed + self.assumed + self.not_weighed

    def as_record(self) -> dict[str, int]:
        return asdict(self)

    def check(self, place: str) -> None:
        """Raises AccountError unless the parts add up to the rows."""
        parts = self.members + self.heading + self.total + self.blank + self.other
        if parts != self.rows:
            raise AccountError(
                f"the account of {place} does not close: {self.rows} rows read, {parts} accounted for; nothing was written",
                right="this is a fault of the program: please report it with the list",
            )


def account_of(rows: int, kinds: Iterable[str], statuses: Iterable[str]) -> Account:
    """The account of a sheet from the row span, the kinds of its non-member rows and its members' states."""
    kind, status = Counter(kinds), Counter(statuses)
    return Account(
        rows, status["weighed"], status["assumed"], status["not weighed"],
        kind["heading"], kind["total"], kind["blank"], kind["other"],
    )


@dataclass(frozen=True, slots=True)
class SheetAccount:
    file: str
    sheet: str | None
    account: Account
