"""The public names: those of the package by heart, those of every module explicit."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

import pulseprop

ROOT = Path(pulseprop.__file__).parent
MODULES = sorted(
    file
    for file in ROOT.rglob("*.py")
    if file.name != "__main__.py" and file.read_text(encoding="utf-8").strip()
)


def test_the_package_offers_these_names():
    """What README promises: to take one away breaks its users."""
    assert pulseprop.__all__ == [
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
    assert dir(pulseprop) == sorted([*pulseprop.__all__, "__version__"])


@pytest.mark.parametrize("name", pulseprop.__all__)
def test_every_public_name_is_there_and_explained(name):
    assert getattr(pulseprop, name).__doc__


def test_a_name_that_is_not_there_is_told():
    with pytest.raises(AttributeError, match="no attribute 'propagate'"):
        pulseprop.propagate  # noqa: B018


@pytest.mark.parametrize("file", MODULES, ids=lambda file: str(file.relative_to(ROOT)))
def test_every_module_says_what_it_offers(file):
    """__all__ is written out (the linter sorts it) and names only what the module defines or hands on."""
    tree = ast.parse(file.read_text(encoding="utf-8"))
    offered: list[str] | None = None
    defined: set[str] = set()
    for node in tree.body:
        if isinstance(node, ast.FunctionDef | ast.ClassDef):
            defined.add(node.name)
        elif isinstance(node, ast.Assign | ast.AnnAssign):
            targets = node.targets if isinstance(node, ast.Assign) else [node.target]
            names = [target.id for target in targets if isinstance(target, ast.Name)]
            defined.update(names)
            if names == ["__all__"] and node.value is not None:
                offered = ast.literal_eval(node.value)
        elif isinstance(node, ast.ImportFrom):
            defined.update(alias.asname or alias.name for alias in node.names)
        elif isinstance(node, ast.If):
            defined.update(
                alias.name for part in node.body if isinstance(part, ast.ImportFrom) for alias in part.names
            )
    assert offered is not None
    assert len(set(offered)) == len(offered)
    assert set(offered) <= defined
