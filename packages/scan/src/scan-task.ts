/** What is asked of a scan, checked and prepared. */
import { type Coordinates, type Molecule, type Note, TordialError, wrapDegrees } from '@tordial/geometry';
import { checkBent, type DrivenRotor, drivenRotor, intoRotorFrame } from './driven-rotor.js';
import type { Abortable } from './potential.js';
import type { Torsion } from './rotors/defining-torsion.js';

export interface ScanProgress {
  /** Steps done, and those in sight: `total` can grow or shrink as branches are found or turn out to be known. */
  readonly done: number;
  readonly total: number;
  /** The step just done: degrees, kcal/mol. */
  readonly angle: number;
  readonly energy: number;
}

export interface ScanOptions {
  /** Starting conformers, angstrom; each is turned to the nearest grid angle and followed from there. At least one. */
  readonly starts: readonly Coordinates[];
  /** `relaxed` (default) minimises everything else at each angle; `rigid` only turns the first start. */
  readonly kind?: 'relaxed' | 'rigid';
  /** Degrees between points, a divisor of 360 (of the range, where there is one); 10. */
  readonly step?: number;
  /** Degrees; -180. The grid is this plus multiples of the step. */
  readonly startAngle?: number;
  /**
   * First and last angle, degrees, less than 360 apart: only these angles are scanned, and the profile is open. A torsion inside a ring needs it.
   * What cannot be reached without breaking the ring is left out, with a note.
   */
  readonly range?: readonly [number, number];
  /**
   * Degrees, a divisor of 360 and a multiple of the step: only this much is scanned (and a step beyond its ends), the rest is copied from it, the rotor turned rigidly. For
   * rotors with a symmetric side; the copies are approximate.
   */
  readonly period?: number;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom; 1e-3. */
  readonly tolerance?: number;
  /** Evaluations that one relaxation may take; 1000. */
  readonly maxEvaluations?: number;
  /** `envelope` (default) searches for the lower envelope; `sweep` goes once round from the first start, upwards, and takes what it meets. */
  readonly search?: 'envelope' | 'sweep';
  readonly onProgress?: (progress: ScanProgress) => void;
  /** Stops the scan with the signal's reason. */
  readonly signal?: Abortable;
}

/** What every part of one scan needs, and what it counts. */
export interface ScanTask {
  readonly molecule: Molecule;
  readonly rotor: DrivenRotor;
  readonly kind: 'relaxed' | 'rigid';
  readonly options: ScanOptions;
  /** Grid angles, degrees, ascending; in [-180, 180) for the full turn. */
  readonly angles: readonly number[];
  /** Whether the last angle is followed by the first. */
  readonly closed: boolean;
  readonly step: number;
  readonly startAngle: number;
  /** As asked for; null for the full turn. */
  readonly range: readonly [number, number] | null;
  readonly period: number | null;
  readonly tolerance: number;
  readonly starts: readonly Coordinates[];
  readonly notes: Note[];
  done: number;
  evaluations: number;
}

/** Checks a request. Throws as `rotorScan` does. */
export function scanTask(molecule: Molecule, torsion: Torsion, options: ScanOptions): ScanTask {
  const { kind = 'relaxed', step = 10, startAngle = -180, range = null, period = null, tolerance = 1e-3, starts } = options;
  const rotor = drivenRotor(molecule, torsion, { rings: range !== null });
  if (!Number.isFinite(startAngle)) throw new TordialError('scan/grid', `the start angle must be a number of degrees, not ${startAngle}`);
  if (range && period !== null) throw new TordialError('scan/grid', 'a range and a period exclude each other: a range is scanned as it is');
  if (rotor.inRing && kind === 'rigid')
    throw new TordialError('scan/grid', 'a torsion inside a ring cannot be turned rigidly; scan it relaxed');
  if (period !== null) checkPeriod(period, step, options);
  const [from, to] = range ?? (period === null ? [startAngle, startAngle + 360] : periodAbout(period, step, startAngle));
  const beyond = period === null ? 0 : step;
  const angles = range || period !== null ? openGrid(from - beyond, to + beyond, step) : fullTurn(startAngle, step);
  if (!(tolerance > 0)) throw new TordialError('scan/grid', `the tolerance must be above 0, not ${tolerance}`);
  if (starts.length === 0) throw new TordialError('scan/start', 'a scan needs at least one starting geometry');
  for (const start of starts) {
    if (start.length !== 3 * molecule.atomCount)
      throw new TordialError('scan/start', `a start has ${start.length / 3} atoms and the molecule ${molecule.atomCount}`);
    checkBent(rotor, start);
  }
  return {
    molecule,
    rotor,
    kind,
    options,
    angles,
    closed: range === null && period === null,
    step,
    startAngle,
    range,
    period,
    tolerance,
    starts: starts.map((start) => {
      const framed = start.slice();
      intoRotorFrame(rotor, framed);
      return framed;
    }),
    notes: [],
    done: 0,
    evaluations: 0,
  };
}

/** Angles that go round once. */
export function fullTurn(startAngle: number, step: number): number[] {
  const count = Math.round(360 / step);
  if (!(step > 0 && count >= 3 && Math.abs(count * step - 360) < 1e-9))
    throw new TordialError('scan/grid', `a step of ${step} degrees does not divide 360 into at least 3 parts; try 5, 10 or 15`);
  return Array.from({ length: count }, (_, n) => {
    const angle = wrapDegrees(startAngle + n * step);
    // a third of a degree and the like must not make 180 out of -180
    return angle > 180 - 1e-9 ? angle - 360 : angle;
  }).sort((p, q) => p - q);
}

/** Angles from one end to the other, both included. */
function openGrid(from: number, to: number, step: number): number[] {
  if (!Number.isFinite(from) || !Number.isFinite(to) || !(to > from) || !(to - from < 360) || from < -360 || to > 360)
    throw new TordialError(
      'scan/range',
      `a range goes from a smaller to a larger angle, less than 360 degrees apart, within -360 to 360; not from ${from} to ${to}`,
    );
  const parts = Math.round((to - from) / step);
  if (!(step > 0 && parts >= 2 && Math.abs(parts * step - (to - from)) < 1e-9))
    throw new TordialError(
      'scan/range',
      `steps of ${step} degrees do not divide the range from ${from} to ${to} into at least 2 parts; change the step or an end`,
    );
  return Array.from({ length: parts + 1 }, (_, n) => from + n * step);
}

function checkPeriod(period: number, step: number, { kind, search }: ScanOptions): void {
  const count = Math.round(360 / period);
  const parts = Math.round(period / step);
  if (!(period > 0 && count >= 2 && Math.abs(count * period - 360) < 1e-9))
    throw new TordialError('scan/period', `a period of ${period} degrees does not go into 360 at least twice; scan the full turn`);
  if (!(parts >= 3 && Math.abs(parts * step - period) < 1e-9))
    throw new TordialError(
      'scan/period',
      `steps of ${step} degrees do not divide the period of ${period} degrees into at least 3 parts; choose another step`,
    );
  if (kind === 'rigid' || search === 'sweep')
    throw new TordialError(
      'scan/period',
      'only a relaxed scan for the lower envelope is shortened to one period; a rigid one is cheap as it is',
    );
}

/** One period of the grid, about 0 where the grid allows: mirror images are then within it. */
function periodAbout(period: number, step: number, startAngle: number): readonly [number, number] {
  const places = (startAngle + period / 2) / step;
  return Math.abs(places - Math.round(places)) < 1e-9 ? [-period / 2, period / 2] : [startAngle, startAngle + period];
}

/** Tells the caller of a step done. */
export function report(scan: ScanTask, angle: number, energy: number, total: number): void {
  scan.done++;
  scan.options.onProgress?.({ done: scan.done, total: Math.max(total, scan.done), angle, energy });
}
