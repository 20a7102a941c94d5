"""Relaxed MMFF94s torsion scan with python3-rdkit: a job as JSON on standard input, the answer as JSON on standard output.

Each point starts from the one before, is minimised with a torsion constraint (forceTol 1e-4, energyTol 1e-6) until the minimiser says that it
has converged, and its energy is that without the constraint. With `turn`, its torsion is turned to the angle first; without, the constraint
alone pulls it there. `force` is the constraint's force constant, kcal/mol/degree^2. `seconds` is processor time, `off` the largest distance
of an angle from the one asked for, degrees.
"""
import json
import sys
import time

from rdkit import Chem
from rdkit.Chem import AllChem as helpers
from rdkit.Chem import rdMolTransforms
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
conformer = molecule.GetConformer()
properties = helpers.MMFFGetMoleculeProperties(molecule, mmffVariant="MMFF94s")
torsion = data["torsion"]
begin = time.process_time()
energies, geometries = [], []
off = 0.0
for angle in data["angles"]:
    if data["turn"]:
        rdMolTransforms.SetDihedralDeg(conformer, *torsion, angle)
    field = helpers.MMFFGetMoleculeForceField(molecule, properties)
    field.Initialize()
    field.MMFFAddTorsionConstraint(*torsion, False, angle, angle, data["force"])
    for _ in range(50):
        if field.Minimize(maxIts=200, forceTol=1e-4, energyTol=1e-6) == 0:
            break
    off = max(off, abs((rdMolTransforms.GetDihedralDeg(conformer, *torsion) - angle + 180) % 360 - 180))
    energies.append(helpers.MMFFGetMoleculeForceField(molecule, properties).CalcEnergy())
    geometries.append([value for point in conformer.GetPositions().tolist() for value in point])
print(json.dumps({"seconds": time.process_time() - begin, "off": off, "energies": energies, "geometries": geometries}))
