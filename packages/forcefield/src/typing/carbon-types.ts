/** Types of carbon outside aromatic rings. Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III. */
import { neighboursOf } from '@tordial/geometry';
import { inRing, type RingMembership } from './ring-membership.js';
import type { SymbolicType } from './symbolic-types.js';
import { elementCount, neighbourByOrder, terminalCount, untypable, type ValenceForm } from './valence-form.js';

const C = 6;
const N = 7;
const O = 8;
const P = 15;
const S = 16;

/** The type of carbon i; throws `mmff94/atom-type` where there is none. */
export function carbonType(form: ValenceForm, rings: RingMembership, i: number): SymbolicType {
  switch (form.degree[i]) {
    case 4:
      return inRing(rings, 3, i) ? 'CR3R' : inRing(rings, 4, i) ? 'CR4R' : 'CR';
    case 3:
      return planarCarbonType(form, rings, i);
    case 2:
      if (form.charge[i] !== 0) break;
      return neighbourByOrder(form, i, 3) >= 0 ? 'CSP' : '=C=';
    case 1: {
      const partner = neighbourByOrder(form, i, 3);
      if (partner >= 0 && form.element[partner] === N && form.degree[partner] === 2) return 'C%';
    }
  }
  throw untypable(form, i, form.charge[i] < 0 ? 'it knows no carbanion' : `${form.degree[i]} neighbours fit no carbon type`);
}

function planarCarbonType(form: ValenceForm, rings: RingMembership, i: number): SymbolicType {
  const { element } = form;
  const partner = neighbourByOrder(form, i, 2);
  if (partner < 0) throw untypable(form, i, 'it knows no carbanion');
  if (terminalCount(form, i, O) === 3) throw untypable(form, i, 'it does not know the carbonate ion');
  if (terminalCount(form, i, O) === 2) return 'CO2M';
  if (terminalCount(form, i, S) === 2) return 'CS2M';
  switch (element[partner]) {
    case O: {
      const oxygens = elementCount(form, i, O) - 1;
      const nitrogens = elementCount(form, i, N);
      if (oxygens === 2) return 'COOO';
      if (oxygens === 1) return nitrogens === 1 ? 'COON' : 'COO';
      if (nitrogens > 0) return 'C=ON';
      if (elementCount(form, i, S) > 0) return 'C=OS';
      return elementCount(form, i, C) + elementCount(form, i, 1) === 2 ? 'C=OR' : 'C=O';
    }
    case N:
      return nitrogenCarbonType(form, i, partner);
    case S:
      if (form.degree[partner] === 1) return elementCount(form, i, N) > 0 ? 'C=SN' : 'C=S';
      if (form.degree[partner] === 2) return 'C=SO';
      if (form.degree[partner] === 3 && terminalCount(form, partner, O) === 2) return 'CSO2';
      throw untypable(form, i, 'it knows no sulphur ylide');
    case C:
      return inRing(rings, 4, i) ? 'CE4R' : 'C=C';
    case P:
      return 'C=P';
    default:
      return 'CSP2';
  }
}

/** Carbon with a double bond to nitrogen: imine, guanidine, or a cation that shares its charge over two or three nitrogens. */
function nitrogenCarbonType(form: ValenceForm, i: number, partner: number): SymbolicType {
  const amino = aminoNeighbours(form, i, partner);
  if (form.degree[partner] === 3 && form.valence[partner] === 4 && terminalCount(form, partner, O) === 0 && amino > 0)
    return amino === 2 ? 'CGD+' : 'CNN+';
  return amino === 2 ? 'CGD' : 'C=N';
}

/** Singly bonded nitrogens with three neighbours and a lone pair. */
function aminoNeighbours({ molecule, element, degree, valence }: ValenceForm, i: number, partner: number): number {
  let count = 0;
  for (const j of neighboursOf(molecule, i)) if (j !== partner && element[j] === N && degree[j] === 3 && valence[j] === 3) count++;
  return count;
}
