/**
 * The grammar of SMILES, checked strictly: every departure is an error with its character position.
 *
 * Source: C. A. James et al., OpenSMILES specification 1.0 (2016), with ring numbers %(nnn) from its list of extensions.
 * Wildcards, reactions, quadruple bonds and non-tetrahedral centres (square planar, ...) are refused: no torsion scan can use them.
 */
import { atomicNumberOf } from './elements.js';
import { TordialError } from './errors.js';
import { checkLimit, type Limits } from './limits.js';
import { AROMATIC_ORDER, OWN_HYDROGEN, type WrittenAtom, type WrittenBond } from './written-structure.js';

export interface SmilesAtom extends WrittenAtom {
  /** Character position of the atom, 0-based. */
  readonly position: number;
  /** '@' counter-clockwise, '@@' clockwise, '' where nothing is said. */
  readonly chirality: '' | '@' | '@@';
  /** Ligands in the order in which the line names them: atom indices or OWN_HYDROGEN. */
  readonly ligands: number[];
}

export interface SmilesBond extends WrittenBond {
  /** 1: written a/b, b lies above a; -1: written a\b; 0: no direction. */
  readonly direction: -1 | 0 | 1;
}

export interface WrittenSmiles {
  readonly atoms: readonly SmilesAtom[];
  readonly bonds: readonly SmilesBond[];
}

interface PendingBond {
  readonly symbol: string;
  readonly position: number;
}

interface OpenRing {
  readonly atom: number;
  readonly symbol: string;
  readonly position: number;
  /** Place in the ligand list of the atom, to be filled when the ring closes. */
  readonly slot: number;
}

const ORGANIC = /Cl|Br|[BCNOPSFIbcnops]/y;
const BRACKET = /\[(\d+)?([A-Z][a-z]?|[bcnops]|se|as|te|\*)(@[A-Z]{2}\d{0,2}|@@?)?(?:H(\d*))?(\++|-+|[+-]\d+)?(?::(\d+))?\]/y;
const BONDS = '-=#$:/\\~';
const ORDERS: Readonly<Record<string, number>> = { '-': 1, '/': 1, '\\': 1, '=': 2, '#': 3, ':': AROMATIC_ORDER };

/**
 * Reads one SMILES (no white space in it) into atoms and bonds.
 * Throws `smiles/syntax` with the position, `smiles/unsupported` for what the format allows and this library does not, `limit/atoms`.
 */
export function parseSmiles(smiles: string, limits: Limits): WrittenSmiles {
  const atoms: SmilesAtom[] = [];
  const bonds: SmilesBond[] = [];
  const bonded = new Set<number>();
  const openRings = new Map<number, OpenRing>();
  const branches: { atom: number; position: number }[] = [];
  let previous = -1;
  let pending: PendingBond | null = null;
  let at = 0;

  if (smiles.length === 0) fail('the SMILES is empty', 0);
  while (at < smiles.length) {
    const character = smiles[at];
    if (character === '(') openBranch();
    else if (character === ')') closeBranch();
    else if (character === '.') dot();
    else if (BONDS.includes(character)) bondSymbol(character);
    else if (character === '%' || (character >= '0' && character <= '9')) ringNumber();
    else atom(character);
  }
  if (pending) fail('a bond leads nowhere', (pending as PendingBond).position);
  if (branches.length > 0) fail('a branch is opened and not closed', branches[branches.length - 1].position);
  if (previous < 0) fail('an atom must follow', smiles.length - 1);
  for (const [number, ring] of openRings) fail(`ring ${number} is opened and not closed`, ring.position);
  return { atoms, bonds };

  function fail(what: string, position: number): never {
    throw new TordialError('smiles/syntax', `SMILES, character ${position + 1}: ${what}${excerpt(smiles, position)}`, { position });
  }
  function unsupported(what: string, position: number): never {
    throw new TordialError('smiles/unsupported', `SMILES, character ${position + 1}: ${what}${excerpt(smiles, position)}`, { position });
  }

  function openBranch(): void {
    if (previous < 0) fail('a branch must follow an atom', at);
    if (pending) fail('a bond must be written inside the branch, not before it', at);
    if (smiles[at - 1] === '(') fail('a branch must begin with an atom', at);
    branches.push({ atom: previous, position: at++ });
  }

  function closeBranch(): void {
    const branch = branches.pop();
    if (!branch) fail('no branch is open here', at);
    if (pending) fail('a bond leads nowhere', at - 1);
    if (smiles[at - 1] === '(' || smiles[at - 1] === '.') fail('an atom must stand here', at);
    previous = branch.atom;
    at++;
  }

  function dot(): void {
    if (previous < 0 || pending || smiles[at - 1] === '(') fail('an atom must stand before the dot', at);
    previous = -1;
    at++;
    if (at === smiles.length || smiles[at] === ')') fail('an atom must follow the dot', at - 1);
  }

  function bondSymbol(symbol: string): void {
    if (previous < 0) fail('a bond must follow an atom', at);
    if (pending) fail('two bonds in a row', at);
    if (symbol === '$' || symbol === '~')
      unsupported(symbol === '$' ? 'a quadruple bond is not supported' : 'a query bond is no structure', at);
    pending = { symbol, position: at++ };
  }

  function ringNumber(): void {
    const match = /%\((\d{1,5})\)|%(\d\d)|(\d)/y;
    match.lastIndex = at;
    const found = match.exec(smiles);
    if (!found) fail('a ring number after % has two digits', at);
    if (previous < 0 || smiles[at - 1] === '(') fail('a ring number must follow an atom', at);
    const number = Number(found[1] ?? found[2] ?? found[3]);
    const symbol = pending?.symbol ?? '';
    const open = openRings.get(number);
    if (!open) {
      openRings.set(number, { atom: previous, symbol, position: at, slot: atoms[previous].ligands.length });
      atoms[previous].ligands.push(-1);
    } else {
      openRings.delete(number);
      if (open.atom === previous) fail(`ring ${number} closes on the atom that opens it`, at);
      const order = (s: string) => (s === '' ? 0 : ORDERS[s]);
      if (open.symbol && symbol && order(open.symbol) !== order(symbol)) fail(`ring ${number} has different bonds at its two ends`, at);
      const direction = directionOf(open.symbol) || -directionOf(symbol);
      if (directionOf(open.symbol) && directionOf(symbol) && directionOf(open.symbol) === directionOf(symbol))
        fail(`ring ${number} has contradicting directions at its two ends`, at);
      // a direction counts more than a plain '-' at the other end; both are single
      const kind = direction !== 0 ? '/' : open.symbol || symbol;
      atoms[open.atom].ligands[open.slot] = previous;
      atoms[previous].ligands.push(open.atom);
      addBond(open.atom, previous, kind, direction, at);
    }
    pending = null;
    at += found[0].length;
  }

  function atom(character: string): void {
    if (character === '*') unsupported('a wildcard atom is no structure', at);
    if (character === '>') unsupported('a reaction is no structure', at);
    const read = character === '[' ? bracketAtom() : organicAtom();
    const index = atoms.length;
    atoms.push(read.atom);
    checkLimit('atoms', atoms.length, limits);
    if (previous >= 0) {
      atoms[previous].ligands.push(index);
      read.atom.ligands.push(previous);
      addBond(previous, index, pending?.symbol ?? '', directionOf(pending?.symbol ?? ''), at);
      pending = null;
    }
    // a bracket's own hydrogen is seen right after the atom one comes from
    if (read.atom.hydrogens > 0) read.atom.ligands.push(...new Array<number>(read.atom.hydrogens).fill(OWN_HYDROGEN));
    previous = index;
    at += read.length;
  }

  function organicAtom(): { atom: SmilesAtom; length: number } {
    ORGANIC.lastIndex = at;
    const found = ORGANIC.exec(smiles);
    if (!found) {
      const element = /[A-Z][a-z]?/y;
      element.lastIndex = at;
      const symbol = element.exec(smiles)?.[0] ?? '';
      const known = [symbol, symbol.slice(0, 1)].find((s) => atomicNumberOf(s) > 0);
      fail(known ? `${known} must be written in brackets: [${known}]` : `'${smiles[at]}' means nothing here`, at);
    }
    return { atom: makeAtom(found[0], 0, 0, -1, ''), length: found[0].length };
  }

  function bracketAtom(): { atom: SmilesAtom; length: number } {
    BRACKET.lastIndex = at;
    const found = BRACKET.exec(smiles);
    if (!found) {
      const end = smiles.indexOf(']', at);
      fail(end < 0 ? 'a bracket is opened and not closed' : `${smiles.slice(at, end + 1)} is no atom`, at);
    }
    const [text, isotope, symbol, chirality = '', hydrogens, charge] = found;
    if (symbol === '*') unsupported('a wildcard atom is no structure', at);
    const massNumber = Number(isotope ?? 0);
    if (massNumber > 400) fail(`${massNumber} is no mass number`, at);
    const q = !charge ? 0 : /\d/.test(charge) ? Number(charge) : charge.length * (charge[0] === '+' ? 1 : -1);
    if (Math.abs(q) > 15) fail(`a charge of ${q} is out of range`, at);
    const count = hydrogens === undefined ? 0 : hydrogens === '' ? 1 : Number(hydrogens);
    if (count > 9) fail(`${count} hydrogens on one atom`, at);
    if (symbol === 'H' && count > 0) fail('a hydrogen cannot carry hydrogens; write [H][H]', at);
    const mark = CHIRALITY[chirality];
    if (mark === undefined) {
      if (/^@(SP|TB|OH)\d{1,2}$/.test(chirality)) unsupported(`the stereo class ${chirality} is not supported, only @ and @@`, at);
      fail(`${chirality} is no stereo mark`, at);
    }
    return { atom: makeAtom(symbol, massNumber, q, count, mark), length: text.length };
  }

  function makeAtom(symbol: string, isotope: number, charge: number, hydrogens: number, chirality: SmilesAtom['chirality']): SmilesAtom {
    const aromatic = symbol[0] >= 'a';
    const element = aromatic ? symbol[0].toUpperCase() + symbol.slice(1) : symbol;
    const atomicNumber = atomicNumberOf(element);
    if (atomicNumber === 0) fail(`${symbol} is no element`, at);
    const label = `atom ${atoms.length} (${element}, character ${at + 1})`;
    return { atomicNumber, isotope, charge, aromatic, hydrogens, label, position: at, chirality, ligands: [] };
  }

  function addBond(a: number, b: number, symbol: string, direction: number, position: number): void {
    const key = Math.min(a, b) * (limits.atoms + 1) + Math.max(a, b);
    if (bonded.has(key)) fail(`atoms ${a} and ${b} are bonded twice`, position);
    bonded.add(key);
    const bothAromatic = atoms[a].aromatic && atoms[b].aromatic;
    const order = symbol === '' ? (bothAromatic ? AROMATIC_ORDER : 1) : ORDERS[symbol];
    if (symbol === ':') {
      atoms[a].aromatic = true;
      atoms[b].aromatic = true;
    }
    bonds.push({ a, b, order, direction: direction > 0 ? 1 : direction < 0 ? -1 : 0 });
  }
}

const CHIRALITY: Readonly<Record<string, SmilesAtom['chirality']>> = {
  '': '',
  '@': '@',
  '@@': '@@',
  '@TH1': '@',
  '@TH2': '@@',
  '@AL1': '@',
  '@AL2': '@@',
};

function directionOf(symbol: string): -1 | 0 | 1 {
  return symbol === '/' ? 1 : symbol === '\\' ? -1 : 0;
}

/** The line around a position with an arrow under nothing: plain text that survives any terminal. */
function excerpt(smiles: string, position: number): string {
  if (smiles.length === 0) return '';
  const from = Math.max(0, position - 20);
  const to = Math.min(smiles.length, position + 20);
  const before = `${from > 0 ? '...' : ''}${smiles.slice(from, position)}`;
  return `, at >>> in ${before} >>> ${smiles.slice(position, to)}${to < smiles.length ? '...' : ''}`;
}
