"""How long a look-up takes beside an empty two-command program's `--help`: run `python tests/benchmarks/look_up.py`.

Processor time of whole processes, interleaved so that a busy spell hits both alike; the limit is 1.5 times.
"""

from __future__ import annotations

import os
import resource
import statistics
import subprocess
import sys
import tempfile
from pathlib import Path

EMPTY = "import typer\napp = typer.Typer()\n\n@app.command()\ndef a() -> None: ...\n\n@app.command()\ndef b() -> None: ...\n\napp()\n"
LOOK_UPS = [
    ["material", "1.4301"], ["material", "oak", "--moisture", "25"], ["section", "UB 457x191x67"], ["section", "HSS6X4X1/4"],
    ["weigh", "UB 457x191x67", "7200"], ["movement", "S355", "14 m", "--from", "5", "--to", "45"],
]
ROUNDS = 9


def seconds(command: list[str]) -> float:
    """Processor seconds of one run of a command, its children's included."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    # Compiled files are kept between runs, as on any user's machine.
    environment = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"}
    subprocess.run(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, check=False, env=environment)
    after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime - before.ru_utime + after.ru_stime - before.ru_stime


def main() -> None:
    with tempfile.TemporaryDirectory() as folder:
        empty = Path(folder) / "empty.py"
        empty.write_text(EMPTY)
        floor = [sys.executable, str(empty), "--help"]
        for arguments in LOOK_UPS:
            ours = [sys.executable, "-c", f"import sys; sys.argv = ['takeoff', *{arguments!r}]; from takeoff.__main__ import main; main()"]
            seconds(ours)
            pairs = [(seconds(ours), seconds(floor)) for _ in range(ROUNDS)]
            ratio = statistics.median(a / b for a, b in pairs)
            mine, theirs = (statistics.median(side) for side in zip(*pairs, strict=True))
            print(f"{' '.join(arguments):44} {mine * 1000:6.0f} ms against {theirs * 1000:4.0f} ms: {ratio:.2f} times (limit 1.5)")


if __name__ == "__main__":
    main()
