"""From a checked scenario to the experiment that a run takes."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from math import pi

from pulseprop.constants import SPEED_OF_LIGHT
from pulseprop.elements.path import Path
from pulseprop.errors import InputError, PulsepropError
from pulseprop.propagation.experiment import Experiment
from pulseprop.propagation.sizing import GridWish
from pulseprop.pulse.measured import MeasuredPulse
from pulseprop.pulse.pulse import Pulse
from pulseprop.pulse.source import PulseSource
from pulseprop.scenario.build_medium import MediaOfScenario
from pulseprop.scenario.build_path import built_path
from pulseprop.scenario.build_pulse import autocorrelation_of, built_pulse
from pulseprop.scenario.read import Scenario

__all__ = ["build", "grid_wish", "media_of", "pulse_of"]

RANGE_SHARE = 1e-6
"""Share of the pulse's energy that may lie where a medium was not measured."""


def media_of(scenario: Scenario) -> MediaOfScenario:
    """The media that the scenario describes, by name."""
    return MediaOfScenario(scenario)


def _warnings(scenario: Scenario) -> tuple[str, ...]:
    pulse = scenario.content.pulse
    said = []
    if not pulse.given("energy", "peak_power"):
        said.append(
            "neither energy nor peak_power is stated: 1 nJ was taken, and what scales with it is a guess"
        )
    if pulse.shape == "measured" and pulse.given("centre"):
        said.append("pulse.centre is not used: the centre of a measured pulse is that of its file")
    for name, table in scenario.content.medium.items():
        idle = table.kerr.given("steepening", "raman", "two_photon") if table.kerr else ()
        if idle:
            said.append(f"medium.{name}.kerr: {', '.join(idle)} not used: the path is taken as linear")
    if scenario.content.propagation.given("local_error"):
        said.append("propagation.local_error is not used: a linear path is taken without local error")
    return tuple(said)


def _beyond_rows(pulse: PulseSource, media: MediaOfScenario) -> Iterator[str]:
    """Measured absorptions whose rows do not cover the pulse: there the tails are assumed."""
    low, high = pulse.spectral_extent(RANGE_SHARE)
    for name, (first, last) in media.rows.items():
        if low < first or high > last:
            yield (
                f"the pulse reaches beyond the rows of {name}, {_nanometres(last)} to {_nanometres(first)} "
                "nm: its absorption there is assumed, not measured"
            )


def _nanometres(omega: float) -> str:
    return f"{2e9 * pi * SPEED_OF_LIGHT / omega:.6g}"


def pulse_of(scenario: Scenario) -> tuple[Pulse | MeasuredPulse, bool]:
    """The pulse, and whether the sign of its GDD is open. Raises InputError with its place."""
    try:
        return built_pulse(scenario)
    except PulsepropError as error:
        raise scenario.blamed(error, "pulse") from None


def grid_wish(scenario: Scenario) -> GridWish:
    """What the scenario says about the grid."""
    content = scenario.content
    wish = GridWish(span=content.grid.span, points=content.grid.points, form=content.propagation.form)
    return wish if content.grid.memory is None else replace(wish, memory=content.grid.memory)


def _refuse_open_settings(scenario: Scenario) -> None:
    """A pulse can be sent through elements as they stand today only."""
    for setting in scenario.settings:
        if setting.keys[0] == "path" and setting.now is None:
            raise scenario.blamed(
                InputError(
                    "the setting is a range without today's value",
                    remedy="Add `now` to it, or let `pulseprop compensate` choose",
                ),
                *setting.keys,
            )


def build(scenario: Scenario, path: Path | None = None) -> Experiment:
    """Build pulse, media and path, or take a path that is built already.

    Raises InputError with file and place for what cannot be built.
    """
    content = scenario.content
    media = media_of(scenario)
    pulse, both_signs = pulse_of(scenario)
    try:
        trace = autocorrelation_of(scenario)
    except PulsepropError as error:
        raise scenario.blamed(error, "pulse") from None
    if path is None:
        _refuse_open_settings(scenario)
        path = built_path(scenario, media, pulse.centre)
    method = content.propagation.method
    return Experiment(
        title=content.title or scenario.file,
        question=content.question,
        answer=content.answer,
        note=" ".join(part for part in (content.laboratory, content.note) if part),
        pulse=pulse,
        path=path,
        substances=tuple(media.substances),
        file=scenario.file,
        text=scenario.text,
        sha256=scenario.sha256,
        overrides=scenario.overrides,
        both_signs=both_signs,
        energy_stated=bool(content.pulse.given("energy", "peak_power")),
        warnings=(*_warnings(scenario), *_beyond_rows(pulse, media)),
        grid=grid_wish(scenario),
        beyond_range=content.grid.beyond_range,
        method="exact" if method == "auto" else method,
        autocorrelation=trace,
    )
