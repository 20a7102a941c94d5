/**
 * Formal charges as MMFF94 uses them: no charge separation where a neutral writing exists, and an ion's charge spread over the atoms that
 * share it in its resonance forms.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 616 (1996), section on atomic charges.
 */
import { neighboursOf } from '@tordial/geometry';
import type { AtomTyping } from './atom-types.js';
import { NUMERIC_TYPES } from './symbolic-types.js';

const N = 7;
const TERMINAL_OXYGEN = NUMERIC_TYPES.O2CM;
const TERMINAL_SULPHUR = NUMERIC_TYPES.S2CM;
const TERMINAL_NITROGEN = NUMERIC_TYPES.NAZT;
const ISONITRILE_CARBON = NUMERIC_TYPES['C%'];
const RING_ANION_NITROGEN = NUMERIC_TYPES.N5M;
const CATION_CARBONS: readonly number[] = [NUMERIC_TYPES['CNN+'], NUMERIC_TYPES['CIM+']];
const RING_CATION_NITROGEN = NUMERIC_TYPES['NIM+'];
const CATION_NITROGENS: readonly number[] = [NUMERIC_TYPES['NCN+'], NUMERIC_TYPES['NGD+'], RING_CATION_NITROGEN];

/** Charges in elementary charges, one an atom; their sum is the molecule's charge. */
export function formalCharges({ form, atomTypes, aromaticity }: AtomTyping): Float64Array {
  const { molecule, element } = form;
  const charges = Float64Array.from(form.charge);

  // nitro, N-oxide, azide, diazo, isonitrile: the written charges cancel
  for (let i = 0; i < charges.length; i++)
    if (element[i] === N && charges[i] === 1)
      for (const j of neighboursOf(molecule, i))
        if (
          charges[j] === -1 &&
          (atomTypes[j] === TERMINAL_OXYGEN || atomTypes[j] === TERMINAL_NITROGEN || atomTypes[j] === ISONITRILE_CARBON)
        ) {
          charges[i] = 0;
          charges[j] = 0;
          break;
        }

  for (let i = 0; i < charges.length; i++) {
    const neighbours = neighboursOf(molecule, i);
    // carboxylate, nitrate, sulphonate, phosphate, perchlorate and their thio forms: all terminal atoms on one centre
    share(
      charges,
      neighbours.filter((j) => atomTypes[j] === TERMINAL_OXYGEN || atomTypes[j] === TERMINAL_SULPHUR || atomTypes[j] === TERMINAL_NITROGEN),
    );
    // amidinium, guanidinium, imidazolium: all nitrogens on the central carbon
    if (CATION_CARBONS.includes(atomTypes[i]))
      share(
        charges,
        neighbours.filter((j) => CATION_NITROGENS.includes(atomTypes[j])),
      );
  }
  // imidazolium, pyrazolium, triazolium: both three-coordinate nitrogens of the ring
  for (const ring of aromaticity.rings)
    share(
      charges,
      ring.atoms.filter((i) => atomTypes[i] === RING_CATION_NITROGEN),
    );
  // azolide anions: all two-coordinate nitrogens of the ring
  for (const ring of aromaticity.rings)
    if (ring.lonePairAtom >= 0 && form.charge[ring.lonePairAtom] === -1)
      share(
        charges,
        ring.atoms.filter((i) => atomTypes[i] === RING_ANION_NITROGEN),
      );
  return charges;
}

function share(charges: Float64Array, atoms: Int32Array): void {
  if (atoms.length < 2) return;
  let sum = 0;
  for (const i of atoms) sum += charges[i];
  for (const i of atoms) charges[i] = sum / atoms.length;
}
