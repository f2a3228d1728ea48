#!/usr/bin/env python3
"""Makes ground_levels.txt from tests/vectors/ground_levels_all_ions.csv and
tests/vectors/ground_configurations.csv.

    python3 core/data/generate.py

Along an isoelectronic sequence (constant number of electrons, growing Z) configuration, level,
status and references rarely change, so each of the four is stored as runs over Z:

    N|track|run run run ...          one line per sequence and track
    run = Z:value                    the value holds from Z up to the next run
    `-` as a value                   no entry from this Z on

Tracks: c configuration, l level as the source spells it (spaces dropped, `.` when blank), s status
(m measured, s semi-empirical, t theoretical, x extrapolated), r references (numbers, comma
separated, into the list of the first line).
"""

import csv
import pathlib

HERE = pathlib.Path(__file__).resolve().parent
VECTORS = HERE.parent.parent / "tests" / "vectors"


def table(name):
    with open(VECTORS / name, encoding="utf-8") as file:
        return list(csv.DictReader(line for line in file if not line.startswith("#")))


def main():
    entries = {}
    references = {}
    for row in table("ground_levels_all_ions.csv"):
        z, charge = int(row["Z"]), int(row["charge"])
        flags = (row["semi_empirical"], row["theoretical"])
        status = {("0", "0"): "m", ("1", "0"): "s", ("0", "1"): "t"}[flags]
        codes = [code for code in row["refs"].split(",") if code]
        for code in codes:
            references[code] = references.get(code, 0) + 1
        level = row["level_raw"].replace(" ", "") or "."
        entries[(z - charge, z)] = [row["shells"], level, status, codes]
    # Neutral atoms that the table of ions does not have: the element table's configuration, which
    # nobody has observed.
    for row in table("ground_configurations.csv"):
        z = int(row["Z"])
        if (z, z) not in entries:
            words = row["config_short"].split()
            words = [w[:-1] if w[-1] == "1" and w[-2].isalpha() else w for w in words]
            entries[(z, z)] = [".".join(words), ".", "x", []]

    order = sorted(references, key=lambda code: (-references[code], code))
    number = {code: str(index) for index, code in enumerate(order)}
    lines = [" ".join(order)]
    for electrons in sorted({n for n, _ in entries}):
        zs = range(electrons, 119)
        for track, column in zip("clsr", range(4)):
            runs, last = [], None
            for z in zs:
                entry = entries.get((electrons, z))
                if entry is None:
                    value = "-"
                elif track == "r":
                    value = ",".join(number[code] for code in entry[3]) or "."
                else:
                    value = entry[column]
                if value != last:
                    runs.append(f"{z}:{value}")
                    last = value
            lines.append(f"{electrons}|{track}|{' '.join(runs)}")
    (HERE / "ground_levels.txt").write_text("\n".join(lines) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
