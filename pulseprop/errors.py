"""Failures a user can act on.

    PulsepropError            anything the program says on purpose
    ├── InputError            exit code 2: the input cannot be used
    │   └── RangeError        a wavelength outside what a record covers
    └── NumericalLimit        exit code 3: the answer would not be trustworthy

Every message names the file, the place in it, the value, what is allowed and what to do next, as far
as they are known where the failure is found; outer layers add what they know with `located`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

__all__ = ["Complaint", "InputError", "NumericalLimit", "PulsepropError", "RangeError"]


@dataclass(frozen=True, kw_only=True)
class Complaint:
    """The parts of one message; `text` joins those that are known."""

    problem: str
    value: object = None
    allowed: str = ""
    remedy: str = ""
    file: str = ""
    place: str = ""

    @property
    def text(self) -> str:
        where = ", ".join(part for part in (self.file, self.place) if part)
        head = f"{where}: {self.problem}" if where else self.problem
        if self.value is not None:
            head += f" (got {self.value!r})" if isinstance(self.value, str) else f" (got {self.value})"
        tail = [f"Allowed: {self.allowed}."] if self.allowed else []
        if self.remedy:
            tail.append(self.remedy if self.remedy.endswith((".", "?")) else self.remedy + ".")
        return " ".join([head if head.endswith("?") else head + ".", *tail])


class PulsepropError(Exception):
    """Base of all failures that the program reports on purpose."""

    exit_code = 2

    def __init__(
        self,
        problem: str,
        *,
        value: object = None,
        allowed: str = "",
        remedy: str = "",
        file: str = "",
        place: str = "",
    ) -> None:
        self.complaint = Complaint(
            problem=problem.rstrip("."),
            value=value,
            allowed=allowed.rstrip("."),
            remedy=remedy,
            file=file,
            place=place,
        )
        super().__init__(self.complaint.text)

    def located(self, *, file: str = "", place: str = "") -> PulsepropError:
        """The same failure with file and place added where they were not known yet."""
        known = self.complaint
        other = type(self)(known.problem)
        other.complaint = replace(known, file=known.file or file, place=known.place or place)
        other.args = (other.complaint.text,)
        return other

    def __str__(self) -> str:
        return self.complaint.text


class InputError(PulsepropError):
    """The input cannot be used (exit code 2)."""


class RangeError(InputError):
    """A frequency lies outside what a record covers (exit code 2)."""


class NumericalLimit(PulsepropError):
    """A numerical limit was reached; the message names it and the way past it (exit code 3)."""

    exit_code = 3
