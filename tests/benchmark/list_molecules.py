"""Writes SMILES of distinct benzenes with one to three groups of the tables, one a line, mixed.

list_molecules.py COUNT [SEED]
Groups are those of substituents.csv that nitrating acid leaves on the ring; a pattern of groups is written once,
whatever the place and direction in which one goes round the ring.
"""

import csv
import itertools
import random
import sys
from pathlib import Path

TABLES = Path(__file__).resolve().parents[2] / "tables"
GROUPS = """Me Et Pr iPr Bu tBu F Cl Br I OMe OEt OPr OPh OAc NHAc NHCOPh CF3 OCF3 SMe SO2Me SO2NH2 CO2H CO2Me CO2Et
CONH2 CN CHO COMe COPh CH2Cl CHCl2 CCl3 CH2CN CH2CO2Et OCHF2 SO2Ph COEt cPr cHex OBu sBu iBu NHMe NMe2""".split()
PLACES = [(0,), (0, 1), (0, 2), (0, 3), (0, 1, 2), (0, 1, 3), (0, 2, 4), (0, 1, 4)]


def one_way_round(ring):
    turns = [ring[i:] + ring[:i] for i in range(6)]
    return min(turns + [turn[::-1] for turn in turns])


def smiles_of(ring, groups):
    atoms = ["c" + (f"({groups[name][1:]})" if name else "") for name in ring]
    return atoms[0][:1] + "%99" + atoms[0][1:] + "".join(atoms[1:5]) + "c%99" + atoms[5][1:]


def main():
    count = int(sys.argv[1])
    with (TABLES / "substituents.csv").open(encoding="utf-8", newline="") as file:
        known = {row["id"]: row["smiles"] for row in csv.DictReader(file)}
    groups = {name: known[name] for name in GROUPS if known.get(name)}
    seen = set()
    for places in PLACES:
        for names in itertools.product(groups, repeat=len(places)):
            ring = [""] * 6
            for place, name in zip(places, names):
                ring[place] = name
            seen.add(one_way_round(tuple(ring)))
    rings = sorted(seen)
    random.Random(int(sys.argv[2]) if len(sys.argv) > 2 else 1).shuffle(rings)
    if len(rings) < count:
        sys.exit(f"only {len(rings)} distinct molecules")
    for ring in rings[:count]:
        print(smiles_of(ring, groups))


main()
