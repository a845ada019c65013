"""Writes the invented vendors' sheets of Larkmoor Bench, an invented laboratory, beside this file.

    python scenarios/sheets/make_sheets.py [FOLDER]

Every number comes from a closed form that stands here in full, rounded as a vendor would print it, with a
noise that is the same at every run. Nothing was measured by anyone, and no vendor made any of it. What is
wrong in a sheet was put there, and stands here too.
"""

from __future__ import annotations

import math
import random
import sys
from collections.abc import Iterable, Iterator
from pathlib import Path

__all__ = ["FILES", "write_all"]

LIGHT = 299.792458
"""nm/fs."""

INVENTED = "Larkmoor Bench (an invented laboratory): invented data, measured by nobody"

SILICA = ((0.6961663, 0.0684043**2), (0.4079426, 0.1162414**2), (0.8974794, 9.896161**2))
"""Fused silica: strength and squared resonance, um^2 (I. H. Malitson, J. Opt. Soc. Am. 55, 1205, 1965)."""

FLINT = ((1.5200, 0.01190), (0.2300, 0.05400), (1.0500, 110.0))
"""An invented flint glass."""

CROWN = ((1.0450, 0.00610), (0.2260, 0.02030), (1.0000, 103.0))
"""An invented crown glass."""

MISPRINTED = (600, "1.68946")
"""A row of the flint and what is printed there: two digits of its index have changed places."""

MIRROR_GDD, MIRROR_TOD, MIRROR_RIPPLE, MIRROR_SWING = -40.0, -28.0, 6.0, 22.0
"""A bounce at 800 nm, fs^2 and fs^3; size of the ripple of its GDD, fs^2, and its swing, fs."""

DYES = ((1.26e-3, 2.730, 0.120), (6.0e-4, 4.280, 0.200))
"""Dyes of the filter: k at the peak, its place in rad/fs, and w of exp(-(d/w)^2) in rad/fs."""

FILTER_MM = 0.25

CELL = (4.2, 3.365, 0.130)
"""Dye in a cell: absorbance at the peak, its place and w as above."""

STRAY = 1e-3
"""Share of stray light in the instrument that recorded the cell: no absorbance above 3.0 is seen."""


def noise(seed: int) -> Iterator[float]:
    """Even noise between -1 and 1."""
    source = random.Random(seed)
    while True:
        yield 2 * source.random() - 1


def index(terms: Iterable[tuple[float, float]], wavelength_nm: float) -> float:
    """Index of a formula of Sellmeier's form."""
    square = (wavelength_nm * 1e-3) ** 2
    return math.sqrt(1 + sum(strength * square / (square - place) for strength, place in terms))


def band(peak: float, place: float, width: float, wavelength_nm: float) -> float:
    """A Gaussian band over frequency, odd as k is."""
    omega = 2 * math.pi * LIGHT / wavelength_nm
    return peak * (math.exp(-(((omega - place) / width) ** 2)) - math.exp(-(((omega + place) / width) ** 2)))


def window_lot() -> str:
    """Index of fused silica to 2e-5, as a program with decimal commas writes it."""
    rattle = noise(21)
    lines = [f"# {INVENTED}", "# Los B, Fenster 3 mm, 20 °C", "Wellenlänge [nm];Brechzahl n"]
    for wavelength in range(400, 1601, 25):
        value = index(SILICA, wavelength) + 2e-5 * next(rattle)
        lines.append(f"{wavelength};{value:.5f}".replace(".", ","))
    return "\n".join(lines) + "\n"


def flint_lot() -> str:
    """Index of the flint; one row is misprinted."""
    lines = [f"# {INVENTED}", "wavelength_um\tn"]
    for wavelength in range(420, 1101, 20):
        wrong = wavelength == MISPRINTED[0]
        value = MISPRINTED[1] if wrong else f"{index(FLINT, wavelength):.5f}"
        lines.append(f"{wavelength / 1e3:.3f}\t{value}")
    return "\n".join(lines) + "\n"


def mirror_rows() -> Iterator[tuple[float, float, float, float]]:
    """Wavelength (nm), R (%), group delay (fs) and GDD (fs^2) of one bounce."""
    rattle = noise(22)
    for wavelength in range(700, 921, 5):
        away = 2 * math.pi * LIGHT * (1 / wavelength - 1 / 800)
        ripple = MIRROR_RIPPLE * math.cos(MIRROR_SWING * away)
        delay = 60 + MIRROR_GDD * away + MIRROR_TOD * away**2 / 2
        delay += MIRROR_RIPPLE * math.sin(MIRROR_SWING * away) / MIRROR_SWING
        reflected = 99.87 - 0.35 * math.exp((700 - wavelength) / 9) + 0.02 * next(rattle)
        gdd = MIRROR_GDD + MIRROR_TOD * away + ripple
        yield float(wavelength), round(reflected, 2), round(delay, 2), round(gdd, 1)


def write_mirror_lot(path: Path) -> None:
    """A workbook, two lines of heading above the numbers."""
    from openpyxl import Workbook

    book = Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.title = "lot A"
    sheet.append([INVENTED])
    sheet.append(["mirror lot A, 5 deg, p-polarised, one bounce"])
    sheet.append(["wavelength (nm)", "R (%)", "GD (fs)", "GDD (fs^2)"])
    for row in mirror_rows():
        sheet.append(list(row))
    book.save(path)


def filter_spectrum() -> str:
    """Decadic absorbance of a thin section of a green filter, as JCAMP-DX 4.24."""
    places = range(380, 901, 4)
    values = [
        sum(4 * math.pi * band(*dye, place) / place * FILTER_MM * 1e6 for dye in DYES) / math.log(10)
        for place in places
    ]
    rows = [
        f"{places[at]} " + " ".join(f"{round(value * 1e4)}" for value in values[at : at + 8])
        for at in range(0, len(places), 8)
    ]
    head = {
        "TITLE": "green filter, thin section",
        "JCAMP-DX": "4.24",
        "DATA TYPE": "UV/VIS SPECTRUM",
        "ORIGIN": INVENTED,
        "OWNER": "nobody",
        "PATHLENGTH": f"{FILTER_MM / 10:g}",
        "RESOLUTION": "2",
        "XUNITS": "NANOMETERS",
        "YUNITS": "ABSORBANCE",
        "XFACTOR": "1",
        "YFACTOR": "0.0001",
        "FIRSTX": f"{places[0]}",
        "LASTX": f"{places[-1]}",
        "FIRSTY": f"{round(values[0] * 1e4) / 1e4:.4f}",
        "NPOINTS": f"{len(places)}",
        "XYDATA": "(X++(Y..Y))",
    }
    lines = [f"##{label}= {value}" for label, value in head.items()]
    return "\n".join([*lines, *rows, "##END="]) + "\n"


def dye_cell() -> str:
    """Absorbance of a strong dye in a cell of 1 mm: stray light hides what lies above 3."""
    rattle = noise(23)
    lines = [f"# {INVENTED}", "# cell 1 mm, against the solvent", "nm    A"]
    for wavelength in range(440, 721, 4):
        passed = 10 ** -band(*CELL, wavelength)
        seen = -math.log10((passed + STRAY) / (1 + STRAY)) + 3e-4 * next(rattle)
        lines.append(f"{wavelength}   {max(seen, 0.0):.4f}")
    return "\n".join(lines) + "\n"


def crown_certificate() -> str:
    """Numbers of the crown; the GVD said to be that at 800 nm is the one at 1064 nm."""
    d, f, c = (index(CROWN, line) for line in (587.5618, 486.1327, 656.2725))
    wrong = gvd(CROWN, 1064)
    values = [
        ("n_d", f"{d:.5f}", ""),
        ("n_F", f"{f:.5f}", ""),
        ("n_C", f"{c:.5f}", ""),
        ("V_d", f"{(d - 1) / (f - c):.2f}", ""),
        ("index", f"{index(CROWN, 1064):.5f}", "1064 nm"),
        ("gvd", f"{wrong:.1f} fs^2/mm", "800 nm"),
    ]
    rows = [
        f'    {{ quantity = "{name}", value = "{value}"' + (f', at = "{at}"' if at else "") + " },"
        for name, value, at in values
    ]
    return "\n".join(
        [
            f"# {INVENTED}",
            "[certificate]",
            'name = "Larkmoor crown 1"',
            'temperature = "20 degC"',
            'transparent = ["380 nm", "1.8 um"]',
            f'source = "{INVENTED}"',
            "values = [",
            *rows,
            "]",
        ]
    )


def gvd(terms: Iterable[tuple[float, float]], wavelength_nm: float) -> float:
    """lambda^3 / (2 pi c^2) d2n/dlambda2, fs^2/mm: the second difference of so smooth an index will do."""
    terms, step = tuple(terms), 1.0
    values = [index(terms, wavelength_nm + shift) for shift in (-step, 0.0, step)]
    bend = (values[0] - 2 * values[1] + values[2]) / step**2
    return wavelength_nm**3 * bend / (2 * math.pi * LIGHT**2) * 1e6


def crown_formula() -> str:
    """Constants of the crown; the second resonance was printed as a length and is called a square."""
    rows = []
    for number, (strength, square) in enumerate(CROWN):
        printed = math.sqrt(square) if number == 1 else square
        rows.append(f'    {{ strength = {strength:.4f}, resonance_squared = "{printed:.6g} um^2" }},')
    d, f, c = (index(CROWN, line) for line in (587.5618, 486.1327, 656.2725))
    return "\n".join(
        [
            f"# {INVENTED}",
            'name = "Larkmoor crown 1"',
            "check = [",
            f'    {{ quantity = "n_d", value = "{d:.5f}" }},',
            f'    {{ quantity = "V_d", value = "{(d - 1) / (f - c):.2f}" }},',
            "]",
            "",
            "[formula]",
            'kind = "sellmeier"',
            'valid = ["400 nm", "1.6 um"]',
            f'source = "{INVENTED}"',
            "terms = [",
            *rows,
            "]",
        ]
    )


FILES = {
    "window_lot.csv": window_lot,
    "flint_lot.tsv": flint_lot,
    "green_filter.jdx": filter_spectrum,
    "dye_cell.txt": dye_cell,
    "crown_certificate.toml": crown_certificate,
    "crown_formula.toml": crown_formula,
}


def write_all(folder: Path) -> None:
    """Write every file into the folder."""
    for name, text in FILES.items():
        (folder / name).write_text(text().rstrip() + "\n", encoding="utf-8", newline="\n")
    write_mirror_lot(folder / "mirror_lot.xlsx")


if __name__ == "__main__":
    write_all(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent)
