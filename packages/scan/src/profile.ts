/** The result of a scan. */
import type { Coordinates, Note } from '@tordial/geometry';
import type { DrivenRotor } from './driven-rotor.js';
import type { CurvePoint } from './profile-curve.js';
import type { StationaryPoint } from './refined-extrema.js';
import type { Torsion } from './rotors/defining-torsion.js';
import type { ScanTask } from './scan-task.js';

export interface ScanPoint extends CurvePoint {
  readonly converged: boolean;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom; null for a rigid scan. */
  readonly residual: number | null;
  /** Angstrom, in the rotor's frame. */
  readonly coordinates: Coordinates;
  /** The angle (degrees) of the point that this one is copied from. */
  readonly copyOf?: number;
}

/** A scan's result. Angles in degrees, energies in kcal/mol, torques in kcal/mol/radian, coordinates in angstrom. */
export interface Profile {
  readonly kind: 'relaxed' | 'rigid';
  readonly torsion: Torsion;
  readonly sides: DrivenRotor['sides'];
  readonly step: number;
  readonly startAngle: number;
  /** First and last angle asked for, where the profile covers a range only; null for the full turn. */
  readonly range: readonly [number, number] | null;
  /** Degrees that were scanned, where the rest of the turn is copied from them; null where all was. */
  readonly period: number | null;
  readonly tolerance: number;
  /** One a grid angle, ascending; in [-180, 180) for the full turn. */
  readonly points: readonly ScanPoint[];
  /** Wells, barriers and crossings, ascending by angle. */
  readonly stationaryPoints: readonly StationaryPoint[];
  readonly notes: readonly Note[];
  /** Energies and gradients asked for. */
  readonly evaluations: number;
}

/** The profile that a scan has come to. */
export function profileOf(scan: ScanTask, points: readonly ScanPoint[], stationaryPoints: readonly StationaryPoint[]): Profile {
  const { kind, rotor, step, startAngle, range, period, tolerance, notes, evaluations } = scan;
  const { torsion, sides } = rotor;
  return { kind, torsion, sides, step, startAngle, range, period, tolerance, points, stationaryPoints, notes, evaluations };
}
