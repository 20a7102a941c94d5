/** Symbolic and numeric MMFF94 types of every atom of a molecule. */
import type { Molecule } from '@tordial/geometry';
import { assignAromaticTypes } from './aromatic-types.js';
import { type Aromaticity, perceiveAromaticity } from './aromaticity.js';
import { carbonType } from './carbon-types.js';
import { hydrogenType } from './hydrogen-types.js';
import { nitrogenType } from './nitrogen-types.js';
import { oxygenType } from './oxygen-types.js';
import { type RingMembership, ringMembership } from './ring-membership.js';
import { NUMERIC_TYPES, type SymbolicType } from './symbolic-types.js';
import { phosphorusType, siliconType, sulphurType } from './third-row-types.js';
import { checkValences } from './valence-check.js';
import { neighbourByOrder, terminalCount, untypable, type ValenceForm, valenceForm } from './valence-form.js';

/** What typing finds; all arrays have one entry an atom. */
export interface AtomTyping {
  readonly symbolicTypes: readonly SymbolicType[];
  /** 1 to 99. */
  readonly atomTypes: Uint8Array;
  readonly form: ValenceForm;
  readonly rings: RingMembership;
  readonly aromaticity: Aromaticity;
}

/**
 * Types every atom. Both writings of a structure (N+-O- or N=O in a nitro group, S2+-O- or S=O) give the same types.
 * Throws `mmff94/atom-type`, naming the atom and the reason, for one that MMFF94 does not cover.
 */
export function typeAtoms(molecule: Molecule): AtomTyping {
  const form = valenceForm(molecule);
  checkValences(form);
  const rings = ringMembership(molecule);
  const aromaticity = perceiveAromaticity(form);
  const { atomCount } = molecule;
  const types: (SymbolicType | undefined)[] = new Array(atomCount).fill(undefined);
  assignAromaticTypes(form, aromaticity, types);

  // types of one element build on those of the elements before it
  for (const element of TYPING_ORDER)
    for (let i = 0; i < atomCount; i++) if (form.element[i] === element) types[i] ??= typeOf(form, rings, aromaticity, types, i);

  const symbolicTypes: SymbolicType[] = [];
  const atomTypes = new Uint8Array(atomCount);
  for (let i = 0; i < atomCount; i++) {
    const symbol = types[i] ?? typeOf(form, rings, aromaticity, types, i);
    symbolicTypes.push(symbol);
    atomTypes[i] = NUMERIC_TYPES[symbol];
  }
  return { symbolicTypes, atomTypes, form, rings, aromaticity };
}

const H = 1;
const C = 6;
const N = 7;
const O = 8;
const F = 9;
const SI = 14;
const P = 15;
const S = 16;
const CL = 17;
const BR = 35;
const I = 53;
const TYPING_ORDER = [C, N, O, S, P, SI, F, CL, BR, I, H];

const ION_TYPES: Readonly<Record<string, SymbolicType>> = {
  '3+1': 'LI+',
  '9-1': 'F-',
  '11+1': 'NA+',
  '12+2': 'MG+2',
  '17-1': 'CL-',
  '19+1': 'K+',
  '20+2': 'CA+2',
  '26+2': 'FE+2',
  '26+3': 'FE+3',
  '29+1': 'CU+1',
  '29+2': 'CU+2',
  '30+2': 'ZN+2',
  '35-1': 'BR-',
};

function typeOf(
  form: ValenceForm,
  rings: RingMembership,
  aromaticity: Aromaticity,
  types: readonly (SymbolicType | undefined)[],
  i: number,
): SymbolicType {
  const { element, charge, degree, valence } = form;
  if (degree[i] === 0) {
    const ion = ION_TYPES[`${element[i]}${charge[i] < 0 ? '' : '+'}${charge[i]}`];
    if (ion) return ion;
    throw untypable(form, i, `a single atom with charge ${charge[i]} is none of its ions`);
  }
  switch (element[i]) {
    case H:
      return hydrogenType(form, types, i);
    case C:
      return carbonType(form, rings, i);
    case N:
      return nitrogenType(form, types, aromaticity.atoms, i);
    case O:
      return oxygenType(form, types, i);
    case F:
      return 'F';
    case SI:
      return siliconType(form, i);
    case P:
      return phosphorusType(form, i);
    case S:
      return sulphurType(form, types, i);
    case CL:
      if (valence[i] === 1) return 'CL';
      if (terminalCount(form, i, O) === 4 && neighbourByOrder(form, i, 2) >= 0) return 'CLO4';
      throw untypable(form, i, 'it knows hypervalent chlorine only in perchlorate');
    case BR:
      return 'BR';
    case I:
      return 'I';
    default:
      throw untypable(form, i, 'the element is outside the force field');
  }
}
