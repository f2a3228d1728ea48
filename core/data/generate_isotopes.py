#!/usr/bin/env python3
"""Makes isotopes.txt from tests/vectors/isotopes.csv.

    python3 core/data/generate_isotopes.py

One line per element:

    Z A:mass:abundance:spin:g:Q A:mass:abundance:spin:g:Q ...

mass in millionths of u beyond A, abundance in percent, g in nuclear magnetons for each unit of spin, Q
in barn; empty where unknown, cut short where nothing follows. `*` behind a value: from the second
table. Nuclides that have neither an abundance nor a place in the second table are left out.
"""

import csv
import pathlib

HERE = pathlib.Path(__file__).resolve().parent
VECTORS = HERE.parent.parent / "tests" / "vectors"

# Ten times too large in the main table; the second table's value stands.
QUADRUPOLE_FROM_SECOND = {("S", 33), ("Cl", 36), ("K", 39), ("K", 40), ("K", 41)}
# The sign is wrong in the main table; the second table's value stands.
G_FROM_SECOND = {("Ag", 109)}
# The tables differ in the sign, and nothing decides between them.
G_IN_DOUBT = {("Ba", 133), ("Sm", 151)}
# The table has the ground state; what occurs in nature is an isomer of spin 9.
ISOMER = {("Ta", 180)}


def digits(value, count=7):
    return f"{float(value):.{count}g}" if value not in ("", "NaN") else ""


def isotope(row):
    key = (row["symbol"], int(row["A"]))
    mass = str(round((float(row["mass_u"]) - key[1]) * 1e6))
    abundance = digits(row["abundance_pct"])
    spin, g, quadrupole = row["spin"], digits(row["g_factor"]), digits(row["Q_barn"])
    if key in ISOMER:
        abundance, spin, g, quadrupole = digits(row["pt_abundance"]) + "*", "", "", ""
    if key in G_FROM_SECOND:
        g = digits(row["pyscf_g"]) + "*"
    if key in G_IN_DOUBT:
        g = ""
    if key in QUADRUPOLE_FROM_SECOND:
        quadrupole = digits(row["pyscf_Q_barn"]) + "*"
    if spin == "0":
        g, quadrupole = "", ""
    if spin == "1/2":
        quadrupole = ""
    fields = [str(key[1]), mass, abundance, spin, g, quadrupole]
    return ":".join(fields).rstrip(":")


def main():
    with open(VECTORS / "isotopes.csv", encoding="utf-8") as file:
        rows = list(csv.DictReader(line for line in file if not line.startswith("#")))
    elements = {}
    for row in rows:
        if row["abundance_pct"] or row["pyscf_spin"]:
            elements.setdefault(int(row["Z"]), []).append(isotope(row))
    lines = [f"{z} {' '.join(all)}" for z, all in sorted(elements.items())]
    (HERE / "isotopes.txt").write_text("\n".join(lines) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
