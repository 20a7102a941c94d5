/**
 * Types of atoms in aromatic rings (MMFFAROM).
 *
 * In a five-membered ring they go by the position towards the atom that gives the lone pair: alpha (C5A, N5A) or beta (C5B, N5B). Where
 * no such atom stands out the general types C5 and N5 hold: in an anion, whose nitrogens are all N5M, and for an atom that is alpha to one
 * such atom and beta to another, in two rings or in a cation whose charge lies on two nitrogens NIM+ (about a carbon CIM+ in imidazolium).
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III and its notes on aromatic rings.
 */
import { neighboursOf } from '@tordial/geometry';
import type { Aromaticity, AromaticRing } from './aromaticity.js';
import type { SymbolicType } from './symbolic-types.js';
import { neighbourByOrder, terminalCount, type ValenceForm } from './valence-form.js';

const C = 6;
const N = 7;
const O = 8;
const S = 16;

/** Positions in five-membered rings as bits, united over the rings of an atom. */
const LONE_PAIR = 1;
const ALPHA = 2;
const BETA = 4;
const GENERAL = 8;
const ANION = 16;
const CATION_NITROGEN = 32;
const IMIDAZOLIUM_CARBON = 64;

/** Writes the types of aromatic atoms into `types`; an atom that has no aromatic type (oxygen in a six-membered ring) is left alone. */
export function assignAromaticTypes(form: ValenceForm, aromaticity: Aromaticity, types: (SymbolicType | undefined)[]): void {
  const position = new Uint8Array(form.element.length);
  for (const ring of aromaticity.rings) if (ring.atoms.length === 5) markPositions(form, ring, position);
  for (let i = 0; i < position.length; i++)
    if (aromaticity.atoms[i]) types[i] = position[i] === 0 ? sixRingType(form, i) : fiveRingType(form, i, position[i]);
  assignAminoNeighbours(form, aromaticity, position, types);
}

/** An amino group next to the positive nitrogen of a five-membered ring takes part in the resonance: 2-aminothiazolium, 2-aminoimidazolium. */
function assignAminoNeighbours(
  form: ValenceForm,
  aromaticity: Aromaticity,
  position: Uint8Array,
  types: (SymbolicType | undefined)[],
): void {
  const { element, degree, valence, molecule } = form;
  for (let i = 0; i < position.length; i++) {
    if (element[i] !== C || position[i] === 0) continue;
    const partner = neighbourByOrder(form, i, 2);
    if (partner < 0 || position[partner] === 0 || !isCationicNitrogen(form, partner)) continue;
    if (position[partner] & CATION_NITROGEN && !(position[i] & IMIDAZOLIUM_CARBON)) continue;
    for (const j of neighboursOf(molecule, i)) {
      if (element[j] !== N || aromaticity.atoms[j] || degree[j] !== 3 || valence[j] !== 3) continue;
      types[j] = position[i] & IMIDAZOLIUM_CARBON ? 'NGD+' : 'NCN+';
      types[i] = 'CIM+';
    }
  }
}

function markPositions(form: ValenceForm, { atoms, lonePairAtom }: AromaticRing, position: Uint8Array): void {
  const { element, valence } = form;
  const start = atoms.indexOf(lonePairAtom);
  const at = (offset: number) => atoms[(start + offset) % 5];

  if (element[lonePairAtom] === N && valence[lonePairAtom] === 2) {
    for (const i of atoms) position[i] |= GENERAL | ANION;
    return;
  }
  position[lonePairAtom] |= LONE_PAIR;
  const donors = [0];
  // a positive nitrogen shares its charge with a lone-pair nitrogen; which of the two is written with the charge must not matter
  if (element[lonePairAtom] === N)
    for (let offset = 1; offset < 5; offset++) {
      if (!isCationicNitrogen(form, at(offset))) continue;
      donors.push(offset);
      position[lonePairAtom] |= CATION_NITROGEN;
      position[at(offset)] |= CATION_NITROGEN;
      const between = offset === 2 ? at(1) : offset === 3 ? at(4) : -1;
      if (between >= 0 && element[between] === C) position[between] |= IMIDAZOLIUM_CARBON;
    }
  for (const donor of donors) {
    position[at(donor + 1)] |= ALPHA;
    position[at(donor + 4)] |= ALPHA;
    position[at(donor + 2)] |= BETA;
    position[at(donor + 3)] |= BETA;
  }
}

/** Three neighbours and a double bond, but no oxide. */
function isCationicNitrogen(form: ValenceForm, i: number): boolean {
  return form.element[i] === N && form.degree[i] === 3 && form.valence[i] === 4 && terminalCount(form, i, O) === 0;
}

function fiveRingType(form: ValenceForm, i: number, position: number): SymbolicType | undefined {
  const alpha = (position & (ALPHA | BETA | GENERAL)) === ALPHA;
  const beta = (position & (ALPHA | BETA | GENERAL)) === BETA;
  switch (form.element[i]) {
    case C:
      if (position & IMIDAZOLIUM_CARBON) return 'CIM+';
      return alpha ? 'C5A' : beta ? 'C5B' : 'C5';
    case N:
      if (position & CATION_NITROGEN) return 'NIM+';
      if (form.degree[i] === 3) {
        if (terminalCount(form, i, O) === 1) return alpha ? 'N5AX' : beta ? 'N5BX' : 'N5OX';
        if (form.valence[i] === 4) return alpha ? 'N5A+' : beta ? 'N5B+' : 'N5+';
        return 'NPYL';
      }
      if (position & ANION) return 'N5M';
      return alpha ? 'N5A' : beta ? 'N5B' : 'N5';
    case O:
      return form.valence[i] === 2 ? 'OFUR' : undefined;
    case S:
      return form.valence[i] === 2 ? 'STHI' : undefined;
    default:
      return undefined;
  }
}

function sixRingType(form: ValenceForm, i: number): SymbolicType | undefined {
  if (form.element[i] === C) return 'CB';
  if (form.element[i] !== N) return undefined;
  if (form.degree[i] === 2) return 'NPYD';
  return terminalCount(form, i, O) === 1 ? 'NPOX' : 'NPD+';
}
