"""The path of a scenario, element by element, with places in every complaint."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from typing import Any

from pulseprop.elements.element import Element
from pulseprop.elements.path import Path
from pulseprop.errors import PulsepropError
from pulseprop.scenario import build_basics, build_compressors, build_mirrors, build_optics, build_shaper
from pulseprop.scenario.build_medium import MediaOfScenario
from pulseprop.scenario.build_site import Site
from pulseprop.scenario.read import Scenario
from pulseprop.scenario.schema_element import ElementTable
from pulseprop.scenario.schema_path import RepeatTable

__all__ = ["built_element", "built_path"]

Builder = Callable[[Any, Site], Element]
"""Takes the table of its kind."""

BUILDERS: Mapping[str, Builder] = {
    "slab": build_basics.slab,
    "loss": build_basics.loss,
    "known orders": build_basics.known_orders,
    "pulse shaper": build_shaper.shaper,
    "lens": build_optics.lens,
    "waveplate": build_optics.waveplate,
    "wedge pair": build_optics.wedge_pair,
    "gas cell": build_optics.gas_cell,
    "grating pair": build_compressors.grating_pair,
    "stretcher": build_compressors.grating_pair,
    "prism pair": build_compressors.prism_pair,
    "grism pair": build_compressors.grism_pair,
    "chirped mirror": build_mirrors.chirped_mirror,
    "coating": build_mirrors.coating,
    "gires-tournois mirror": build_mirrors.gires_tournois,
}
"""A builder for each kind of element."""


def built_path(scenario: Scenario, media: MediaOfScenario, centre: float) -> Path:
    """Elements in order; centre: of the pulse, rad/s, about which known orders are counted."""
    elements = []
    for number, table in enumerate(scenario.content.path, start=1):
        site = Site(
            scenario=scenario,
            keys=("path", number - 1),
            number=str(number),
            centre=centre,
            beam_radius=scenario.content.pulse.beam_radius,
            find=media.medium,
        )
        try:
            elements.append(built_element(table, site))
        except PulsepropError as error:
            raise site.blamed(error) from None
    return Path(tuple(elements))


def built_element(table: ElementTable, site: Site) -> Element:
    """One element of any kind. Raises InputError without place where its settings do not fit."""
    if isinstance(table, RepeatTable):
        return build_optics.repeated(table, site, built_element)
    return BUILDERS[table.kind](table, site)
