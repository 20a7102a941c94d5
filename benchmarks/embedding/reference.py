"""Embeds and relaxes each SMILES of standard input with RDKit; prints one line each: milliseconds to embed, to embed and relax."""
import sys
import time

from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem

RDLogger.DisableLog("rdApp.*")
for line in sys.stdin:
    molecule = Chem.AddHs(Chem.MolFromSmiles(line.strip()))
    begin = time.perf_counter()
    failed = AllChem.EmbedMolecule(molecule, randomSeed=1) != 0
    embedded = time.perf_counter()
    if not failed and AllChem.MMFFHasAllMoleculeParams(molecule):
        AllChem.MMFFOptimizeMolecule(molecule, mmffVariant="MMFF94s", maxIters=2000)
    relaxed = time.perf_counter()
    print("failed" if failed else "ok", 1000 * (embedded - begin), 1000 * (relaxed - begin), flush=True)
