/** Types of hydrogen, which follow from the type of the atom that carries it. Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III. */
import { neighboursOf } from '@tordial/geometry';
import type { SymbolicType } from './symbolic-types.js';
import { elementCount, neighbourByOrder, untypable, type ValenceForm } from './valence-form.js';

const C = 6;
const N = 7;
const O = 8;
const SI = 14;
const P = 15;
const S = 16;

/** The type of hydrogen i, given the types of all heavy atoms; throws `mmff94/atom-type` where there is none. */
export function hydrogenType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  const carrier = neighboursOf(form.molecule, i)[0];
  switch (form.element[carrier]) {
    case C:
      return 'HC';
    case SI:
      return 'HSI';
    case N:
      return onNitrogen(form, types[carrier], carrier);
    case O:
      return onOxygen(form, types[carrier], carrier);
    case P:
      return 'HP';
    case S:
      return 'HS';
    default:
      throw untypable(form, i, 'it knows no hydrogen on this neighbour');
  }
}

function onNitrogen(form: ValenceForm, carrier: SymbolicType | undefined, nitrogen: number): SymbolicType {
  switch (carrier) {
    case 'NR':
      return elementCount(form, nitrogen, 1) === 3 ? 'H3N' : 'HNR';
    case 'NPYL':
      return 'HPYL';
    case 'N3OX':
      return 'HNOX';
    case 'NM':
      return 'HNM';
    case 'N=C':
      return 'HN=C';
    case 'N=N':
      return 'HN=N';
    case 'NC=O':
      return 'HNCO';
    case 'NC=S':
      return 'HNCS';
    case 'NN=C':
      return 'HNNC';
    case 'NN=N':
      return 'HNNN';
    case 'NC=C':
      return 'HNCC';
    case 'NC=N':
      return 'HNCN';
    case 'NSO2':
    case 'NSO3':
    case 'NSO':
      return 'HNSO';
    case 'NPO2':
    case 'NPO3':
      return 'HNPO';
    case 'NC%N':
    case 'NC%C':
      return 'HNC%';
    case 'NC=P':
      return 'HSP2';
    case 'NR+':
      return 'HNR+';
    case 'N+=C':
    case 'NCN+':
      return 'HNC+';
    case 'N+=N':
      return 'HNN+';
    case 'NGD+':
      return 'HGD+';
    case 'NPD+':
      return 'HPD+';
    case 'NIM+':
      return 'HIM+';
    case 'N5A+':
    case 'N5B+':
    case 'N5+':
      return 'HN5+';
    default:
      return 'HN';
  }
}

function onOxygen(form: ValenceForm, carrier: SymbolicType | undefined, oxygen: number): SymbolicType {
  switch (carrier) {
    case 'OH2':
      return 'HOH';
    case 'O+':
      return 'HO+';
    case 'O=+':
      return 'HO=+';
    case 'OM':
      return 'HOM';
  }
  for (const j of neighboursOf(form.molecule, oxygen)) {
    if (form.element[j] === P) return 'HOP';
    if (form.element[j] === S) return 'HOS';
    if (form.element[j] !== C) continue;
    if (form.degree[j] === 4) return 'HOR';
    const partner = neighbourByOrder(form, j, 2);
    if (partner < 0) continue;
    if (form.element[partner] === O) return 'HOCO';
    if (form.element[partner] === C) return 'HOCC';
    if (form.element[partner] === N) return 'HOCN';
  }
  return 'HO';
}
