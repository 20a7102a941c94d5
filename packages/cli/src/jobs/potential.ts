import { type Mmff94, mmff94 } from '@tordial/forcefield';
import type { Molecule } from '@tordial/geometry';
import type { PotentialFlags } from '../commands/common.js';
import { readFit } from '../fit-reader.js';
import { type ResolvedOverrides, torsionOverridesFor } from '../torsion-overrides.js';
import { readFrom } from './document-file.js';
import { tell } from './each-record.js';

/** Names of the force fields as the literature writes them. */
export function variantOf({ forceField }: PotentialFlags): 'MMFF94' | 'MMFF94s' {
  return forceField === 'mmff94' ? 'MMFF94' : 'MMFF94s';
}

export function potentialOf(molecule: Molecule, flags: PotentialFlags): Mmff94 {
  const { overrides, notes } = overridesOf(molecule, flags);
  tell(notes, molecule.name);
  return mmff94(molecule, { variant: variantOf(flags), dielectric: flags.dielectric, torsionOverrides: overrides });
}

/** The series of --torsions for a molecule. Throws as `readFit` and `torsionOverridesFor` do. */
export function overridesOf(molecule: Molecule, { torsions }: PotentialFlags): ResolvedOverrides {
  return torsions === undefined ? { overrides: [], notes: [] } : torsionOverridesFor(readFrom(torsions, readFit), molecule);
}
