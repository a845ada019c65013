"""Where a scenario may hold settings: in the elements of its path and in the compensators at hand."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from functools import cache
from typing import Any, get_args, get_origin

from pydantic import BaseModel

from pulseprop.scenario.adjustable import Setting, find_settings
from pulseprop.scenario.places import Keys
from pulseprop.scenario.schema_path import Element

__all__ = ["settings_of"]


def settings_of(document: Mapping[str, Any]) -> tuple[Setting, ...]:
    """All settings of a document, in its order. Raises NoSetting for a range or list that is none."""
    return tuple(
        setting
        for keys, element in _elements(document)
        for setting in find_settings(element, _lists_of(str(element.get("kind"))), keys)
    )


def _elements(document: Mapping[str, Any]) -> Iterator[tuple[Keys, Mapping[str, Any]]]:
    compensate = document.get("compensate")
    at_hand = compensate.get("with") if isinstance(compensate, dict) else None
    for keys, elements in ((("path",), document.get("path")), (("compensate", "with"), at_hand)):
        if isinstance(elements, list):
            for number, element in enumerate(elements):
                if isinstance(element, dict):
                    yield (*keys, number), element


@cache
def _lists_of(kind: str) -> frozenset[str]:
    """Keys of an element of that kind, and of the tables in it, whose values are lists by their nature."""
    for table in get_args(get_args(Element)[0]):
        if kind in get_args(table.model_fields["kind"].annotation):
            return frozenset(_list_keys(table, set()))
    return frozenset()


def _list_keys(table: type[BaseModel], seen: set[type[BaseModel]]) -> Iterator[str]:
    seen.add(table)
    for name, field in table.model_fields.items():
        if _is_list(field.annotation):
            yield field.alias or name
        for inner in set(_tables_in(field.annotation)) - seen:
            yield from _list_keys(inner, seen)


def _tables_in(annotation: Any) -> Iterator[type[BaseModel]]:
    if isinstance(annotation, type) and issubclass(annotation, BaseModel):
        yield annotation
    for inner in get_args(annotation):
        yield from _tables_in(inner)


def _is_list(annotation: Any) -> bool:
    return get_origin(annotation) in (list, tuple) or any(map(_is_list, get_args(annotation)))
