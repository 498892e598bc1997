"""All limits of speed and memory, printed by one command: `python tests/benchmarks`. Status 1 where one is not kept."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

PARTS = ("look_up.py", "engine.py", "long_list.py")


def main() -> int:
    here = Path(__file__).parent
    return max(subprocess.run([sys.executable, str(here / part)], check=False).returncode for part in PARTS)


if __name__ == "__main__":
    sys.exit(main())
