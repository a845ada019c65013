"""`python -m tests.benchmarks`: every figure, each with what it is measured against."""

from __future__ import annotations

from importlib import import_module

PARTS = (
    "dispersion",
    "kramers_kronig",
    "resonance",
    "feasibility",
    "bounds",
    "compensation",
    "speed",
)
"""Beside them, by name and for an hour or so each: unresolved, vet_random, vet_mistakes, vet_open_data."""


def main() -> None:
    for part in PARTS:
        print(f"== {part}", flush=True)
        import_module(f"tests.benchmarks.{part}").main()


if __name__ == "__main__":
    main()
