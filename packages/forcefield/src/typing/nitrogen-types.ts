/** Types of nitrogen outside aromatic rings. Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III. */
import { bondBetween, neighboursOf } from '@tordial/geometry';
import type { SymbolicType } from './symbolic-types.js';
import { elementCount, neighbourByOrder, terminalCount, untypable, type ValenceForm } from './valence-form.js';

const C = 6;
const N = 7;
const O = 8;
const P = 15;
const S = 16;

/** The type of nitrogen i, given the types of all carbons; throws `mmff94/atom-type` where there is none. */
export function nitrogenType(
  form: ValenceForm,
  types: readonly (SymbolicType | undefined)[],
  aromatic: Uint8Array,
  i: number,
): SymbolicType {
  switch (form.degree[i]) {
    case 4:
      return terminalCount(form, i, O) === 1 ? 'N3OX' : 'NR+';
    case 3:
      return form.valence[i] === 4 ? planarCationType(form, types, i) : threeCoordinateType(form, types, aromatic, i);
    case 2:
      return twoCoordinateType(form, i);
    default:
      return terminalType(form, i);
  }
}

/** Three neighbours and a double bond: nitro, oxide, iminium and its resonance-stabilised kin. */
function planarCationType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  const terminalOxygens = terminalCount(form, i, O);
  if (terminalOxygens >= 2) return elementCount(form, i, O) === 3 ? 'NO3' : 'NO2';
  const partner = neighbourByOrder(form, i, 2);
  if (terminalOxygens === 1 && form.element[partner] !== O) return 'N2OX';
  if (form.element[partner] === C) return types[partner] === 'CGD+' ? 'NGD+' : types[partner] === 'CNN+' ? 'NCN+' : 'N+=C';
  if (form.element[partner] === N) return 'N+=N';
  throw untypable(form, i, 'it knows iminium nitrogen only with a double bond to carbon or nitrogen');
}

function threeCoordinateType(
  form: ValenceForm,
  types: readonly (SymbolicType | undefined)[],
  aromatic: Uint8Array,
  i: number,
): SymbolicType {
  const { element, degree, molecule } = form;
  const neighbours = neighboursOf(molecule, i);

  for (const j of neighbours) {
    if (types[j] === 'CGD+') return 'NGD+';
    if (types[j] === 'CNN+') return 'NCN+';
  }
  for (const j of neighbours) {
    const oxygens = element[j] === S || element[j] === P ? terminalCount(form, j, O) : 0;
    if (oxygens >= 2) return element[j] === S ? (oxygens === 2 ? 'NSO2' : 'NSO3') : oxygens === 2 ? 'NPO2' : 'NPO3';
    const triple = neighbourByOrder(form, j, 3);
    if (element[j] === C && triple >= 0 && element[triple] === N) return 'NC%N';
  }
  for (const j of neighbours) {
    const partner = neighbourByOrder(form, j, 2);
    if (partner < 0 || aromatic[j]) continue;
    if (element[j] === C && degree[j] === 3 && element[partner] === O) return 'NC=O';
    if (element[j] === C && degree[j] === 3 && element[partner] === S) return 'NC=S';
  }
  for (const j of neighbours) {
    if (element[j] !== C) continue;
    const partner = neighbourByOrder(form, j, 2);
    if (partner >= 0 && degree[j] === 3) {
      if (element[partner] === N) return 'NC=N';
      if (element[partner] === C) return 'NC=C';
      if (element[partner] === P) return 'NC=P';
    }
    if (neighbourByOrder(form, j, 3) >= 0) return 'NC%C';
  }
  for (const j of neighbours) {
    const partner = neighbourByOrder(form, j, 2);
    if (element[j] !== N || degree[j] !== 2 || partner < 0) continue;
    if (element[partner] === N) return 'NN=N';
    // the lone pair stays with this nitrogen where the carbon already has a donor of its own
    if (element[partner] === C && elementCount(form, partner, N) + elementCount(form, partner, O) + elementCount(form, partner, S) === 1)
      return 'NN=C';
  }
  return 'NR';
}

function twoCoordinateType(form: ValenceForm, i: number): SymbolicType {
  const { element, degree, valence } = form;
  const partner = neighbourByOrder(form, i, 2);
  switch (valence[i]) {
    case 4:
      return partner >= 0 ? '=N=' : 'NR%';
    case 3:
      if (terminalCount(form, i, O) === 2) throw untypable(form, i, 'it does not know the nitrite ion');
      if (element[partner] === O) return 'N=O';
      if (element[partner] === C) return 'N=C';
      if (element[partner] === N) return 'N=N';
      if (element[partner] === S && terminalCount(form, partner, O) > 0) return 'NSO';
      if (element[partner] === S && degree[partner] === 3) return isSulfonyl(form, i, partner) ? 'NSO2' : 'NSO';
      throw untypable(form, i, 'it knows no double bond from nitrogen to this neighbour');
    default:
      return 'NM';
  }
}

/** Whether a neighbour of nitrogen i other than the one given is the sulphur of a sulfonyl group. */
function isSulfonyl(form: ValenceForm, i: number, other: number): boolean {
  return neighboursOf(form.molecule, i).some((j) => j !== other && form.element[j] === S && terminalCount(form, j, O) >= 2);
}

function terminalType(form: ValenceForm, i: number): SymbolicType {
  const partner = neighboursOf(form.molecule, i)[0];
  const order = form.order[bondBetween(form.molecule, i, partner)];
  if (order === 3) return 'NSP';
  if (order === 2 && form.element[partner] === N && form.degree[partner] === 2) return 'NAZT';
  throw untypable(form, i, 'it knows terminal nitrogen only with a triple bond or at the end of an azide or diazo group');
}
