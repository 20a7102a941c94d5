/** Types of silicon, phosphorus and sulphur outside aromatic rings. Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III. */
import { neighboursOf } from '@tordial/geometry';
import type { SymbolicType } from './symbolic-types.js';
import { elementCount, neighbourByOrder, terminalCount, untypable, type ValenceForm } from './valence-form.js';

const C = 6;
const N = 7;
const O = 8;
const P = 15;
const S = 16;

/** The type of silicon i; throws `mmff94/atom-type` unless it has four neighbours. */
export function siliconType(form: ValenceForm, i: number): SymbolicType {
  if (form.degree[i] === 4) return 'SI';
  throw untypable(form, i, 'it knows silicon only with four neighbours');
}

/** The type of phosphorus i; throws `mmff94/atom-type` where there is none. */
export function phosphorusType(form: ValenceForm, i: number): SymbolicType {
  const partner = neighbourByOrder(form, i, 2);
  if (form.degree[i] === 4) {
    const oxygens = elementCount(form, i, O);
    return oxygens === 4 ? 'PO4' : oxygens === 3 ? 'PO3' : oxygens === 2 ? 'PO2' : oxygens === 1 ? 'PO' : 'PTET';
  }
  if (form.degree[i] === 3 && form.valence[i] === 3) return 'P';
  if (form.degree[i] === 2 && partner >= 0 && form.element[partner] === C) return '-P=C';
  throw untypable(form, i, `${form.degree[i]} neighbours with bond orders that sum to ${form.valence[i]} fit no phosphorus type`);
}

/** The type of sulphur i; throws `mmff94/atom-type` where there is none. */
export function sulphurType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  const { degree, valence } = form;
  const oxygens = terminalCount(form, i, O);
  switch (degree[i]) {
    case 4:
      if (valence[i] !== 6) break;
      if (oxygens === 2) return elementCount(form, i, N) > 0 ? 'SO2N' : 'SO2';
      return oxygens === 4 ? 'SO4' : oxygens === 3 ? 'SO3' : 'SNO';
    case 3:
      if (valence[i] === 6) return '=SO2';
      if (valence[i] !== 4) break;
      if (oxygens === 2) return 'SO2M';
      if (oxygens === 1) return terminalCount(form, i, S) === 1 ? 'SSOM' : 'S=O';
      if (oxygens === 0 && form.element[neighbourByOrder(form, i, 2)] === N) return '>S=N';
      break;
    case 2:
      if (valence[i] === 2) return 'S';
      if (valence[i] === 4 && oxygens > 0) return '=S=O';
      break;
    case 1:
      return terminalSulphurType(form, types, i);
  }
  throw untypable(form, i, `${degree[i]} neighbours with bond orders that sum to ${valence[i]} fit no sulphur type`);
}

function terminalSulphurType(form: ValenceForm, types: readonly (SymbolicType | undefined)[], i: number): SymbolicType {
  const centre = neighboursOf(form.molecule, i)[0];
  switch (form.element[centre]) {
    case C:
      if (types[centre] === 'CS2M') return 'S2CM';
      return form.valence[i] === 2 ? 'S=C' : 'SM';
    case P:
      return 'S-P';
    case S:
      return 'SSMO';
    default:
      if (form.valence[i] === 1) return 'SM';
      throw untypable(form, i, 'it knows no terminal sulphur on this neighbour');
  }
}
