/** Types of oxygen outside aromatic rings. Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III. */
import { bondBetween, elementSymbol, neighboursOf } from '@tordial/geometry';
import type { SymbolicType } from './symbolic-types.js';
import { elementCount, neighbourByOrder, terminalCount, untypable, type ValenceForm } from './valence-form.js';

const H = 1;
const C = 6;
const N = 7;
const O = 8;
const P = 15;
const S = 16;
const Cl = 17;

/** The type of oxygen i, given the types of all carbons and nitrogens; throws `mmff94/atom-type` where there is none. */
export function oxygenType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  if (form.degree[i] === 3) return 'O+';
  if (form.degree[i] === 2) return form.valence[i] === 3 ? 'O=+' : divalentType(form, i);
  return terminalType(form, types, i);
}

function divalentType(form: ValenceForm, i: number): SymbolicType {
  const { molecule, element } = form;
  if (elementCount(form, i, H) === 2) return 'OH2';
  const neighbours = neighboursOf(molecule, i);
  for (const j of neighbours) {
    if (element[j] !== C) continue;
    const partner = neighbourByOrder(form, j, 2);
    if (partner < 0 || form.degree[j] !== 3) continue;
    if (element[partner] === O) return 'OC=O';
    if (element[partner] === C) return 'OC=C';
    if (element[partner] === N) return 'OC=N';
    if (element[partner] === S) return 'OC=S';
  }
  for (const j of neighbours) {
    if (element[j] === N) {
      if (terminalCount(form, j, O) === 2) return 'ONO2';
      const partner = neighbourByOrder(form, j, 2);
      if (partner >= 0 && element[partner] === O) return 'ON=O';
    }
    const oxygens = elementCount(form, j, O);
    if (element[j] === S)
      return form.degree[j] === 4 ? (oxygens >= 3 ? 'OSO3' : 'OSO2') : terminalCount(form, j, O) > 0 ? 'OS=O' : oxygens > 1 ? 'OSO' : '-OS';
    if (element[j] === P) return oxygens >= 4 ? 'OPO3' : oxygens === 3 ? 'OPO2' : oxygens === 2 ? 'OPO' : '-OP';
  }
  return neighbours.every((j) => element[j] === H || (element[j] === C && form.degree[j] === 4)) ? 'OR' : '-O-';
}

function terminalType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  const { molecule, element, degree, order } = form;
  const centre = neighboursOf(molecule, i)[0];
  const single = order[bondBetween(molecule, i, centre)] === 1;
  const oxygens = terminalCount(form, centre, O);
  switch (element[centre]) {
    case C:
      if (types[centre] === 'CO2M') return 'O2CM';
      if (single) return degree[centre] === 4 ? 'OM' : 'OM2';
      switch (types[centre]) {
        case 'C=ON':
        case 'COON':
          return 'O=CN';
        case 'C=OR':
          return 'O=CR';
        case 'COO':
        case 'COOO':
          return 'O=CO';
        default:
          return 'O=C';
      }
    case N:
      if (!single && types[centre] === 'N=O') return 'O=N';
      if (form.valence[centre] === 3) return 'OM';
      if (oxygens === 3) return 'O3N';
      if (oxygens === 2) return types[centre] === 'NO3' ? 'O2NO' : 'O2N';
      return 'OXN';
    case S:
      if (degree[centre] === 4) return oxygens === 4 ? 'O4S' : oxygens === 3 ? 'O3S' : oxygens === 2 ? 'O2S' : 'O-S';
      if (oxygens === 2) return 'O2S';
      if (terminalCount(form, centre, S) > 0) return 'OSMS';
      return degree[centre] === 2 ? 'O=S=' : 'O=S';
    case P:
      return oxygens === 4 ? 'O4P' : oxygens === 3 ? 'O3P' : oxygens === 2 ? 'O2P' : 'OP';
    case Cl:
      if (oxygens === 4) return 'O4CL';
      break;
    case H:
      return 'OM';
  }
  throw untypable(
    form,
    i,
    `it knows no terminal oxygen on ${elementSymbol(element[centre])}${element[centre] === Cl ? ' but in perchlorate' : ''}`,
  );
}
