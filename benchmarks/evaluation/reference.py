"""MMFF94s energy and gradient with python3-rdkit at given coordinates: a structure as JSON on standard input; prints the energy in kcal/mol and the shortest
time of one evaluation in microseconds."""
import json
import sys
import time

from rdkit import Chem
from rdkit.Chem import AllChem as helpers
from rdkit.Geometry import Point3D

data = json.load(sys.stdin)
writable = Chem.RWMol()
for element, charge in zip(data["elements"], data["charges"]):
    atom = Chem.Atom(element)
    atom.SetFormalCharge(charge)
    atom.SetNoImplicit(True)
    writable.AddAtom(atom)
for a, b, order in data["bonds"]:
    writable.AddBond(a, b, [None, Chem.BondType.SINGLE, Chem.BondType.DOUBLE, Chem.BondType.TRIPLE][order])
conformer = Chem.Conformer(len(data["elements"]))
for n in range(len(data["elements"])):
    conformer.SetAtomPosition(n, Point3D(*data["x"][3 * n : 3 * n + 3]))
writable.AddConformer(conformer)
molecule = writable.GetMol()
Chem.SanitizeMol(molecule)
properties = helpers.MMFFGetMoleculeProperties(molecule, mmffVariant="MMFF94s")
# the threshold beyond which pairs are left out, far above any size here
field = helpers.MMFFGetMoleculeForceField(molecule, properties, nonBondedThresh=1e4)
x = data["x"]
energy = field.CalcEnergy(x)
best = float("inf")
until = time.perf_counter() + data["seconds"]
while time.perf_counter() < until:
    begin = time.perf_counter()
    for _ in range(5):
        field.CalcEnergy(x)
        field.CalcGrad(x)
    best = min(best, (time.perf_counter() - begin) / 5)
print(f"{energy:.10f} {best * 1e6:.3f}")
