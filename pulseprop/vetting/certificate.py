"""Printed numbers alone: an index here and there, an Abbe number, a GVD. Can they be true together, are they
those of the medium named, and what do they guarantee?"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from pulseprop.constants import TWO_PI_C
from pulseprop.errors import NumericalLimit
from pulseprop.material.catalogue import record
from pulseprop.vetting.certificate_catalogue import against_catalogue
from pulseprop.vetting.certificate_conflict import conflict_of
from pulseprop.vetting.certificate_follow import ROOM, contradictions, implied_by, involved_in
from pulseprop.vetting.certificate_functionals import Order, Term
from pulseprop.vetting.certificate_medium import Claim, claim_of
from pulseprop.vetting.certificate_proof import Printed
from pulseprop.vetting.certificate_rows import ABBE_ABOVE, ABBE_BELOW, INDICES, ORDERS, proof_of
from pulseprop.vetting.certificate_values import Certificate, PrintedValue
from pulseprop.vetting.request import Request
from pulseprop.vetting.requirement import read_requirement
from pulseprop.vetting.requirement_answer import FS2_PER_MM, FS3_PER_MM, material_answer
from pulseprop.vetting.requirement_quantities import LINE_C, LINE_F
from pulseprop.vetting.result import Bounds, Finding, ImpliedUncertainty, RequirementAnswer, Vetted
from pulseprop.vetting.told import PLEASE, Stamp, first_sentence, told, verdict_of

__all__ = ["judge_certificate"]

Band = tuple[float, float]

BESIDE = 1.25
"""So much beyond the first and last printed wavelength a material is taken as transparent where nothing else
is known."""
FEWEST = 2
"""Numbers below which there is nothing to compare."""

UNCERTIFIED = (
    "The factor is the optimum of a linear programme over close places where the material may absorb; how "
    "much all places between would change it is not certified.",
)
BLIND = (
    "a common factor on chi, a constant of 0 or more added to n, and an index against air taken for one "
    "against vacuum leave every test of causality as it is",
)


def judge_certificate(certificate: Certificate, request: Request, *, date: str, version: str) -> Vetted:
    """Raises InputError for a requirement or a claimed medium that cannot be read, NumericalLimit where a
    programme is not solved."""
    if request.claimed is not None:
        record(request.claimed)  # a name stated by option must be one
    claim = claim_of(
        request.claimed or certificate.name,
        certificate.orientation,
        [value.omega for value in certificate.values],
        certificate.relative_to,
    )
    band, guessed = _band(certificate, request, claim)
    values = [
        value for value in certificate.values if value.value != 0 or value.quantity in ("gvd", "tod", "fod")
    ]
    proof, trouble = _proof(values, band)
    findings = (*_findings(certificate, claim, values, proof, band), *trouble)
    factor = proof.least_factor.factor if proof is not None else None
    stated = all(value.stated for value in values)
    holds = proof is not None and (not guessed or _holds_without_guess(certificate, values))
    proven = (
        proof is not None
        and proof.least_factor.factor > 1
        and holds
        and all(value.stated for value in involved_in(values, proof))
    )
    repaired = any(finding.code == "does-not-follow" and finding.repair for finding in findings)
    at = _Guaranteed(proof, stated)
    return told(
        file=certificate.file,
        sha256=certificate.sha256,
        stamp=Stamp(date=date, version=version),
        what=_what(certificate, claim),
        verdict=verdict_of(findings, proven=proven, mended=factor if repaired and holds else None),
        headline=_headline(certificate, findings, factor),
        findings=findings,
        sentence=_sentence(findings),
        factor=factor,
        stated=stated,
        implied=_implied(values, factor),
        conflict=conflict_of(values, proof) if proof is not None else (),
        bounds=tuple(at(omega) for omega in request.at),
        requirements=tuple(_required(text, at) for text in request.require),
        inferred=(*guessed, *_from_digits(values)),
        assumptions=(
            f"Between {_nm(band[1])} and {_nm(band[0])} nm the material absorbs nothing.",
            "Zeros that end a whole number are taken as holding the place only.",
            *(UNCERTIFIED if proof is not None else ()),
        ),
        blind_spots=BLIND,
    )


def _proof(values: Sequence[PrintedValue], band: Band) -> tuple[Printed | None, tuple[Finding, ...]]:
    """The numbers against all materials; None for a single one, or where the solver fails, which is told."""
    if len(values) < FEWEST:
        return None, ()
    try:
        proof = proof_of(values, band)
        proof.least_factor  # noqa: B018  (solved here, where a failure can be told)
    except NumericalLimit as failure:
        return None, (Finding(code="not-compared", severity="error", text=str(failure)),)
    return proof, ()


class _Guaranteed:
    """Bounds by frequency from the numbers of a certificate."""

    def __init__(self, proof: Printed | None, stated: bool) -> None:
        self._proof, self._stated = proof, stated

    @property
    def reason(self) -> str:
        """Why there are none; empty where there are."""
        if self._proof is None:
            return "a single number, or numbers that cannot be compared, guarantee nothing of another"
        if self._stated and self._proof.least_factor.factor > 1:
            return "the numbers contradict each other within their uncertainties, so they guarantee nothing"
        return ""

    def __call__(self, omega: float) -> Bounds:
        """Bounds at omega, rad/s."""
        proof, reason = self._proof, self.reason
        if proof is not None and not reason and not proof.band[0] < omega < proof.band[1]:
            reason = "outside the transparent band"
        if proof is None or reason:
            return Bounds(wavelength_nm=TWO_PI_C / omega * 1e9, reason=reason)
        found = {order: _interval(proof, order, omega) for order in ("index", "group index", "gvd", "tod")}
        return Bounds(
            wavelength_nm=TWO_PI_C / omega * 1e9,
            index=found["index"],
            group_index=found["group index"],
            gvd_fs2_per_mm=_in(found["gvd"], FS2_PER_MM),
            tod_fs3_per_mm=_in(found["tod"], FS3_PER_MM),
            reason="" if all(found.values()) else "the numbers do not limit what is left open",
        )

    def abbe(self) -> tuple[float, float] | None:
        """Bounds of V_d."""
        if self._proof is None or self.reason:
            return None
        return self._proof.ratio_interval(ABBE_ABOVE, ABBE_BELOW, _factor(self._proof))


def _factor(proof: Printed) -> float:
    return max(1.0, proof.least_factor.factor * ROOM)


def _interval(proof: Printed, order: Order, omega: float) -> tuple[float, float] | None:
    found = proof.interval((Term(order=order, omega=omega),), _factor(proof))
    more = 1.0 if order in INDICES else 0.0
    return None if found is None else (found[0] + more, found[1] + more)


def _in(interval: tuple[float, float] | None, unit: float) -> tuple[float, float] | None:
    return None if interval is None else (interval[0] / unit, interval[1] / unit)


def _required(text: str, at: _Guaranteed) -> RequirementAnswer:
    return material_answer(read_requirement(text), at, abbe=at.abbe)


def _from_digits(values: Sequence[PrintedValue]) -> Iterator[dict[str, str]]:
    open_ones = [value.words for value in values if not value.stated]
    if open_ones:
        yield {
            "about": "uncertainties",
            "taken": "half a unit of the last printed place",
            "why": f"not stated: {', '.join(open_ones)}",
            "overrule": 'uncertainty = "…" beside the value in the file',
        }


def _band(certificate: Certificate, request: Request, claim: Claim) -> tuple[Band, list[dict[str, str]]]:
    """The transparent band: as stated, the range of the medium named, or a little more than the numbers."""
    places = _places(certificate)
    low, high = min(places), max(places)
    stated = request.transparent or certificate.transparent
    if stated is not None:
        return (min(low, stated[0]), max(high, stated[1])), []
    if claim.media:
        bands = [medium.band for medium in claim.media]
        return (min(low, max(band.low for band in bands)), max(high, min(band.high for band in bands))), []
    band = low / BESIDE, high * BESIDE
    return band, [
        {
            "about": "transparent band",
            "taken": f"{_nm(band[1])} to {_nm(band[0])} nm",
            "why": "not stated: a quarter more than the printed wavelengths on either side",
            "overrule": 'transparent = ["300 nm", "2.5 um"] in the file',
        }
    ]


def _holds_without_guess(certificate: Certificate, values: Sequence[PrintedValue]) -> bool:
    """Whether the numbers contradict each other even if the material absorbs just beyond the last of them."""
    places = _places(certificate)
    return len(values) >= FEWEST and proof_of(values, (min(places), max(places))).least_factor.factor > 1


def _places(certificate: Certificate) -> list[float]:
    """Where something is printed, rad/s; of V_d its three lines."""
    places = [value.omega for value in certificate.values]
    abbe = any(value.quantity == "V_d" for value in certificate.values)
    return places + ([LINE_F, LINE_C] if abbe else [])


def _findings(
    certificate: Certificate, claim: Claim, values: Sequence[PrintedValue], proof: Printed | None, band: Band
) -> Iterator[Finding]:
    if proof is not None and proof.least_factor.factor > 1:
        yield from contradictions(values, proof, band)
    yield from against_catalogue(certificate.values, claim.media)
    yield from claim.findings
    if proof is not None and proof.least_factor.factor <= 1:
        yield from _follows(values, band)


def _follows(values: Sequence[PrintedValue], band: Band) -> Iterator[Finding]:
    """What the other numbers say of each that can follow from them."""
    parts = []
    for value in values:
        rest = [other for other in values if other is not value]
        if value.quantity not in ("V_d", *ORDERS) or ORDERS.get(value.quantity) == "index" or not rest:
            continue
        implied = implied_by(proof_of(rest, band), value)
        if implied is not None:
            low, high = (value.in_unit(end) for end in implied)
            parts.append(f"{value.words} {low:.5g} to {high:.5g} (printed {value.text})")
    if parts:
        yield Finding(
            code="follows",
            severity="note",
            text=f"The other numbers guarantee: {'; '.join(parts)}.",
        )


def _implied(values: Sequence[PrintedValue], factor: float | None) -> ImpliedUncertainty:
    """Of the index: the factor times the largest of its errors."""
    errors = [value.error for value in values if ORDERS.get(value.quantity) == "index"]
    return ImpliedUncertainty(n=None if factor is None or not errors else factor * max(errors), k=None)


def _what(certificate: Certificate, claim: Claim) -> str:
    named = f" of {certificate.name}" if certificate.name else ""
    compared = " or ".join(f"{medium.name} ({medium.source})" for medium in claim.media)
    count = len(certificate.values)
    text = f"{count} printed number{'s' * (count > 1)}{named}"
    return text + (f", compared with the catalogue's {compared}." if compared else ".")


def _headline(certificate: Certificate, findings: Sequence[Finding], factor: float | None) -> str:
    grave = [finding for finding in findings if finding.severity == "error"]
    if grave:
        return first_sentence(grave[0].text)
    if factor is None:
        return "a single number cannot contradict itself; see what it was compared with."
    count = len(certificate.values)
    return f"the {count} printed numbers can be true together (uncertainty factor {factor:.2g})."


def _sentence(findings: Sequence[Finding]) -> str | None:
    """Of numbers that contradict each other the one that does not follow; None where nobody can say which."""
    alone = next((one for one in findings if one.code == "does-not-follow" and one.severity == "error"), None)
    return None if alone is None else f"Your numbers contradict each other. {alone.text} {PLEASE}"


def _nm(omega: float) -> str:
    return f"{TWO_PI_C / omega * 1e9:.5g}" if omega > 0 else "infinity"
