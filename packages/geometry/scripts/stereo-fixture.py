"""Writes fixtures/stereo.sdf.gz: structures with stereo, drawn and embedded by python3-rdkit, each with the SMILES it was made from.

The SMILES are common natural products, drugs and textbook cases, and 40 of the NCI open set (public domain) with one stereoisomer chosen.
Run: /usr/bin/python3 packages/geometry/scripts/stereo-fixture.py NCI.smi
"""
import gzip
import sys
from pathlib import Path

from rdkit import Chem
from rdkit.Chem import AllChem
from rdkit.Chem.EnumerateStereoisomers import EnumerateStereoisomers, StereoEnumerationOptions

# D: drawn (2D with wedges), E: embedded (3D); ring double bonds come out cis in drawings
CASES = """
C[C@H](N)C(=O)O DE
OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O DE
F/C=C/Cl DE
F/C=C\\Cl DE
F/C(Cl)=C(/Br)I DE
C/C=N/O DE
C/C=N\\O DE
C/N=N/C DE
C[S@](=O)c1ccc(C)cc1 DE
C[S@@](=O)c1ccc(C)cc1 DE
C[S@+](CC)CCC DE
C[P@@](=O)(CC)OC DE
CC[N@+](C)(CCC)c1ccccc1 DE
C[C@H]1CC[C@@H](C)CC1 DE
C[C@H]1CC[C@H](C)CC1 DE
O[C@H]1[C@H](O)[C@@H](O)[C@H](O)[C@H](O)[C@@H]1O DE
C[C@H](F)[C@H](O)[C@@H](F)C DE
C[C@H](F)[C@@H](O)[C@@H](F)C DE
C1CC[C@H]2CCCC[C@H]2C1 DE
C1CC[C@H]2CCCC[C@@H]2C1 DE
C1CCC/C=C\\CC1 E
C1CC/C=C/CCCCCC/C=C\\C1 E
C[C@]12CC[C@H]3[C@@H](CC=C4C[C@@H](O)CC[C@]34C)[C@@H]1CC[C@@H]2O DE
CN1CC[C@]23c4c5ccc(O)c4O[C@H]2[C@@H](O)C=C[C@H]3[C@H]1C5 DE
CC1(C)S[C@@H]2[C@H](NC(=O)Cc3ccccc3)C(=O)N2[C@H]1C(=O)O DE
C[C@@H]1CC[C@H]2[C@@H](C)C(=O)O[C@@H]3O[C@@]4(C)CC[C@@H]1[C@@]23OO4 DE
C1[C@H]2CC[C@@H]1C=C2 DE
CC(C)(C)/C=C/[C@@H](O)/C=C\\C DE
C[C@H](/C=C/F)/C=C\\F DE
C[C@H](O)[2H] DE
N[C@@H](CC(=O)N)C(=O)N[C@@H](Cc1c[nH]c2ccccc12)C(=O)N1CCC[C@H]1C(=O)O DE
C[Si@](F)(Cl)CC DE
F[C@](Cl)(Br)I DE
C/C(=C\\c1ccccc1)C(=O)N/N=C/c1ccco1 DE
C[C@@H](O)[C@H](O)[C@H](O)C DE
C[C@H]1[C@H](C)[C@@H]1C DE
CN1[C@H]2CC[C@@H]1[C@@H](C(=O)OC)[C@@H](OC(=O)c1ccccc1)C2 DE
""".split("\n")


def main(nci):
    out = []
    cases = [line.split(" ") for line in CASES if line]
    structures = [line.split()[0] for line in open(nci)]
    for number, smiles in enumerate(structures):
        if len(cases) == 78:
            break
        molecule = Chem.MolFromSmiles(smiles)
        if molecule is None or "." in smiles or molecule.GetNumHeavyAtoms() > 24:
            continue
        isomer = next(iter(EnumerateStereoisomers(molecule, StereoEnumerationOptions(maxIsomers=1, rand=number))))
        text = Chem.MolToSmiles(isomer)
        # phosphates and imines of ammonia exchange a proton; the library leaves their stereo out
        if ("@" in text or "/" in text) and "P" not in text and "=N" not in text and "N=" not in text:
            cases.append([text, "DE"])
    for smiles, ways in cases:
        molecule = Chem.MolFromSmiles(smiles)
        for way in ways:
            if way == "D":
                AllChem.Compute2DCoords(molecule)
                out.append((smiles, Chem.MolToV3KMolBlock(molecule)))
                block = Chem.MolToMolBlock(molecule)
            else:
                full = Chem.AddHs(molecule)
                if AllChem.EmbedMolecule(full, randomSeed=7) != 0:
                    continue
                block = Chem.MolToMolBlock(full)
            out.append((smiles, block))
    text = "".join(f"{block}>  <SMILES>\n{smiles}\n\n$$$$\n" for smiles, block in out)
    path = Path(__file__).parent.parent / "fixtures" / "stereo.sdf.gz"
    path.write_bytes(gzip.compress(text.encode(), mtime=0))
    print(len(out), "records,", path.stat().st_size, "bytes")


main(sys.argv[1])
