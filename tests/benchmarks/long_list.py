"""`schedule` on a long workbook beside the floor of reading it and writing the same cells: `python tests/benchmarks/long_list.py [ROWS]`.

The floor is python-calamine reading the list plus XlsxWriter (constant memory) writing the very cells of our workbook,
in one process, interleaved with ours. Limits: 1.5 times the floor, JSON written too, and 1 GB of memory. Where
rustpy-xlsxwriter is installed, that writer is a second floor, and 2 times it the aim. A loop over openpyxl, as many
people write it, is printed without a limit.
"""

from __future__ import annotations

import json
import os
import random
import resource
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path
from typing import Any

SECTIONS = ["UB 203x133x25", "UC 152x152x23", "SHS 80x80x5", "PFC 200x75x23", "CHS 114.3x5", "FL 50x10", "L 60x60x6", "HEA 200", "PL 10"]
MATERIALS = ["S355", "S275", "S235", "1.4301"]
HEADINGS = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", "Width (mm)", "Remarks"]
ROUNDS = 3
MOST_TIMES, MOST_TIMES_QUICK, MOST_MB = 1.5, 2.0, 1000


def list_rows(count: int) -> list[list[Any]]:
    """An invented list of eight columns."""
    chance = random.Random(7)
    rows: list[list[Any]] = [HEADINGS]
    for number in range(count):
        section = chance.choice(SECTIONS)
        width = chance.randint(50, 400) if section == "PL 10" else None
        remark = "paint shop" if number % 7 == 0 else None
        rows.append([f"M{number + 1}", f"A{number // 50 + 1}", chance.randint(1, 8), section, chance.choice(MATERIALS),
                     chance.randint(200, 12_000), width, remark])
    return rows


def write_plain(path: Path, sheets: dict[str, list[list[Any]]]) -> None:
    """Cells as they are, by XlsxWriter, row by row to the disk."""
    import xlsxwriter

    with xlsxwriter.Workbook(str(path), {"constant_memory": True, "strings_to_formulas": False, "strings_to_urls": False}) as book:
        for name, rows in sheets.items():
            sheet = book.add_worksheet(name)
            for number, row in enumerate(rows):
                sheet.write_row(number, 0, [None if cell == "" else cell for cell in row])


def read_plain(path: Path) -> dict[str, list[list[Any]]]:
    import python_calamine

    book = python_calamine.CalamineWorkbook.from_path(str(path))
    return {name: book.get_sheet_by_name(name).to_python() for name in book.sheet_names}


def floor(source: str, ours: str, target: str) -> None:
    """Seconds of each floor, as JSON: run in a process of its own."""
    cells = read_plain(Path(ours))
    seconds = {}
    started = time.perf_counter()
    read_plain(Path(source))
    reading = time.perf_counter() - started
    started = time.perf_counter()
    write_plain(Path(target), cells)
    seconds["XlsxWriter"] = reading + time.perf_counter() - started
    try:
        import rustpy_xlsxwriter as quick
    except ImportError:
        quick = None
    if quick is not None:
        records = {name: _records(rows) for name, rows in cells.items()}
        started = time.perf_counter()
        quick.write_worksheets(records_with_sheet_name=[(name, rows) for name, rows in records.items() if rows], file_name=target)
        seconds["rustpy-xlsxwriter"] = reading + time.perf_counter() - started
    sys.stdout.write(json.dumps(seconds))


def _records(rows: list[list[Any]]) -> list[dict[str, Any]]:
    return [{f"c{i}": cell for i, cell in enumerate(row)} for row in rows]


def openpyxl_loop(source: str, target: str) -> None:
    """What many people write: openpyxl in, a mass a row, openpyxl out."""
    import openpyxl

    book, out = openpyxl.load_workbook(source), openpyxl.Workbook()
    sheet = out.active
    assert sheet is not None
    for row in book.active.iter_rows(min_row=2, values_only=True):  # type: ignore[union-attr]
        kg = float(row[2]) * float(row[5]) / 1000 * 25.1  # type: ignore[arg-type]
        sheet.append([*row, kg * 0.96, kg, kg * 1.04])
    out.save(target)


def run(command: list[str]) -> tuple[float, float, str]:
    """Seconds, megabytes at the most and standard output of a process."""
    environment = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"}
    started = time.perf_counter()
    child = subprocess.Popen(command, stdout=subprocess.PIPE, env=environment, text=True)
    assert child.stdout is not None
    said = child.stdout.read()
    _, status, used = os.wait4(child.pid, 0)
    child.returncode = os.waitstatus_to_exitcode(status)
    if child.returncode not in (0, 3):
        raise SystemExit(f"{command[:4]} ended with {child.returncode}")
    return time.perf_counter() - started, used.ru_maxrss / 1000, said


def main(count: int) -> bool:
    with tempfile.TemporaryDirectory() as folder:
        source, ours, target = (str(Path(folder) / name) for name in ("list.xlsx", "ours.xlsx", "floor.xlsx"))
        write_plain(Path(source), {"List": list_rows(count)})
        takeoff = [sys.executable, "-m", "takeoff", "schedule", source, "--out", ours, "--replace", "--quiet",
                   "--json", str(Path(folder) / "ours.json")]
        mine, memory, floors = [], 0.0, []
        for _ in range(ROUNDS):
            seconds, megabytes, _ = run(takeoff)
            mine.append(seconds)
            memory = max(memory, megabytes)
            floors.append(json.loads(run([sys.executable, __file__, "floor", source, ours, target])[2]))
        kept = memory <= MOST_MB
        print(f"{count:,} rows: schedule with --json {statistics.median(mine):.2f} s, {memory:,.0f} MB (limit {MOST_MB})")
        for name in floors[0]:
            ratio = statistics.median(m / f[name] for m, f in zip(mine, floors, strict=True))
            limit = MOST_TIMES if name == "XlsxWriter" else MOST_TIMES_QUICK
            base = statistics.median(f[name] for f in floors)
            print(f"  against python-calamine and {name} {base:.2f} s: {ratio:.2f} times (limit {limit})")
            kept = kept and ratio <= limit
        loop = run([sys.executable, __file__, "loop", source, target])[0]
        print(f"  against a loop over openpyxl {loop:.2f} s: {statistics.median(mine) / loop:.2f} times (no limit)")
    return kept


if __name__ == "__main__":
    resource.setrlimit(resource.RLIMIT_CORE, (0, 0))
    if sys.argv[1:2] == ["floor"]:
        floor(*sys.argv[2:])
    elif sys.argv[1:2] == ["loop"]:
        openpyxl_loop(*sys.argv[2:])
    else:
        sys.exit(not main(int(sys.argv[1]) if len(sys.argv) > 1 else 100_000))
