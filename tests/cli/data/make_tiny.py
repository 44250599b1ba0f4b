#!/usr/bin/env python3
# SPDX-License-Identifier: Apache-2.0
"""Writes tiny/*.csv: invented spectra of an invented mixture, for the tests of the program.

Two components (acid, water) in an ester; Gaussian bands, a sloping baseline, a little noise. Nothing was
measured. Same seed, same bytes: python3 make_tiny.py
"""
import math
import pathlib
import random

FOLDER = pathlib.Path(__file__).parent / "tiny"
AXIS = list(range(1600, 1805, 5))  # cm-1
RANDOM = random.Random(20240611)


def band(position, centre, width):
    return math.exp(-0.5 * ((position - centre) / width) ** 2)


def spectrum(acid, water, foreign=0.0, gain=1.0):
    offset, slope = RANDOM.gauss(0.02, 0.004), RANDOM.gauss(0.0, 2e-5)
    return [
        gain * (0.9 * band(v, 1738, 12) + 0.30 * acid * band(v, 1712, 14) + 0.35 * water * band(v, 1640, 22)
                + foreign * band(v, 1675, 8)) + offset + slope * (v - 1700) + RANDOM.gauss(0.0, 0.0006)
        for v in AXIS
    ]


def composition(i, n):
    """Acid rises over the samples, water jumps about, so that the two are hardly correlated."""
    return 0.10 + 1.80 * i / (n - 1), 0.05 + 0.90 * ((7 * i) % n) / (n - 1)


def write_rows(name, spectra):
    lines = ["spectrum," + ",".join(str(v) for v in AXIS)]
    lines += [key + "," + ",".join(f"{v:.5f}" for v in values) for key, values in spectra]
    (FOLDER / name).write_text("\n".join(lines) + "\n", encoding="utf-8")


def write_columns(name, spectra):
    """Transposed, with semicolons and decimal commas."""
    lines = ["wavenumber;" + ";".join(key for key, _ in spectra)]
    for j, v in enumerate(AXIS):
        lines.append(f"{v};" + ";".join(f"{values[j]:.5f}".replace(".", ",") for _, values in spectra))
    (FOLDER / name).write_text("\n".join(lines) + "\n", encoding="utf-8")


def replicates(sample, acid, water, count=2):
    return [(f"{sample}-r{r}", spectrum(acid, water)) for r in range(1, count + 1)]


def main():
    n = 20
    rows, columns, table = [], [], ["sample,batch,acid [wt%],water [wt%]"]
    for i in range(n):
        sample = f"S{i + 1:02d}"
        acid, water = composition(i, n)
        (rows if i < 10 else columns).extend(replicates(sample, acid, water))
        measured = ["" if sample in ("S04", "S17") else f"{water + RANDOM.gauss(0, 0.004):.3f}"]
        table.append(f"{sample},B{i % 4 + 1},{acid + RANDOM.gauss(0, 0.006):.3f},{measured[0]}")
    rows.append(("stray-r1", spectrum(1.0, 0.5)))
    table.append("S99,B1,1.000,0.500")
    write_rows("standards_1.csv", rows)
    write_columns("standards_2.csv", columns)
    (FOLDER / "standards.csv").write_text("\n".join(table) + "\n", encoding="utf-8")

    rows, table = [], ["sample,acid [wt%],water [wt%]"]
    for i in range(6):
        sample, acid, water = f"V{i + 1}", 0.2 + 0.3 * i, 0.1 + 0.15 * ((2 * i) % 6)
        rows += replicates(sample, acid, water)
        table.append(f"{sample},{acid + RANDOM.gauss(0, 0.006):.3f},{water + RANDOM.gauss(0, 0.004):.3f}")
    write_rows("validation_spectra.csv", rows)
    (FOLDER / "validation.csv").write_text("\n".join(table) + "\n", encoding="utf-8")

    write_rows("new_spectra.csv",
               replicates("good", 0.7, 0.4) + [("edge", spectrum(1.2, 0.4)), ("above", spectrum(1.6, 0.4)),
                                               ("beyond", spectrum(2.6, 0.4)), ("foreign", spectrum(0.7, 0.4, foreign=0.2)),
                                               ("strong", spectrum(0.7, 0.4, gain=2.4))])


if __name__ == "__main__":
    main()
