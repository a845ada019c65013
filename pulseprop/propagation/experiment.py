"""Everything a run needs, built: the pulse, the path, and what was said about how to compute."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from pulseprop.elements.path import Path
from pulseprop.propagation.result import Caution
from pulseprop.propagation.sizing import GridWish
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse

__all__ = ["Experiment", "MeasuredAutocorrelation"]

Real = NDArray[np.float64]


@dataclass(frozen=True, kw_only=True)
class MeasuredAutocorrelation:
    """A measured intensity autocorrelation: delay in s, signal in any unit, both (K,)."""

    delay: Real
    signal: Real


@dataclass(frozen=True, kw_only=True)
class Experiment:
    """A scenario, built.

    both_signs: the pulse's GDD came from a measured duration, so its sign is unknown. energy_stated: False
    where the scenario gives neither energy nor peak power: then nothing that scales with it is reported.
    beyond_range: what to do with a medium whose range the pulse leaves. substances: catalogue media that
    others are made of. answer: what the scenario expects, in words.
    """

    title: str
    pulse: Pulse | MeasuredPulse
    path: Path
    question: str = ""
    answer: str = ""
    note: str = ""
    file: str = ""
    text: str = ""
    sha256: str = ""
    overrides: tuple[str, ...] = ()
    both_signs: bool = False
    energy_stated: bool = True
    grid: GridWish = field(default_factory=GridWish)
    beyond_range: Literal["refuse", "causal"] = "refuse"
    method: Literal["exact", "split-step"] = "exact"
    autocorrelation: MeasuredAutocorrelation | None = None
    substances: tuple[str, ...] = ()
    warnings: tuple[str, ...] = ()
    cautions: tuple[Caution, ...] = ()
