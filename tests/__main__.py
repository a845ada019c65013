"""`python -m tests`: lint, types, import contract, tests. Stops at the first that fails."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).parent.parent
SCRIPTS = Path(sys.executable).parent

CHECKS = (
    ("ruff", "check", "."),
    ("ruff", "format", "--check", "."),
    ("mypy",),
    ("lint-imports",),
    ("pytest", "-n", "auto", "--maxprocesses", "4"),
)

ONE_THREAD = {"OPENBLAS_NUM_THREADS": "1", "OMP_NUM_THREADS": "1"}
"""The tests fill the cores by themselves; threads inside them would only wait for each other."""


def main() -> int:
    """Exit code of the first check that fails, else 0."""
    for command, *arguments in CHECKS:
        print(f"== {command} {' '.join(arguments)}", flush=True)
        program = SCRIPTS / command
        done = subprocess.run(
            [str(program), *arguments], cwd=ROOT, env={**os.environ, **ONE_THREAD}, check=False
        )
        if done.returncode:
            return done.returncode
    return 0


if __name__ == "__main__":
    sys.exit(main())
