"""The one gate: format, lint, types, then every test. Stops at the first that fails."""

from __future__ import annotations

import subprocess
import sys
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
STEPS = (
    ("format", ["ruff", "format", "--check", "--quiet"]),
    ("lint", ["ruff", "check", "--quiet"]),
    ("types", ["mypy"]),
    ("tests", ["pytest", "-q", "-n", "2"]),
)


def main() -> int:
    """Run the steps; the exit code of the first that fails, else 0."""
    for name, command in STEPS:
        start = time.monotonic()
        code = subprocess.run([sys.executable, "-m", *command], cwd=ROOT, check=False).returncode
        sys.stderr.write(f"{name}: {'passed' if code == 0 else 'FAILED'}, {time.monotonic() - start:.0f} s\n")
        if code:
            return code
    return 0


if __name__ == "__main__":
    sys.exit(main())
