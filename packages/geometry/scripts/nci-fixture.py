"""Writes fixtures/nci-counts.tsv: what python3-rdkit counts in the structures of nci.smi, line by line.

Columns: atoms and bonds with all hydrogens, formula.
Run: /usr/bin/python3 packages/geometry/scripts/nci-fixture.py packages/geometry/fixtures/nci.smi
"""
import sys
from pathlib import Path

from rdkit import Chem
from rdkit.Chem import rdMolDescriptors

lines = []
for line in open(sys.argv[1]):
    smiles = line.split()[0]
    molecule = Chem.MolFromSmiles(smiles)
    full = Chem.AddHs(molecule)
    lines.append("\t".join([str(full.GetNumAtoms()), str(full.GetNumBonds()), rdMolDescriptors.CalcMolFormula(molecule)]))
path = Path(__file__).parent.parent / "fixtures" / "nci-counts.tsv"
path.write_text("\n".join(lines) + "\n")
