"""Ultrashort laser pulses through causal matter.

The public names load what they need when first used, so that importing the package is light.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from pulseprop.api import catalogue, compensate, dataset, media, medium, read, send, vet
    from pulseprop.errors import InputError, NumericalLimit, PulsepropError, RangeError

__all__ = [
    "InputError",
    "NumericalLimit",
    "PulsepropError",
    "RangeError",
    "catalogue",
    "compensate",
    "dataset",
    "media",
    "medium",
    "read",
    "send",
    "vet",
]

__version__ = "0.1.0"
"""What pyproject.toml takes as the version of the package."""

_ERRORS = {"InputError", "NumericalLimit", "PulsepropError", "RangeError"}


def __getattr__(name: str) -> Any:
    if name not in __all__:
        raise AttributeError(f"module 'pulseprop' has no attribute {name!r}")
    from importlib import import_module

    return getattr(import_module("pulseprop.errors" if name in _ERRORS else "pulseprop.api"), name)


def __dir__() -> list[str]:
    return sorted([*__all__, "__version__"])
