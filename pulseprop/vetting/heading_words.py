"""What headings call a column, in several languages and by symbol.

Words are compared without accents, capitals and signs. Symbols keep their capitals: T is a transmittance,
R a reflectance, A an absorbance. The word extinction is refused: it means k to a physicist, absorbance to a
chemist, and a molar coefficient to another.
"""

from __future__ import annotations

import re
import unicodedata
from functools import lru_cache
from typing import Literal, get_args

from pulseprop.vetting.table import Quantity

__all__ = [
    "AXES",
    "QUANTITIES",
    "Axis",
    "Meaning",
    "is_attenuation",
    "is_extinction",
    "is_generic",
    "is_molar",
    "meaning_of",
    "plain_words",
]

Axis = Literal["wavelength", "frequency", "wavenumber", "photon_energy"]
Meaning = Axis | Quantity
AXES: tuple[Axis, ...] = get_args(Axis)
QUANTITIES: tuple[Quantity, ...] = get_args(Quantity)

EXTINCTION = re.compile(
    r"\b(extin[ck]t|ext(inct)? coef|extincao|extincion|estinzione|ekstin[ck]|экстинкц|消光)"
)
MOLAR = re.compile(
    r"\b(molar(e[rsn]?)?|molaire|molair) .*(abs|att|koeff)|\bl mol( 1)? cm\b|\b[cm]?m ?2 mol\b"
    r"|\bm 1 cm 1\b|\b1 m cm\b|\babsorption cross sections?\b|\babsorptionsquerschnitt"
)
"""Absorption per amount of substance, by its name or its unit, in plain words."""
GENERIC = re.compile(r"|[xyz][0-9]?|(col(umn)?|spalte|data|value|values|wert|y axis|x axis|series) ?[0-9]*")
ATTENUATION = re.compile(r".*\b(absorption|attenuation|absorbtion|dampfung|assorbimento|absorcion)\b.*")

SYMBOLS: dict[str, Meaning] = {
    "λ": "wavelength", "λ0": "wavelength", "λvac": "wavelength", "λair": "wavelength", "wl": "wavelength",
    "WL": "wavelength", "ν": "frequency", "f": "frequency", "ω": "frequency", "ν̃": "wavenumber",
    "E": "photon_energy", "hν": "photon_energy", "hv": "photon_energy", "ħω": "photon_energy",
    "n": "n", "N": "n", "no": "n", "ne": "n", "nx": "n", "ny": "n", "nz": "n", "nα": "n", "nβ": "n",
    "nγ": "n", "nrel": "n", "nabs": "n", "nair": "n", "nvac": "n", "Re(n)": "n", "Ren": "n",
    "k": "k", "K": "k", "κ": "k", "ko": "k", "ke": "k", "kx": "k", "ky": "k", "kz": "k", "Im(n)": "k",
    "Imn": "k", "α": "alpha", "μa": "alpha", "A": "absorbance", "A10": "absorbance", "OD": "absorbance",
    "Ae": "napierian", "ln(1/T)": "napierian", "-ln(T)": "napierian", "-lnT": "napierian",
    "log(1/T)": "absorbance", "log10(1/T)": "absorbance", "-log10(T)": "absorbance", "T": "transmittance",
    "T%": "transmittance", "%T": "transmittance", "Ti": "internal_transmittance",
    "Tint": "internal_transmittance", "τi": "internal_transmittance", "τ": "transmittance",
    "R": "reflectance", "%R": "reflectance", "R%": "reflectance", "ρ": "reflectance", "ng": "group_index",
    "Ng": "group_index", "ngr": "group_index", "k2": "gvd", "β2": "gvd", "k''": "gvd", "β3": "tod",
    "k3": "tod", "GD": "group_delay", "τg": "group_delay", "φ": "phase", "φ''": "gdd",
}  # fmt: skip

WORDS: dict[Meaning, tuple[str, ...]] = {
    "wavelength": (
        r"((vac(uum)?|air|vakuum|luft) )?wave ?lengths?( (in )?(vac(uum)?|air))?",
        r"((vakuum|luft) ?)?wellenlangen?( in (vakuum|luft))?",
        r"longueurs? d ?onde( (dans le vide|dans l air))?",
        r"longitud(es)? de onda|lunghezz[ae] d ?onda|comprimento de onda",
        r"golflengte|vaglangd|bolg(el)?(a|ae)ngde|dlugosc fali|vlnova delka|dalga boyu",
        r"длина волны|波長|波长|lambda|lam|wl|wvl|wave",
    ),
    "wavenumber": (
        r"wave ?numbers?|wellenzahl(en)?|nombres? d ?onde|numeros? d[ei] ?onda|golfgetal",
        r"волновое число|波数",
    ),
    "frequency": (
        r"(optical |angular )?freq(uenc(y|ies))?|(kreis)?frequenz(en)?|frequences?|frecuencias?",
        r"frequenze?|frequencia|frequentie|frekvens|nu|omega|частота|周波数|频率",
    ),
    "photon_energy": (
        r"(photon )?energ(y|ies|ie|ia|ien|ias)|photonen(e|en)?energie|photonenergie",
        r"energie d(u|es) photons?|energia d(el|ei) foton[ei]?|энергия",
    ),
    "group_index": (
        r"group (refractive )?index( ng?| n g)?|gruppen(brech(ungs)?)?(index|zahl)",
        r"indice de groupe|indice de grupo|indice di gruppo|n group",
    ),
    "gvd": (r"gvd|group velocity dispersion|gruppengeschwindigkeitsdispersion|beta ?2",),
    "gdd": (r"gdd|group delay dispersion|gruppenlaufzeitdispersion",),
    "mirror_tod": (r"mirror tod",),
    "tod": (r"tod|third order dispersion|beta ?3",),
    "group_delay": (r"gd|group delay|gruppenlaufzeit|retard de groupe|temps de groupe|retardo de grupo",),
    "phase": (r"(spectral )?(phase|phi|fase)",),
    "internal_transmittance": (
        r"internal (transmittance|transmission)( tau i| ti?)?|reintransmission(sgrad)?",
        r"transmission interne|facteur de transmission interne|transmi(tancia|sion) interna",
        r"trasmi(ttanza|ssione) interna|tau i|t int",
        r"(transmittance|transmission) (without|excluding) reflection( loss(es)?)?",
    ),
    "transmittance": (
        r"(external |total |percent )?(transmittance|transmission|transmissivity)( (in )?percent)?",
        r"trans|transmissionsgrad|transmissie|transmi(tancia|sion)|trasmi(ttanza|ssione)",
        r"facteur de transmission|durchlassigkeit|пропускание|透過率|透过率",
    ),
    "reflectance": (
        r"(percent )?(reflectance|reflectivity|reflection)|refl|reflexionsgrad|reflexion",
        r"reflektivitat|facteur de reflexion|reflectancia|riflettanza|отражение|反射率",
    ),
    "napierian": (r"napierian( absorbance)?|optical depth|optische tiefe|profondeur optique|ln 1 t",),
    "absorbance": (
        r"(decadic |decimal )?(absorbance|absorbanz|absorbancia|assorbanza|absorbantie)|abs|od",
        r"optical density|optische dichte|densite optique|densidad optica|densita ottica",
        r"поглощение|吸光度",
    ),
    "alpha": (
        r"(linear |napierian )?(absorption|attenuation) (coefficient|coeff|coef)( alpha)?|alpha",
        r"absorptionskoeffizient|dampfung(skoeffizient)?|schwachungskoeffizient|absorptivity",
        r"coefficient d ?(absorption|attenuation)|coeficiente de absorcion",
        r"coefficiente di assorbimento|loss(es)?",
    ),
    "k": (
        r"kappa|absorption index|absorptionsindex|indice d ?absorption|k ?(value)?",
        r"im(aginary)?( part)?( of)? (the )?(refractive )?(index|n)",
    ),
    "n": (
        r"(real |absolute |relative )?(refractive )?ind(ex|ices)( of refraction)?( n)?",
        r"refr index|ri|rindex|n ?(value)?|re(al)?( part)?( of)? (the )?(refractive )?(index|n)",
        r"brech(ungs)?(index|zahl)( n)?|brechungsindizes|brekingsindex|brytningsindex",
        r"indice de refra(ction|ccion|cao)( n)?|indice di rifrazione( n)?",
        r"wspolczynnik zalamania|index lomu|показатель преломления|屈折率|折射率",
        r"n (o|e|x|y|z|d|abs|rel|air|vac|ord|ordinary|ext|extraordinary)",
    ),
}
"""What a heading's words, made plain, may be; the first that fits is taken."""

PATTERNS = {meaning: re.compile("|".join(phrases)) for meaning, phrases in WORDS.items()}


@lru_cache(maxsize=4096)
def meaning_of(words: str) -> Meaning | None:
    """The axis or quantity that a heading, its unit taken off, calls by name; None where it is not known."""
    symbol = re.sub(r"[\s_{}$\\^*]", "", words.replace("lambda", "λ").replace("Lambda", "λ"))
    if symbol in SYMBOLS:
        return SYMBOLS[symbol]
    plain = plain_words(words)
    return next((meaning for meaning, pattern in PATTERNS.items() if pattern.fullmatch(plain)), None)


def is_extinction(words: str) -> bool:
    """Whether the ambiguous word extinction, in any language, stands here."""
    return EXTINCTION.search(plain_words(words)) is not None


def is_molar(words: str) -> bool:
    """Whether absorption per amount of substance is named: it needs the concentration."""
    return MOLAR.search(plain_words(words)) is not None


def is_attenuation(words: str) -> bool:
    """Whether absorption or attenuation is named without saying which quantity; the unit may tell."""
    return ATTENUATION.fullmatch(plain_words(words)) is not None


def is_generic(words: str) -> bool:
    """Whether a heading says nothing about the column: x, y, value, column 2."""
    return GENERIC.fullmatch(plain_words(words)) is not None


@lru_cache(maxsize=4096)
def plain_words(text: str) -> str:
    """Lower case, without accents; every other sign a space."""
    spread = unicodedata.normalize("NFKD", text).casefold().replace("λ", " lambda ").replace("ł", "l")
    letters = "".join(sign if sign.isalnum() else " " for sign in spread if not unicodedata.combining(sign))
    return " ".join(letters.split())
