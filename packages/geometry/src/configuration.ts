/** The configuration of a structure whose geometry is given. */
import { type Coordinates, type Molecule, neighboursOf, type StereoTable } from './molecule.js';
import { completeStereo, possibleStereo } from './stereo.js';
import { perceiveStereo } from './stereo-perception.js';

/** Rounds in which configurations just read may make others real; more than three levels of dependence are not known. */
const ROUNDS = 8;

/**
 * The stereo table of a molecule as its coordinates (angstrom, 3 per atom) state it, whatever `molecule.stereo` holds: what the same
 * structure without coordinates would list as open, and what becomes real by that. Nitrogen that inverts, and centres that a small cage
 * fixes, are not listed; two nitrogens that hold each other in a bicycle (Troger's base) are.
 */
export function configurationOf(molecule: Molecule, coordinates: Coordinates): StereoTable {
  const tetrahedral = possibleStereo(molecule).tetrahedral.filter(({ atom }) => holdsNitrogen(molecule, atom));
  const held = perceiveStereo({ stereo: { tetrahedral, doubleBonds: [], axes: [] } }, coordinates);
  let stereo = completeStereo({ ...molecule, stereo: held });
  for (let round = 0; round < ROUNDS; round++) {
    const next = completeStereo({ ...molecule, stereo: perceiveStereo({ stereo }, coordinates) });
    if (JSON.stringify(next) === JSON.stringify(stereo)) break;
    stereo = next;
  }
  return stereo;
}

/** Whether a nitrogen shares two rings with another three-bonded one. */
function holdsNitrogen(molecule: Molecule, atom: number): boolean {
  const { atomicNumbers, rings } = molecule;
  const isAmine = (i: number) => atomicNumbers[i] === 7 && neighboursOf(molecule, i).length === 3;
  if (!isAmine(atom)) return false;
  const own = rings.filter((ring) => ring.includes(atom));
  const partners = new Set(own.flatMap((ring) => [...ring]).filter((i) => i !== atom && isAmine(i)));
  return [...partners].some((i) => own.filter((ring) => ring.includes(i)).length > 1);
}
