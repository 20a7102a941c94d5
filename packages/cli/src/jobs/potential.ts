import { type Mmff94, mmff94 } from '@tordial/forcefield';
import type { Molecule } from '@tordial/geometry';
import type { PotentialFlags } from '../commands/common.js';

/** Names of the force fields as the literature writes them. */
export function variantOf({ forceField }: PotentialFlags): 'MMFF94' | 'MMFF94s' {
  return forceField === 'mmff94' ? 'MMFF94' : 'MMFF94s';
}

export function potentialOf(molecule: Molecule, flags: PotentialFlags): Mmff94 {
  return mmff94(molecule, { variant: variantOf(flags), dielectric: flags.dielectric });
}

/** From kcal/mol into the unit asked for (thermochemical calorie). */
export function unitFactor(unit: 'kcal/mol' | 'kJ/mol'): number {
  return unit === 'kJ/mol' ? 4.184 : 1;
}
