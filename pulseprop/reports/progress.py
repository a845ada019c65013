"""Progress on a terminal: nothing for the first second, then one line that says what is being done."""

from __future__ import annotations

import threading
from types import TracebackType
from typing import TextIO

__all__ = ["Progress"]

QUIET = 1.0
"""Seconds before anything is shown: what is done by then needs no progress."""

CLEAR = "\r\x1b[K"


class Progress:
    """A callable (stage, fraction) to hand down, and a context that cleans up behind itself.

    On a terminal one line is rewritten in place; elsewhere each stage gets a line of its own.
    """

    def __init__(self, stream: TextIO) -> None:
        self.stream = stream
        self.on_terminal = stream.isatty()
        self.stage, self.fraction, self.shown = "", 0.0, ""
        self.timer = threading.Timer(QUIET, self._begin)
        self.timer.daemon = True
        self.visible = False

    def __enter__(self) -> Progress:
        self.timer.start()
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self.timer.cancel()
        if self.visible and self.on_terminal:
            self.stream.write(CLEAR)
            self.stream.flush()
        self.visible = False

    def __call__(self, stage: str, fraction: float) -> None:
        """Note what is being done, and how much of everything is behind it (0 to 1)."""
        self.stage, self.fraction = stage, fraction
        if self.visible:
            self._show()

    def _begin(self) -> None:
        self.visible = True
        if self.stage:
            self._show()

    def _show(self) -> None:
        text = f"{self.stage} …" if not self.on_terminal else f"{100 * self.fraction:3.0f} %  {self.stage} …"
        if text == self.shown:
            return
        self.shown = text
        self.stream.write(CLEAR + text if self.on_terminal else f"pulseprop: {text}\n")
        self.stream.flush()
