import { bondBetween, elementSymbol, type Molecule, neighboursOf, TordialError } from '@tordial/geometry';
import { textWidth } from './text-width.js';

/** A group's condensed formula in parts, read from the bond outwards: `[O, CH3]` or `[N, (CH3)2]`. */
export type GroupLabel = readonly LabelPart[];

export interface LabelPart {
  /** An element, a unit that is never turned round (Ph, CO, C6H4), or a formula in parentheses; empty for a charge alone. */
  readonly of: string | GroupLabel;
  /** Subscript; 1 is not written. */
  readonly count: number;
  /** Hydrogens that follow. */
  readonly hydrogens: number;
  /** Superscript charge of what stands before, as '+' or '2−'; empty for none. */
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
const LONGEST = 4.3;

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

/** The same group written towards the bond instead of away from it: OCH3 becomes H3CO, CH2Ph becomes PhCH2. */
export function reversedLabel(label: GroupLabel): GroupLabel {
  const charges = label.filter(({ of }) => of === '');
  const parts = label.filter(({ of }) => of !== '');
  const reversed = parts.flatMap(({ of, hydrogens, ...rest }, n): LabelPart[] => {
    const turned = { ...rest, of: typeof of === 'string' ? of : reversedLabel(of), hydrogens };
    // hydrogens stand outermost where nothing else follows (H3C), else they stay behind their atom (RCH2)
    return hydrogens > 0 && n === parts.length - 1 ? [{ ...turned, hydrogens: 0 }, part('H', hydrogens)] : [turned];
  });
  return [...reversed.reverse(), ...charges];
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
    for (const { of, count, hydrogens, charge } of parts) {
      if (typeof of === 'string') for (const run of nameRuns(of)) add(run.text, run.shift);
      else {
        add('(', 'line');
        write(of);
        add(')', 'line');
      }
      if (count > 1) add(String(count), 'subscript');
      if (hydrogens > 0) add('H', 'line');
      if (hydrogens > 1) add(String(hydrogens), 'subscript');
      if (charge) add(charge, 'superscript');
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

function part(of: string | GroupLabel, count = 1, hydrogens = 0): LabelPart {
  return { of, count, hydrogens, charge: '' };
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

/** A charge stands behind everything that bears it. */
function chargeParts(charge: number): LabelPart[] {
  if (charge === 0) return [];
  const sign = charge > 0 ? '+' : '−';
  return [{ ...part(''), charge: Math.abs(charge) === 1 ? sign : `${Math.abs(charge)}${sign}` }];
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
  const symbol = symbolOf(molecule, atom);
  const chain = chainOfEqualAtoms(molecule, atom, from);
  if (chain > 1) return [part(symbol, chain)];

  const { hydrogens, oxo, others, charge } = surroundings(molecule, atom, from);
  const branches = others.map((other) => ({ ...other, label: branch(molecule, other.atom, atom, inRing ? 0 : depth - 1) }));
  const acid = gatheredOxygens(molecule, atom, oxo, branches);
  const remaining = branches.filter(({ atom: next }) => !acid?.atoms.has(next));
  const label: LabelPart[] = [];
  if (acid) {
    label.push(part(symbol, 1, hydrogens), { ...acid.oxygens });
    label.push(...acid.rest);
  } else if (oxo > 0 && hydrogens === 0 && others.length > 0) {
    // a carbonyl or sulfonyl keeps its order when the label is reversed: RCO, H2NSO2
    label.push(part(oxo > 1 ? `${symbol}O${oxo}` : `${symbol}O`));
  } else if (oxo > 0) label.push(part(symbol), ...(hydrogens > 0 ? [part('H', hydrogens)] : []), part('O', oxo));
  else label.push(part(symbol, 1, hydrogens));

  // equal branches share a pair of parentheses and a subscript, the last one stands open
  const groups: { label: GroupLabel; order: number; count: number }[] = [];
  for (const { label: one, order } of remaining.sort(
    (p, q) => Number(isRest(p.label)) - Number(isRest(q.label)) || p.label.length - q.label.length,
  )) {
    const equal = groups.find((group) => group.order === order && sameLabel(group.label, one));
    if (equal) equal.count++;
    else groups.push({ label: one, order, count: 1 });
  }
  groups.forEach((group, n) => {
    const sign = bondSign(group, symbol);
    const signed = sign ? [part(sign), ...group.label] : group.label;
    const [only] = signed;
    if (signed.length === 1 && only.count === 1 && only.hydrogens === 0 && only.charge === '') label.push(part(only.of, group.count));
    else if (group.count === 1 && n === groups.length - 1) label.push(...signed);
    else label.push(part(signed, group.count));
  });
  return [...label, ...chargeParts(charge + (acid?.charge ?? 0))];
}

interface Branch {
  readonly atom: number;
  readonly order: number;
  readonly label: GroupLabel;
}

/**
 * In acids and esters of carbon, phosphorus and sulfur the oxygens are counted together, and what the single-bonded ones bear follows: CO2H, SO3−,
 * PO3H2, CO2CH3. Undefined where there are none, or where they bear different things.
 */
function gatheredOxygens(
  molecule: Molecule,
  atom: number,
  oxo: number,
  branches: readonly Branch[],
): { readonly atoms: ReadonlySet<number>; readonly oxygens: LabelPart; readonly rest: GroupLabel; readonly charge: number } | undefined {
  const single = branches.filter(
    ({ atom: next, order, label }) => order === 1 && molecule.atomicNumbers[next] === 8 && label[0].of === 'O',
  );
  if (oxo === 0 || single.length === 0 || ![6, 15, 16].includes(molecule.atomicNumbers[atom])) return undefined;
  if (single.some(({ label }) => !sameLabel(label, single[0].label))) return undefined;
  const [first, ...rest] = single[0].label.filter(({ of }) => of !== '');
  if (first.count > 1) return undefined;
  const simple = rest.length === 1 && rest[0].count === 1 && rest[0].hydrogens === 0;
  return {
    atoms: new Set(single.map(({ atom: next }) => next)),
    oxygens: part('O', oxo + single.length, first.hydrogens * single.length),
    rest: rest.length === 0 || single.length === 1 ? rest : [simple ? part(rest[0].of, single.length) : part(rest, single.length)],
    charge: single.reduce((sum, { atom: next }) => sum + molecule.formalCharges[next], 0),
  };
}

function isRest(label: GroupLabel): boolean {
  return label[0] === REST || label[0] === AROMATIC_REST;
}

/** Multiple bonds are written between carbons and between equal atoms, not where the trade leaves them out (CN, NCO). */
function bondSign({ label, order }: { readonly label: GroupLabel; readonly order: number }, symbol: string): string {
  const next = label[0].of;
  if (order === 1 || typeof next !== 'string') return '';
  if (symbol === next || isRest(label)) return order === 2 ? '=' : '≡';
  return symbol === 'C' && next === 'N' && order === 2 ? '=' : '';
}

function branch(molecule: Molecule, atom: number, from: number, depth: number): GroupLabel {
  if (isTerminal(molecule, atom)) return [part(symbolOf(molecule, atom)), ...chargeParts(molecule.formalCharges[atom])];
  if (depth >= 1) return withoutHyphens(condensed(molecule, atom, from, depth));
  const { others, oxo } = surroundings(molecule, atom, from);
  if (others.length === 0 && oxo === 0 && molecule.atomicNumbers[atom] !== 6) return condensed(molecule, atom, from, 1);
  return [isAromaticAtom(molecule, atom) ? AROMATIC_REST : REST];
}

/** t-Bu stands alone, OtBu within a formula. */
function withoutHyphens(label: GroupLabel): GroupLabel {
  return label.map((one) => (typeof one.of === 'string' ? { ...one, of: one.of.replace('-', '') } : one));
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
  const hydrogens = 5 - borne.length;
  const skeleton = hydrogens === 0 ? part('C', 6) : part(hydrogens === 1 ? 'C6H' : `C6H${hydrogens}`);
  const single = first.length === 1 && first[0].count === 1 && first[0].hydrogens === 0;
  const long = [skeleton, ...(single ? [part(first[0].of, borne.length)] : borne.length > 1 ? [part(first, borne.length)] : first)];
  return labelWidth(long, 1) <= LONGEST ? long : [skeleton, part('R', borne.length)];
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
  const label = [part(symbolOf(molecule, atom), 1, hydrogens), ...chargeParts(charge)];
  if (oxo > 0) return [...label, ...(oxo === 1 ? [part('=')] : []), part('O', oxo)];
  const outside = others.filter(({ atom: next }) => !molecule.rings.some((ring) => ring.includes(atom) && ring.includes(next)));
  if (outside.length === 0) return label;
  if (outside.length > 1) {
    const [p, q] = outside.map(({ atom: next }) => branch(molecule, next, atom, 0));
    return [...label, part(p.length === 1 && sameLabel(p, q) ? p[0].of : 'R', outside.length)];
  }
  const [{ atom: next, order }] = outside;
  const sign = part(order === 2 ? '=' : '–');
  for (const depth of [Number.POSITIVE_INFINITY, 1]) {
    const long = [...label, sign, ...branch(molecule, next, atom, depth)];
    if (labelWidth(long, 1) <= LONGEST) return long;
  }
  return [...label, sign, isAromaticAtom(molecule, next) ? AROMATIC_REST : REST];
}

function symbolOf(molecule: Molecule, atom: number): string {
  return elementSymbol(molecule.atomicNumbers[atom]);
}
