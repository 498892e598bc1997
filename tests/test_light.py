"""A look-up at the terminal loads nothing heavy."""

from __future__ import annotations

import subprocess
import sys

import pytest

#: pydantic is not among them: the command-line library loads it by itself
HEAVY = ("pandas", "numpy", "openpyxl", "pint", "xlsxwriter", "python_calamine", "rapidfuzz", "jinja2")

LOOK_UPS = [
    ["material", "S355J2"], ["material", "gold", "water", "oak"], ["material"], ["section", "UB 203x133x25"],
    ["section", "HEA200", "SHS 100x5", "PL 10x200"], ["weigh", "UB 203x133x25", "6 m"],
    ["weigh", "PL 12x200", "450", "--material", "1.4404"], ["--help"],
    ["movement", "S355", "60 m", "--from", "-20", "--to", "45", "--set-at", "5", "--against", "aluminium"],
    ["movement", "oak", "4 m", "--from", "0", "--to", "30", "--json"], ["fit", "S355", "99.92", "S355", "100", "--clearance", "0.1"],
]


@pytest.mark.parametrize("arguments", LOOK_UPS, ids=" ".join)
def test_a_look_up_loads_nothing_heavy(arguments: list[str]) -> None:
    """After the whole command has run, `sys.modules` holds none of the heavy packages."""
    code = (
        "import sys\n"
        f"sys.argv = ['takeoff', *{arguments!r}]\n"
        "from takeoff.cli import main\n"
        "status = 0\n"
        "try:\n    main()\nexcept SystemExit as stop:\n    status = stop.code or 0\n"
        f"loaded = [name for name in {HEAVY!r} if name in sys.modules]\n"
        "print('LOADED', loaded, 'STATUS', status)\n"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, timeout=60, check=True)
    assert done.stdout.splitlines()[-1] == "LOADED [] STATUS 0", done.stdout[-400:] + done.stderr[-400:]
