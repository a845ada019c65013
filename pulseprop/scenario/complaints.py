"""What the validation library found, in our own words."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from pulseprop.errors import Complaint
from pulseprop.scenario.fields import UnknownKey
from pulseprop.scenario.places import Keys
from pulseprop.scenario.suggest import did_you_mean, nearest

__all__ = ["Finding", "findings_of"]

Finding = tuple[Keys, Complaint]
"""The keys that a complaint is about, and the complaint."""

EXTINCTION = Complaint(
    problem="the word extinction means three things and is refused",
    allowed="k (absorption index), absorbance (decadic) or molar (molar absorption coefficient)",
    remedy="Say which of them the numbers are",
)


def findings_of(errors: list[Any], document: Mapping[str, Any]) -> list[Finding]:
    """One finding for each error of the validation library, in the order of the schema."""
    return [_finding(error, _untagged(error["loc"], document)) for error in errors]


def _untagged(location: Keys, document: Mapping[str, Any]) -> Keys:
    """The location without the kinds that the library puts in behind each table that is told apart by
    `kind`."""
    keys: Keys = ()
    holder: Any = document
    tagged = False
    for step in location:
        if isinstance(holder, dict) and not tagged and step == holder.get("kind"):
            tagged = True
            continue
        keys = (*keys, step)
        holder, tagged = _member(holder, step), False
    return keys


def _member(holder: Any, step: str | int) -> Any:
    try:
        return holder[step]
    except (KeyError, IndexError, TypeError):
        return None


def _finding(error: Any, keys: Keys) -> Finding:
    kind, came, context = error["type"], error["input"], error.get("ctx", {})
    if kind == "complaint":
        return (*keys, context["at"]) if context["at"] else keys, context["complaint"]
    if kind == "extra_forbidden":
        return keys, _unknown_key(str(keys[-1]), came)
    if kind == "missing":
        return keys, Complaint(problem="the key is missing", remedy=f'Add "{keys[-1]}"')
    if kind == "union_tag_not_found":
        return (*keys, "kind"), _no_kind(came)
    if kind == "union_tag_invalid":
        return (*keys, "kind"), _unknown_choice(context["tag"], context["expected_tags"])
    if kind == "literal_error":
        return keys, _unknown_choice(came, context["expected"])
    return keys, _in_words(kind, came, context, error["msg"])


def _no_kind(came: Any) -> Complaint:
    like = nearest("kind", [key for key in came if isinstance(key, str)]) if isinstance(came, dict) else None
    remedy = f'Did you mean "kind" where "{like}" stands?' if like else 'Add "kind"'
    return Complaint(problem="the key is missing", remedy=remedy)


def _unknown_key(key: str, came: Any) -> Complaint:
    if "extinction" in key.casefold():
        return EXTINCTION
    allowed = came.allowed if isinstance(came, UnknownKey) else ()
    return Complaint(
        problem=f'there is no key "{key}" here', allowed=", ".join(allowed), remedy=did_you_mean(key, allowed)
    )


def _unknown_choice(came: Any, expected: str) -> Complaint:
    if isinstance(came, str) and "extinction" in came.casefold():
        return EXTINCTION
    options = [option.strip().strip("'") for option in expected.replace(" or ", ", ").split(",")]
    return Complaint(
        problem="this is none of the choices",
        value=came,
        allowed=", ".join(
            f'"{option}"' if not option.lstrip("-").isdigit() else option for option in options
        ),
        remedy=did_you_mean(came, options) if isinstance(came, str) else "",
    )


EXPECTED = {
    "model_type": "a table",
    "model_attributes_type": "a table",
    "dict_type": "a table",
    "list_type": "a list",
    "string_type": "a text in quotes",
    "bool_type": "true or false",
    "int_type": "a whole number",
    "float_type": "a number without a unit",
}

BOUNDS: dict[str, Callable[[Any], str]] = {
    "greater_than": lambda context: f"above {context['gt']:g}",
    "greater_than_equal": lambda context: f"{context['ge']:g} or more",
    "less_than": lambda context: f"below {context['lt']:g}",
    "less_than_equal": lambda context: f"{context['le']:g} or less",
    "multiple_of": lambda context: f"a multiple of {context['multiple_of']:g}",
    "finite_number": lambda context: "a finite number",
    "string_too_short": lambda context: "a text that is not empty",
    "too_short": lambda context: f"a list of {context['min_length']} or more",
}


def _in_words(kind: str, came: Any, context: Any, message: str) -> Complaint:
    if kind in EXPECTED:
        return Complaint(problem=f"expected {EXPECTED[kind]}", value=_brief(came))
    if kind in BOUNDS:
        return Complaint(
            problem="the value is out of bounds", value=_brief(came), allowed=BOUNDS[kind](context)
        )
    return Complaint(problem=message, value=_brief(came))


def _brief(value: Any) -> object:
    """The value as it was written, cut where it is long."""
    if isinstance(value, list) or not isinstance(value, dict | str):
        return value if len(repr(value)) <= 60 else repr(value)[:57] + "..."
    return value if isinstance(value, str) else "a table"
