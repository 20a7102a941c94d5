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
  /** Degrees between points, a divisor of 360; 10. */
  readonly step?: number;
  /** Degrees; -180. The grid is this plus multiples of the step. */
  readonly startAngle?: number;
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
  /** Grid angles, degrees, ascending in [-180, 180). */
  readonly angles: readonly number[];
  readonly step: number;
  readonly startAngle: number;
  readonly tolerance: number;
  readonly starts: readonly Coordinates[];
  readonly notes: Note[];
  done: number;
  evaluations: number;
}

/** Checks a request. Throws as `rotorScan` does. */
export function scanTask(molecule: Molecule, torsion: Torsion, options: ScanOptions): ScanTask {
  const { kind = 'relaxed', step = 10, startAngle = -180, tolerance = 1e-3, starts } = options;
  const rotor = drivenRotor(molecule, torsion);
  const count = Math.round(360 / step);
  if (!(step > 0 && count >= 3 && Math.abs(count * step - 360) < 1e-9))
    throw new TordialError('scan/grid', `a step of ${step} degrees does not divide 360 into at least 3 parts; try 5, 10 or 15`);
  if (!Number.isFinite(startAngle)) throw new TordialError('scan/grid', `the start angle must be a number of degrees, not ${startAngle}`);
  if (!(tolerance > 0)) throw new TordialError('scan/grid', `the tolerance must be above 0, not ${tolerance}`);
  if (starts.length === 0) throw new TordialError('scan/start', 'a scan needs at least one starting geometry');
  for (const start of starts) {
    if (start.length !== 3 * molecule.atomCount)
      throw new TordialError('scan/start', `a start has ${start.length / 3} atoms and the molecule ${molecule.atomCount}`);
    checkBent(rotor, start);
  }
  const angles = Array.from({ length: count }, (_, n) => {
    const angle = wrapDegrees(startAngle + n * step);
    // a third of a degree and the like must not make 180 out of -180
    return angle > 180 - 1e-9 ? angle - 360 : angle;
  }).sort((p, q) => p - q);
  return {
    molecule,
    rotor,
    kind,
    options,
    angles,
    step,
    startAngle,
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

/** Tells the caller of a step done. */
export function report(scan: ScanTask, angle: number, energy: number, total: number): void {
  scan.done++;
  scan.options.onProgress?.({ done: scan.done, total: Math.max(total, scan.done), angle, energy });
}
