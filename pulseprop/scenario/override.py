"""KEY=VALUE in place of what the file says.

Keys are dotted, list entries counted from 1 or called by their name: "path.1.thickness", "path.cold
window.thickness". Names may hold spaces and dots: of several readings the longest name wins. A value is read
as TOML where it is TOML, else as text.
"""

from __future__ import annotations

import copy
import tomllib
from collections.abc import Iterable
from typing import Any

from pulseprop.errors import InputError
from pulseprop.scenario.places import Keys
from pulseprop.scenario.suggest import did_you_mean

__all__ = ["overridden", "set_value", "split_override"]


def overridden(document: dict[str, Any], overrides: Iterable[str]) -> tuple[dict[str, Any], dict[Keys, str]]:
    """A copy of the document with the overrides in it, and the keys that they set with the text of each."""
    changed = copy.deepcopy(document)
    origins = {}
    for text in overrides:
        key, value = split_override(text)
        origins[set_value(changed, key, value)] = text
    return changed, origins


def split_override(text: str) -> tuple[str, Any]:
    """Key and value of KEY=VALUE."""
    key, sign, value = text.partition("=")
    if not sign or not key.strip() or not value.strip():
        raise InputError(
            "an override is a key, an equals sign and a value",
            value=text,
            allowed='KEY=VALUE such as path.1.thickness="4 mm"',
            file="--set",
        )
    return key.strip(), _value(value.strip())


def set_value(document: dict[str, Any], key: str, value: Any) -> Keys:
    """Put the value at a dotted key of the document, in place; returns the keys. New keys are made, new
    list entries not."""
    holder: Any = document
    keys: Keys = ()
    rest = key
    while True:
        step, rest = _step(holder, rest, key)
        keys = (*keys, step)
        if not rest:
            holder[step] = value
            return keys
        if isinstance(holder, dict):
            holder.setdefault(step, {})
        holder = holder[step]


def _step(holder: Any, rest: str, key: str) -> tuple[str | int, str]:
    """The first key of the rest in this table or list, and what follows it."""
    if isinstance(holder, list):
        return _entry(holder, rest, key)
    if not isinstance(holder, dict):
        raise InputError(
            "the key leads into a value that holds no others", value=holder, file="--set", place=key
        )
    name = _longest(rest, [str(known) for known in holder])
    if name is None:
        name = rest.partition(".")[0]
    return name, rest[len(name) + 1 :]


def _entry(holder: list[Any], rest: str, key: str) -> tuple[int, str]:
    names = {
        str(item["name"]): index
        for index, item in enumerate(holder)
        if isinstance(item, dict) and "name" in item
    }
    name = _longest(rest, list(names))
    if name is not None:
        return names[name], rest[len(name) + 1 :]
    number, _, after = rest.partition(".")
    if number.isdecimal() and 1 <= int(number) <= len(holder):
        return int(number) - 1, after
    named = f", or a name: {', '.join(map(repr, names))}" if names else ""
    raise InputError(
        "there is no such entry",
        value=number,
        allowed=f"a number from 1 to {len(holder)}{named}",
        remedy=did_you_mean(number, list(names)),
        file="--set",
        place=key,
    )


def _longest(rest: str, names: list[str]) -> str | None:
    """The longest of the names with which the rest begins, up to a dot or the end."""
    fitting = [name for name in names if rest == name or rest.startswith(name + ".")]
    return max(fitting, key=len, default=None)


def _value(text: str) -> Any:
    try:
        read = tomllib.loads(f"value = {text}")
    except tomllib.TOMLDecodeError:
        return text
    return read["value"] if list(read) == ["value"] else text
