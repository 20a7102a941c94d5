import { bondBetween, elementSymbol, type Molecule, neighboursOf, TordialError } from '@tordial/geometry';
import { textWidth } from './text-width.js';

/** A group's condensed formula in parts, read from the bond outwards: `[C, H3]` or `[N, (CH3)2]`. */
export type GroupLabel = readonly LabelPart[];

export interface LabelPart {
  /** An element, a name such as Ph, or a formula in parentheses. */
  readonly of: string | GroupLabel;
  /** Subscript; 1 is not written. */
  readonly count: number;
  /** Superscript charge, as '+' or '2−'; empty for none. */
  readonly charge: string;
}

/** Pieces of a label as they are set: on the line, lowered or raised. */
export interface LabelRun {
  readonly text: string;
  readonly shift: 'line' | 'subscript' | 'superscript';
}

/** Subscripts and superscripts are set at this fraction of the font size. */
export const SCRIPT_SCALE = 0.72;

/** Labels wider than this (in em) are abbreviated. */
const LONGEST = 4;

/**
 * Name of the substituent that begins at `atom`, seen from the axis atom `from`: H, CH3, OCH3, Ph, CO2H, t-Bu. What is too long to read in a small
 * figure ends in R (any group) or Ar (an aromatic one): CH2R, NHCOR, C6H4R. An atom that lies in a ring with `from` is named with its hydrogens
 * and what else it bears: CH, N, C=O, C–F.
 *
 * Throws `figure/group` when the two atoms are not bonded.
 */
export function groupLabel(molecule: Molecule, atom: number, from: number): GroupLabel {
  if (bondBetween(molecule, atom, from) < 0)
    throw new TordialError('figure/group', `atoms ${from} and ${atom} are not bonded: no group is seen along them`, { atom });
  if (molecule.rings.some((ring) => ring.includes(atom) && ring.includes(from))) return ringMember(molecule, atom, from);
  for (const depth of [Number.POSITIVE_INFINITY, 2]) {
    const label = condensed(molecule, atom, from, depth);
    if (labelWidth(label, 1) <= LONGEST) return label;
  }
  return condensed(molecule, atom, from, 1);
}

/** The same group written towards the bond instead of away from it: OCH3 becomes H3CO. */
export function reversedLabel(label: GroupLabel): GroupLabel {
  return label.map((part) => ({ ...part, of: typeof part.of === 'string' ? part.of : reversedLabel(part.of) })).reverse();
}

/** The label in runs of text with their vertical shifts. */
export function labelRuns(label: GroupLabel): LabelRun[] {
  const runs: LabelRun[] = [];
  const add = (text: string, shift: LabelRun['shift']): void => {
    const last = runs.at(-1);
    if (last?.shift === shift) runs[runs.length - 1] = { text: last.text + text, shift };
    else runs.push({ text, shift });
  };
  const write = (parts: GroupLabel): void => {
    for (const part of parts) {
      if (typeof part.of === 'string') for (const run of nameRuns(part.of)) add(run.text, run.shift);
      else {
        add('(', 'line');
        write(part.of);
        add(')', 'line');
      }
      if (part.count > 1) add(String(part.count), 'subscript');
      if (part.charge) add(part.charge, 'superscript');
    }
  };
  write(label);
  return runs;
}

/** The label as plain text, without shifts: N(CH3)2. */
export function labelText(label: GroupLabel): string {
  return labelRuns(label)
    .map(({ text }) => text)
    .join('');
}

/** Width in the unit of `fontSize`. */
export function labelWidth(label: GroupLabel, fontSize: number, bold = false): number {
  return labelRuns(label).reduce(
    (width, { text, shift }) => width + textWidth(text, fontSize * (shift === 'line' ? 1 : SCRIPT_SCALE), bold),
    0,
  );
}

/** Digits within a name such as C6H4 are subscripts. */
function nameRuns(name: string): LabelRun[] {
  return name.split(/(\d+)/).flatMap((text) => (text ? [{ text, shift: /\d/.test(text) ? 'subscript' : 'line' } as const] : []));
}

function part(of: string | GroupLabel, count = 1, charge = ''): LabelPart {
  return { of, count, charge };
}

const REST = part('R');
const AROMATIC_REST = part('Ar');

/** One atom's surroundings, the way back left out. */
interface Surroundings {
  readonly hydrogens: number;
  /** Oxygens bonded to nothing else: doubly, or written as a dative bond between opposite charges. */
  readonly oxo: number;
  readonly others: readonly { readonly atom: number; readonly order: number }[];
  /** Of the atom and its oxo oxygens together. */
  readonly charge: number;
}

function surroundings(molecule: Molecule, atom: number, from: number): Surroundings {
  let hydrogens = 0;
  let oxo = 0;
  let charge = molecule.formalCharges[atom];
  const others: { atom: number; order: number }[] = [];
  for (const next of neighboursOf(molecule, atom)) {
    if (next === from) continue;
    const order = molecule.bonds.order[bondBetween(molecule, atom, next)];
    if (molecule.atomicNumbers[next] === 1 && isTerminal(molecule, next)) hydrogens++;
    else if (molecule.atomicNumbers[next] === 8 && isTerminal(molecule, next) && isOxo(molecule, next, atom, order)) {
      oxo++;
      charge += molecule.formalCharges[next];
    } else others.push({ atom: next, order });
  }
  return { hydrogens, oxo, others, charge };
}

function isTerminal({ neighbours }: Molecule, atom: number): boolean {
  return neighbours.start[atom + 1] - neighbours.start[atom] === 1;
}

function isOxo({ formalCharges }: Molecule, oxygen: number, centre: number, order: number): boolean {
  return order === 2 || (formalCharges[oxygen] === -1 && formalCharges[centre] > 0);
}

function chargeText(charge: number): string {
  if (charge === 0) return '';
  const sign = charge > 0 ? '+' : '−';
  return Math.abs(charge) === 1 ? sign : `${Math.abs(charge)}${sign}`;
}

/** The substituent's formula down to `depth` atoms from the bond; what lies beyond is R or Ar. */
function condensed(molecule: Molecule, atom: number, from: number, depth: number): GroupLabel {
  const inRing = molecule.rings.some((ring) => ring.includes(atom));
  if (inRing) {
    const name = ringName(molecule, atom, from, depth);
    if (name) return name;
    if (depth > 1) return condensed(molecule, atom, from, 1);
  }
  const named = alkylName(molecule, atom, from);
  if (named) return [part(named)];

  const { hydrogens, oxo, others, charge } = surroundings(molecule, atom, from);
  const branches = others.map((other) => ({ ...other, label: branch(molecule, other.atom, atom, inRing ? 0 : depth - 1) }));
  const symbol = symbolOf(molecule, atom);

  // acids and esters: the oxygens are counted together, and what the single-bonded ones bear follows (CO2H, SO3−, PO3H2)
  const acidic = oxo > 0 && [6, 15, 16].includes(molecule.atomicNumbers[atom]);
  const oxygens = acidic
    ? branches.filter(({ atom: other, order, label }) => order === 1 && molecule.atomicNumbers[other] === 8 && label[0].of === 'O')
    : [];
  const rests = oxygens.map(({ label }) => (label[0].count === 1 ? label.slice(1) : undefined));
  const gathered = oxygens.length > 0 && rests.every((rest) => rest !== undefined && sameLabel(rest, rests[0] ?? [])) ? oxygens : [];
  const remaining = branches.filter((one) => !gathered.includes(one));
  const gatheredCharge = gathered.reduce((sum, { atom: oxygen }) => sum + molecule.formalCharges[oxygen], 0);

  const label: LabelPart[] = [];
  const chain = chainOfEqualAtoms(molecule, atom, from);
  if (chain > 1) return [part(symbol, chain)];
  label.push(part(symbol));
  if (hydrogens > 0) label.push(part('H', hydrogens));
  const oxygenCount = oxo + gathered.length;
  if (oxygenCount > 0) label.push(part('O', oxygenCount));
  if (gathered.length > 0) {
    const rest = (rests[0] ?? []).map((one) => ({ ...one, charge: '' }));
    if (rest.length === 1) label.push(part(rest[0].of, rest[0].count * gathered.length));
    else if (rest.length > 1) label.push(...(gathered.length === 1 ? rest : [part(rest, gathered.length)]));
  }
  const total = charge + gatheredCharge;
  if (total !== 0) label[label.length - 1] = { ...label[label.length - 1], charge: chargeText(total) };

  // halogens first, then the branches; equal ones share a pair of parentheses and a subscript, the last one stands open
  const groups: { label: GroupLabel; order: number; count: number }[] = [];
  for (const { label: one, order } of remaining.sort((p, q) => p.label.length - q.label.length)) {
    const equal = groups.find((group) => group.order === order && sameLabel(group.label, one));
    if (equal) equal.count++;
    else groups.push({ label: one, order, count: 1 });
  }
  groups.forEach((group, n) => {
    const sign = bondSign(molecule, group, symbol);
    if (sign) label.push(part(sign));
    if (group.label.length === 1 && group.label[0].count === 1 && group.label[0].charge === '')
      label.push(part(group.label[0].of, group.count));
    else if (group.count === 1 && n === groups.length - 1) label.push(...group.label);
    else label.push(part(group.label, group.count));
  });
  return label;
}

/** Multiple bonds are written between carbons and between equal atoms, not where the trade leaves them out (CN, NCO). */
function bondSign(molecule: Molecule, group: { readonly label: GroupLabel; readonly order: number }, symbol: string): string {
  const next = group.label[0].of;
  if (group.order === 1 || typeof next !== 'string') return '';
  if (symbol === next && molecule.atomCount > 0) return group.order === 2 ? '=' : '≡';
  return symbol === 'C' && next === 'N' && group.order === 2 ? '=' : '';
}

function branch(molecule: Molecule, atom: number, from: number, depth: number): GroupLabel {
  if (isTerminal(molecule, atom)) return [part(symbolOf(molecule, atom), 1, chargeText(molecule.formalCharges[atom]))];
  if (depth >= 1) return condensed(molecule, atom, from, depth);
  const onlyHydrogens = surroundings(molecule, atom, from);
  if (onlyHydrogens.others.length === 0 && onlyHydrogens.oxo === 0 && molecule.atomicNumbers[atom] !== 6)
    return condensed(molecule, atom, from, 1);
  return [isAromaticAtom(molecule, atom) ? AROMATIC_REST : REST];
}

function sameLabel(p: GroupLabel, q: GroupLabel): boolean {
  return labelText(p) === labelText(q);
}

/** Azide: three equal atoms in a row without anything else are written with a subscript. */
function chainOfEqualAtoms(molecule: Molecule, atom: number, from: number): number {
  let length = 1;
  for (let at = atom, before = from; ; length++) {
    const { hydrogens, oxo, others } = surroundings(molecule, at, before);
    if (hydrogens > 0 || oxo > 0 || others.length > 1) return 1;
    if (others.length === 0) return length >= 3 ? length : 1;
    if (molecule.atomicNumbers[others[0].atom] !== molecule.atomicNumbers[atom] || molecule.atomicNumbers[atom] !== 7) return 1;
    before = at;
    at = others[0].atom;
  }
}

function alkylName(molecule: Molecule, atom: number, from: number): string {
  if (molecule.atomicNumbers[atom] !== 6) return '';
  const { hydrogens, oxo, others } = surroundings(molecule, atom, from);
  const methyls = others.filter(({ atom: other, order }) => order === 1 && isMethyl(molecule, other, atom)).length;
  if (oxo > 0 || methyls !== others.length) return '';
  if (methyls === 1 && hydrogens === 2) return 'C2H5';
  if (methyls === 2 && hydrogens === 1) return 'i-Pr';
  return methyls === 3 ? 't-Bu' : '';
}

function isMethyl(molecule: Molecule, atom: number, from: number): boolean {
  const { hydrogens, oxo, others, charge } = surroundings(molecule, atom, from);
  return molecule.atomicNumbers[atom] === 6 && hydrogens === 3 && oxo === 0 && others.length === 0 && charge === 0;
}

/** Name of the ring that the substituent begins with, if it has a short one. */
function ringName(molecule: Molecule, atom: number, from: number, depth: number): GroupLabel | undefined {
  const own = molecule.rings.filter((ring) => ring.includes(atom));
  const ring = own[0];
  const members = new Set(ring);
  const fused = own.length > 1 || molecule.rings.some((other) => other !== ring && other.some((member) => members.has(member)));
  if (!isAromaticAtom(molecule, atom)) {
    const bare = !fused && ring.every((member) => isBareCarbon(molecule, member, from, members));
    const name = bare ? SATURATED_RINGS[ring.length] : undefined;
    return name ? [part(name)] : undefined;
  }
  if (fused) return [AROMATIC_REST];
  const hetero = Array.from(ring).filter((member) => molecule.atomicNumbers[member] !== 6);
  const borne = Array.from(ring).flatMap((member) =>
    Array.from(neighboursOf(molecule, member))
      .filter((next) => next !== from && !members.has(next) && molecule.atomicNumbers[next] !== 1)
      .map((next) => ({ next, member })),
  );
  if (hetero.length > 0) {
    const name =
      hetero.length === 1 && borne.length === 0 ? HETEROAROMATIC_RINGS[`${ring.length}${symbolOf(molecule, hetero[0])}`] : undefined;
    return [name ? part(name) : AROMATIC_REST];
  }
  if (ring.length !== 6) return [AROMATIC_REST];
  if (borne.length === 0) return [part('Ph')];
  if (depth <= 1) return [AROMATIC_REST];
  const substituents = borne.map(({ next, member }) => branch(molecule, next, member, depth - 1));
  if (substituents.some((one) => !sameLabel(one, substituents[0]))) return [AROMATIC_REST];
  const [first] = substituents;
  const skeleton = [part('C', 6), ...(borne.length < 5 ? [part('H', 5 - borne.length)] : [])];
  if (first.length === 1 && first[0].count === 1) return [...skeleton, part(first[0].of, borne.length, first[0].charge)];
  const long = borne.length > 1 ? [...skeleton, part(first, borne.length)] : [...skeleton, ...first];
  return labelWidth(long, 1) <= LONGEST ? long : [...skeleton, part('R', borne.length)];
}

const SATURATED_RINGS: Readonly<Record<number, string>> = { 3: 'c-Pr', 4: 'c-Bu', 5: 'c-Pent', 6: 'c-Hex' };
const HETEROAROMATIC_RINGS: Readonly<Record<string, string>> = { '6N': 'pyridyl', '5O': 'furyl', '5S': 'thienyl', '5N': 'pyrrolyl' };

function isBareCarbon(molecule: Molecule, atom: number, from: number, ring: ReadonlySet<number>): boolean {
  return (
    molecule.atomicNumbers[atom] === 6 &&
    Array.from(neighboursOf(molecule, atom)).every((next) => {
      const order = molecule.bonds.order[bondBetween(molecule, atom, next)];
      return order === 1 && (next === from || ring.has(next) || molecule.atomicNumbers[next] === 1);
    })
  );
}

/**
 * Whether a chemist would call the atom aromatic at a glance: it lies in a five- or six-membered ring whose atoms all have a double bond within the
 * ring system, one oxygen, sulfur or nitrogen of a five-membered ring excepted. Only names depend on it.
 */
function isAromaticAtom(molecule: Molecule, atom: number): boolean {
  return molecule.rings.some((ring) => {
    if (!ring.includes(atom) || ring.length < 5 || ring.length > 6) return false;
    const saturated = Array.from(ring).filter((member) => !hasDoubleBondInRing(molecule, member));
    if (saturated.length === 0) return true;
    return ring.length === 5 && saturated.length === 1 && [7, 8, 16].includes(molecule.atomicNumbers[saturated[0]]);
  });
}

function hasDoubleBondInRing(molecule: Molecule, atom: number): boolean {
  return Array.from(neighboursOf(molecule, atom)).some(
    (next) =>
      molecule.bonds.order[bondBetween(molecule, atom, next)] === 2 &&
      molecule.rings.some((ring) => ring.includes(atom) && ring.includes(next)),
  );
}

/** An atom that shares a ring with the axis atom: its element with its hydrogens, and one short substituent. */
function ringMember(molecule: Molecule, atom: number, from: number): GroupLabel {
  const { hydrogens, oxo, others, charge } = surroundings(molecule, atom, from);
  const label = [part(symbolOf(molecule, atom)), ...(hydrogens > 0 ? [part('H', hydrogens)] : [])];
  if (charge !== 0) label[label.length - 1] = { ...label[label.length - 1], charge: chargeText(charge) };
  if (oxo > 0) return [...label, part(oxo === 1 ? '=' : ''), part('O', oxo)].filter(({ of }) => of !== '');
  const outside = others.filter(({ atom: next }) => !molecule.rings.some((ring) => ring.includes(atom) && ring.includes(next)));
  if (outside.length === 0) return label;
  if (outside.length > 1) {
    const pair = outside.map(({ atom: next }) => branch(molecule, next, atom, 0));
    return sameLabel(pair[0], pair[1]) && pair[0].length === 1 ? [...label, part(pair[0][0].of, 2)] : [...label, part('R', 2)];
  }
  const sign = outside[0].order === 2 ? '=' : '–';
  for (const depth of [Number.POSITIVE_INFINITY, 1]) {
    const long = [...label, part(sign), ...branch(molecule, outside[0].atom, atom, depth)];
    if (labelWidth(long, 1) <= LONGEST) return long;
  }
  return [...label, part(sign), isAromaticAtom(molecule, outside[0].atom) ? AROMATIC_REST : REST];
}

function symbolOf(molecule: Molecule, atom: number): string {
  return elementSymbol(molecule.atomicNumbers[atom]);
}
