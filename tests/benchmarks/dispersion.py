"""Largest relative error over every published dispersion row.

python -m tests.benchmarks.dispersion
"""

from __future__ import annotations

import json
from pathlib import Path

import numpy as np

SHARED = Path(__file__).parents[2] / "shared"
COLUMNS = {
    "n": ("index", 1.0),
    "n_g": ("group_index", 1.0),
    "GVD_fs2_per_mm": ("gvd", 1e27),
    "TOD_fs3_per_mm": ("tod", 1e42),
    "FOD_fs4_per_mm": ("fod", 1e57),
}


def main() -> None:
    from pulseprop.material.catalogue_media import catalogue_medium

    data = json.loads((SHARED / "published_dispersion.json").read_text(encoding="utf-8"))
    worst = dict.fromkeys(COLUMNS, (0.0, ""))
    rows = 0
    for entry in data["media"]:
        for nm, row in entry["rows"].items():
            rows += 1
            orders = catalogue_medium(entry["medium"]).orders(2 * np.pi * 299792458.0 / (float(nm) * 1e-9))
            for column, (name, scale) in COLUMNS.items():
                error = abs(getattr(orders, name) * scale / row[column] - 1)
                worst[column] = max(worst[column], (error, f"{entry['medium']} at {nm} nm"))
    print(f"{rows} rows; largest relative error (allowed: 1e-9 for n, n_g, GVD; 1e-8 for TOD, FOD)")
    for column, (error, where) in worst.items():
        print(f"  {column:16s} {error:.1e}  {where}")


if __name__ == "__main__":
    main()
