/**
 * Reference energies of a torsion: a table, a profile document, or the frames of an XYZ file, checked before anything is fitted to them.
 */
import {
  type Coordinates,
  covalentRadius,
  degrees,
  distance,
  geometriesFor,
  type Molecule,
  type Note,
  readXyz,
  TordialError,
  torsion,
  wrapDegrees,
} from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { moleculeOfDocument } from '../document-molecule.js';
import { kcalPer } from '../energy-unit.js';
import { atomMappings, graphOfGeometry } from './map-atoms.js';

export interface ReferencePoint {
  /** Degrees in [-180, 180). */
  readonly angle: number;
  /** kcal/mol, any zero. */
  readonly energy: number;
  readonly weight?: number;
  /** Angstrom, atoms in the order of the molecule that is fitted. */
  readonly coordinates?: Coordinates;
}

export interface Reference {
  /** What it is, in words. */
  readonly source: string;
  /** Ascending by angle, each angle once. */
  readonly points: readonly ReferencePoint[];
  readonly notes: readonly Note[];
}

export const ENERGY_UNITS = ['kcal/mol', 'kJ/mol', 'hartree', 'eV'] as const;
export type ReferenceUnit = (typeof ENERGY_UNITS)[number];

/** kcal/mol in one of each unit: CODATA 2018 (E. Tiesinga et al., Rev. Mod. Phys. 93, 025010 (2021)); thermochemical calorie. */
const KCAL: Readonly<Record<ReferenceUnit, number>> = {
  'kcal/mol': 1,
  'kJ/mol': kcalPer('kJ/mol'),
  hartree: 627.5094740631,
  eV: 23.060547830619,
};

const UNIT_PATTERN = /kcal\s*(?:\/|\s+per\s+)\s*mol|kJ\s*(?:\/|\s+per\s+)\s*mol|hartree|\bE_?h\b|\ba\.?u\.?\b|\beV\b/i;

function unitNamed(text: string): ReferenceUnit | undefined {
  const word = UNIT_PATTERN.exec(text)?.[0].toLowerCase();
  if (word === undefined) return undefined;
  return word.startsWith('kcal') ? 'kcal/mol' : word.startsWith('kj') ? 'kJ/mol' : word === 'ev' ? 'eV' : 'hartree';
}

/** What a reference is for: the molecule and the torsion that is driven. */
export interface ReferenceTarget {
  readonly molecule: Molecule;
  readonly torsion: readonly [number, number, number, number];
}

/**
 * A table with a header: an angle in degrees (a column called angle, torsion, dihedral or phi), an energy whose unit the header states, and
 * perhaps a weight; separated by commas, semicolons, tabs or blanks, lines that begin with # left out.
 *
 * Throws `reference/table`, `reference/unit` and `reference/value`, with the line.
 */
export function referenceOfTable(text: string, unit?: ReferenceUnit): Reference {
  const lines = text.split(/\r\n|\n|\r/).map((content, n) => ({ content: content.trim(), line: n + 1 }));
  const rows = lines.filter(({ content }) => content !== '' && !content.startsWith('#'));
  if (rows.length < 2) throw new TordialError('reference/table', 'the table holds no row; give a header and one line for each angle');
  const [head, ...body] = rows;
  const separator = [',', ';', '\t'].find((mark) => head.content.includes(mark)) ?? /\s{2,}/;
  const titles = head.content.split(separator).map((title) => title.trim().replace(/^"|"$/g, ''));
  const column = (pattern: RegExp): number => titles.findIndex((title) => pattern.test(title));
  const angleAt = column(/^(torsion |dihedral )?(angle|torsion|dihedral|phi)\b/i);
  const energyAt = column(/^(energy|e\b)/i) >= 0 ? column(/^(energy|e\b)/i) : column(/energy/i);
  const weightAt = column(/^weight/i);
  if (angleAt < 0 || energyAt < 0)
    throw new TordialError(
      'reference/table',
      `line ${head.line}: the header '${head.content}' names no ${angleAt < 0 ? 'angle' : 'energy'}; write one such as: angle (degree),energy (kcal/mol)`,
      { line: head.line },
    );
  const stated = unitNamed(titles[energyAt]) ?? unit;
  if (!stated)
    throw new TordialError(
      'reference/unit',
      `the header '${titles[energyAt]}' states no unit of energy; write one of ${ENERGY_UNITS.join(', ')} in brackets behind it`,
      {
        line: head.line,
      },
    );
  const points = body.map(({ content, line }) => {
    const cells = content.split(separator).map((cell) => cell.trim());
    const value = (at: number): number => {
      const read = cells[at] === undefined || cells[at] === '' ? Number.NaN : Number(cells[at]);
      if (!Number.isFinite(read))
        throw new TordialError('reference/value', `line ${line}: '${cells[at] ?? ''}' under '${titles[at]}' is no finite number`, { line });
      return read;
    };
    return {
      angle: wrapDegrees(value(angleAt)),
      energy: value(energyAt) * KCAL[stated],
      ...(weightAt >= 0 ? { weight: value(weightAt) } : {}),
    };
  });
  return checkedReference(`table of ${points.length} angles, energies in ${stated}`, points, []);
}

/** The points of a profile document, its atoms mapped onto the molecule that is fitted. Throws `reference/molecule`, and as `checkedReference` does. */
export function referenceOfProfile(document: ProfileDocument, target: ReferenceTarget): Reference {
  const factor = kcalPer(document.unit);
  const from = moleculeOfDocument(document.molecule);
  const geometries = document.points.map(({ coordinates }) => Float64Array.from(coordinates));
  const sameAtoms = from.bonds.a.join() === target.molecule.bonds.a.join() && from.bonds.b.join() === target.molecule.bonds.b.join();
  const identical = sameAtoms && from.atomicNumbers.join() === target.molecule.atomicNumbers.join();
  const mapped = identical
    ? { geometries, notes: [] }
    : mapGeometries(
        from,
        geometries,
        target,
        document.points.map(({ angle }) => angle),
      );
  const sameTorsion = identical && document.rotor.torsion.join() === target.torsion.join();
  const open = document.points.filter(({ converged }) => !converged);
  const notes = [...mapped.notes];
  if (open.length > 0)
    notes.push({
      code: 'reference/not-converged',
      message: `${open.length} points of the reference profile did not converge and are left out`,
    });
  const points = document.points.flatMap((point, n) => {
    if (!point.converged) return [];
    const coordinates = mapped.geometries[n];
    const measured = measuredAngle(coordinates, target);
    if (sameTorsion) checkAngle(point.angle, measured, n);
    return [{ angle: sameTorsion ? point.angle : measured, energy: point.energy * factor, coordinates }];
  });
  if (!sameTorsion)
    notes.push({
      code: 'reference/angle-measured',
      message: `the reference drives another torsion; its angles are measured at ${target.torsion.join('-')}`,
    });
  return checkedReference(`profile, ${document.provenance.potential}`, points, notes);
}

/**
 * Frames of an XYZ file with the energy in each comment line: `energy -151.23 hartree`, `E = 3.2 kcal/mol`, or a number alone when `unit` is
 * given. A stated angle (`60 degree`, `angle 60`) is checked against that of the geometry.
 *
 * Throws `reference/comment`, `reference/unit`, `reference/molecule`, `reference/angle`, and as `readXyz` and `checkedReference` do.
 */
export function referenceOfFrames(text: string, target: ReferenceTarget, unit?: ReferenceUnit): Reference {
  const frames = readXyz(text);
  const stated = frames.map(({ comment, line }, n) => readComment(comment, unit, n + 1, line + 1));
  const notes: Note[] = [];
  let geometries: Coordinates[];
  try {
    geometries = geometriesFor(target.molecule, frames);
    for (const x of geometries) checkBonds(target.molecule, x);
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    const [first] = frames;
    if (frames.some(({ elements }) => elements.join() !== first.elements.join()))
      throw new TordialError(
        'reference/molecule',
        'the frames of the reference differ in their atoms; they must be one molecule in one order',
      );
    const mapped = mapGeometries(
      graphOfGeometry(first.elements, first.coordinates),
      frames.map(({ coordinates }) => coordinates),
      target,
      stated.map(({ angle }) => angle),
    );
    geometries = mapped.geometries;
    notes.push(...mapped.notes);
  }
  const points = geometries.map((coordinates, n) => {
    const measured = measuredAngle(coordinates, target);
    const { angle, energy } = stated[n];
    if (angle !== undefined) checkAngle(angle, measured, n);
    return { angle: angle === undefined ? measured : wrapDegrees(angle), energy, coordinates };
  });
  return checkedReference(`${frames.length} XYZ frames`, points, notes);
}

const NUMBER = '([-+]?(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][-+]?\\d+)?|nan|inf\\w*)';

function readComment(
  comment: string,
  unit: ReferenceUnit | undefined,
  frame: number,
  line: number,
): { energy: number; angle: number | undefined } {
  const named = new RegExp(`(?:^|[\\s;,])(?:E|(?<!relative )energy)\\b\\s*(?:\\([^)]*\\))?\\s*[=:]?\\s*${NUMBER}\\s*(\\S*)`, 'i').exec(
    comment,
  );
  const alone = named ? null : new RegExp(`^\\s*${NUMBER}\\s*(\\S*)`, 'i').exec(comment);
  const found = named ?? alone;
  if (!found)
    throw new TordialError(
      'reference/comment',
      `frame ${frame}: the comment '${comment}' holds no energy; write one such as: energy -151.234 hartree`,
      { line },
    );
  const energy = Number(found[1]);
  if (!Number.isFinite(energy))
    throw new TordialError('reference/value', `frame ${frame}: the energy '${found[1]}' is no finite number`, { line });
  const stated = unitNamed(found[2]) ?? unitNamed(named ? named[0] : '') ?? unit;
  if (!stated)
    throw new TordialError(
      'reference/unit',
      `frame ${frame}: the comment '${comment}' states no unit; write one of ${ENERGY_UNITS.join(', ')} behind the energy`,
      { line },
    );
  const angle = new RegExp(`${NUMBER}\\s*(?:degrees?\\b|deg\\b|°)|(?:angle|phi|dihedral)\\s*[=:]?\\s*${NUMBER}`, 'i').exec(comment);
  const value = angle ? Number(angle[1] ?? angle[2]) : undefined;
  return { energy: energy * KCAL[stated], angle: value };
}

/** Degrees by which a measured angle may differ from the stated one. */
const ANGLE_ERROR = 1;

function checkAngle(stated: number, measured: number, n: number): void {
  if (Math.abs(wrapDegrees(stated - measured)) > ANGLE_ERROR)
    throw new TordialError(
      'reference/angle',
      `point ${n + 1} of the reference states ${stated} degrees and its geometry has ${measured.toFixed(1)}; the torsion or the order of the atoms is another`,
    );
}

function measuredAngle(x: Coordinates, { torsion: [i, a, b, j] }: ReferenceTarget): number {
  return wrapDegrees(degrees(torsion(x, i, a, b, j)));
}

function checkBonds({ bonds, atomicNumbers }: Molecule, x: Coordinates): void {
  for (let n = 0; n < bonds.count; n++) {
    const [a, b] = [bonds.a[n], bonds.b[n]];
    if (distance(x, a, b) > 1.4 * (covalentRadius(atomicNumbers[a]) + covalentRadius(atomicNumbers[b])))
      throw new TordialError(
        'reference/molecule',
        `atoms ${a} and ${b} are bonded and lie ${distance(x, a, b).toFixed(2)} angstrom apart in the reference`,
      );
  }
}

/** Geometries in the atom order of the target, by the mapping whose measured angles are closest to the stated ones. */
function mapGeometries(
  from: Parameters<typeof atomMappings>[0],
  geometries: readonly Coordinates[],
  target: ReferenceTarget,
  stated: readonly (number | undefined)[],
): { geometries: Coordinates[]; notes: Note[] } {
  const mappings = atomMappings(from, target.molecule);
  if (mappings.length === 0)
    throw new TordialError(
      'reference/molecule',
      'the reference is another molecule: no mapping keeps elements and bonds; give a reference of the molecule that the profile is of',
    );
  const moved = (mapping: Int32Array, x: Coordinates): Coordinates => {
    const out = new Float64Array(x.length);
    mapping.forEach((to, i) => {
      out.set(x.subarray(3 * i, 3 * i + 3), 3 * to);
    });
    return out;
  };
  const misfit = (mapping: Int32Array): number =>
    geometries.reduce((sum, x, n) => {
      const angle = stated[n];
      return angle === undefined ? sum : sum + Math.abs(wrapDegrees(measuredAngle(moved(mapping, x), target) - angle));
    }, 0);
  let best = mappings[0];
  let least = misfit(best);
  // mappings that differ only in atoms outside of the torsion measure the same
  const seen = new Set<string>();
  for (const mapping of mappings) {
    const key = target.torsion.map((atom) => mapping.indexOf(atom)).join();
    if (seen.has(key)) continue;
    seen.add(key);
    const error = misfit(mapping);
    if (error < least - 1e-6) [best, least] = [mapping, error];
  }
  return {
    geometries: geometries.map((x) => moved(best, x)),
    notes: [
      {
        code: 'reference/mapped',
        message: `the reference has its atoms in another order; they are mapped by the molecular graph: ${Array.from(best).join(', ')}`,
      },
    ],
  };
}

const SAME_ANGLE = 1e-3;
const SAME_ENERGY = 0.01;
const WIDE_GAP = 60;
/** Energy ranges of torsions, kcal/mol, beyond which the unit is likely another. */
const HUGE_RANGE = 1000;
const LARGE_RANGE = 100;
const TINY_RANGE = 0.05;

/**
 * Sorts the points and looks at them as a whole.
 *
 * Throws `reference/points` for fewer than 3, `reference/value` for values that are no numbers, `reference/duplicate` for one angle with two
 * energies, `reference/unit` for a range that no torsion has. Notes tell of duplicates with one energy, gaps, jumps and odd ranges.
 */
export function checkedReference(source: string, given: readonly ReferencePoint[], before: readonly Note[]): Reference {
  const notes = [...before];
  for (const { angle, energy } of given)
    if (!Number.isFinite(angle) || !Number.isFinite(energy))
      throw new TordialError('reference/value', `the reference has the energy ${energy} at ${angle} degrees; all must be finite numbers`);
  const sorted = given.map((point) => ({ ...point, angle: wrapDegrees(point.angle) })).sort((p, q) => p.angle - q.angle);
  const points: ReferencePoint[] = [];
  for (const point of sorted) {
    const twin = [points[points.length - 1], points[0]].find(
      (other) => other && Math.abs(wrapDegrees(other.angle - point.angle)) < SAME_ANGLE,
    );
    if (!twin) {
      points.push(point);
      continue;
    }
    if (Math.abs(twin.energy - point.energy) > SAME_ENERGY)
      throw new TordialError(
        'reference/duplicate',
        `the reference has two energies at ${point.angle} degrees, ${Math.abs(twin.energy - point.energy).toFixed(3)} kcal/mol apart; keep the lower one`,
      );
    notes.push({
      code: 'reference/duplicate',
      message: `the angle ${point.angle} stands twice in the reference with one energy and counts once`,
    });
  }
  if (points.length < 3)
    throw new TordialError(
      'reference/points',
      `the reference has ${points.length} different angles; a fit needs at least 3, and more than it has terms`,
    );

  const energies = points.map(({ energy }) => energy);
  const range = Math.max(...energies) - Math.min(...energies);
  const size = Math.max(...energies.map(Math.abs));
  if (range > HUGE_RANGE)
    throw new TordialError(
      'reference/unit',
      `the reference spans ${range.toPrecision(4)} kcal/mol: no torsion does; the energies are likely of another unit than stated (kcal/mol or kJ/mol stated as hartree?), or atoms lie on each other`,
    );
  if (range < TINY_RANGE && size > 1000 * range && size > 10)
    throw new TordialError(
      'reference/unit',
      `the reference spans only ${range.toPrecision(3)} kcal/mol on values near ${energies[0].toPrecision(6)}: a table in hartree read as kcal/mol looks like that; state the unit, or subtract the lowest energy if it is right`,
    );
  if (range > LARGE_RANGE)
    notes.push({
      code: 'reference/range',
      message: `the reference spans ${range.toFixed(0)} kcal/mol, much for a torsion; are unit and geometries right?`,
    });
  const gaps = points.map(({ angle }, n) => ({
    after: angle,
    width: (n + 1 < points.length ? points[n + 1].angle : points[0].angle + 360) - angle,
  }));
  const half = points.every(({ angle }) => angle >= 0 || angle === -180) || points.every(({ angle }) => angle <= 0);
  for (const { after, width } of gaps)
    if (width > WIDE_GAP && !(half && width >= 150))
      notes.push({
        code: 'reference/gap',
        message: `no point of the reference lies within the ${width.toFixed(0)} degrees after ${after} degrees; the fit is not held there`,
      });
  notes.push(...jumps(points));
  return { source, points, notes };
}

/** Points far off the cubic through their four neighbours: not relaxed, or on another branch. */
function jumps(points: readonly ReferencePoint[]): Note[] {
  const off: { angle: number; by: number }[] = [];
  for (let n = 2; n + 2 < points.length; n++) {
    const around = [n - 2, n - 1, n + 1, n + 2].map((k) => points[k]);
    if (around[3].angle - around[0].angle > 120) continue;
    const at = points[n].angle;
    const expected = around.reduce(
      (sum, p) => sum + p.energy * around.reduce((product, q) => (q === p ? product : (product * (at - q.angle)) / (p.angle - q.angle)), 1),
      0,
    );
    off.push({ angle: at, by: Math.abs(points[n].energy - expected) });
  }
  const typical = off.map(({ by }) => by).sort((p, q) => p - q)[Math.floor(off.length / 2)] ?? 0;
  const limit = Math.max(1, 6 * typical);
  const wild = off.filter(({ by }, n) => by > limit && by >= Math.max(off[n - 1]?.by ?? 0, off[n + 1]?.by ?? 0));
  return wild.map(({ angle, by }) => ({
    code: 'reference/jump',
    message: `the reference jumps by ${by.toFixed(2)} kcal/mol at ${angle} degrees; that point may not be relaxed, or lie on another branch`,
  }));
}
