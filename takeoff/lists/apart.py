"""Runs the workbook reader in a process of its own, so that a workbook that makes it abort is one message, not the end.

The reader works while the caller goes on (looking the workbook over, loading what it needs); `Reading.sheets` waits. Rank 3.
"""

from __future__ import annotations

import marshal
import subprocess
import sys
from typing import Any

from takeoff.errors import InputError
from takeoff.job import GuardsPart
from takeoff.lists import reader

#: memory of the reader: what it needs to start, and what a cell takes
_START_MB, _CELL_BYTES, _PACKED_TIMES = 1_000, 160, 20

_RIGHT = "a workbook opened and saved once in a spreadsheet program"


class Reading:
    """A workbook being read. As a context, its process is gone at the end, whatever happened."""

    def __init__(self, name: str, data: bytes, guards: GuardsPart) -> None:
        self.name, self.data, self.guards = name, data, guards
        memory = _START_MB + (guards.cells * _CELL_BYTES + _PACKED_TIMES * len(data)) // reader.MEGABYTE
        arguments = [reader.__file__, str(int(memory)), str(max(1, int(guards.seconds))), str(guards.cells)]
        self.process: subprocess.Popen[bytes] | None = None
        # Without an interpreter to start (a program that embeds us) the reader runs here.
        if sys.executable:
            self.process = subprocess.Popen(
                [sys.executable, "-I", *arguments], stdin=subprocess.PIPE, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL
            )

    def __enter__(self) -> Reading:
        if self.process is not None and self.process.stdin is not None:
            try:
                # The reader takes all of it before it answers, so neither side waits for the other.
                self.process.stdin.write(self.data)
                self.process.stdin.close()
            except BrokenPipeError:
                pass  # it ended at once; `sheets` says so
            self.process.stdin = None
        return self

    def __exit__(self, *_: object) -> None:
        if self.process is not None:
            self.process.kill()
            self.process.wait()
            if self.process.stdout is not None:
                self.process.stdout.close()

    def sheets(self) -> list[tuple[str, bool, list[list[Any]]]]:
        """Each sheet's name, whether it is hidden, and its rows. Raises InputError where the workbook cannot be read."""
        answer = self._answer()
        if "error" in answer:
            raise InputError(f"the workbook cannot be read ({answer['error'][:300]})", file=self.name, right=_RIGHT)
        sheets = []
        for title, hidden, rows, odd in answer["sheets"]:
            if isinstance(rows, tuple):
                raise InputError(
                    f"the sheet has {rows[0]:,} rows and {rows[1]:,} columns, more than is read", file=self.name, sheet=title,
                    right=f"at most {self.guards.cells:,} cells, or a higher [guards] cells in the job file",
                )
            reader.put_back(rows, odd)
            sheets.append((title, hidden, rows))
        return sheets

    def _answer(self) -> dict[str, Any]:
        if self.process is None:
            try:
                return reader.read(self.data, self.guards.cells)
            except Exception as error:  # noqa: BLE001 - the reader's errors have no base of their own
                return {"error": str(error) or type(error).__name__}
        try:
            sent, _ = self.process.communicate(timeout=self.guards.seconds)
        except subprocess.TimeoutExpired as error:
            raise InputError(
                f"reading took over {self.guards.seconds:g} s", file=self.name,
                right="a smaller workbook, or a higher [guards] seconds in the job file",
            ) from error
        try:
            answer: dict[str, Any] = marshal.loads(sent)
        except (EOFError, ValueError, TypeError):
            return {"error": f"the reader stopped, status {self.process.returncode}"}
        return answer
