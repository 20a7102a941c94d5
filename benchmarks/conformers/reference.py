"""For each SMILES of standard input: lowest MMFF94s energy (kcal/mol) of N relaxed RDKit conformers for two seeds, and the seconds each took.

reference.py N SEED SEED
"""
import sys
import time

from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem

RDLogger.DisableLog("rdApp.*")
count, *seeds = map(int, sys.argv[1:])
for line in sys.stdin:
    cells = []
    for seed in seeds:
        begin = time.perf_counter()
        molecule = Chem.AddHs(Chem.MolFromSmiles(line.strip()))
        AllChem.EmbedMultipleConfs(molecule, count, randomSeed=seed)
        relaxed = AllChem.MMFFOptimizeMoleculeConfs(molecule, maxIters=5000, mmffVariant="MMFF94s") if molecule.GetNumConformers() else []
        cells += [min((energy for _, energy in relaxed), default=float("nan")), time.perf_counter() - begin]
    print(*cells, flush=True)
