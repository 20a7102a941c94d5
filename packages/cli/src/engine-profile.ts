/** A force field's profile taken over by an engine: its energies at the same geometries, or relaxed again with its gradients. */

import { moleculeOfDocument } from '@tordial/analysis';
import type { Engine, EngineConfig } from '@tordial/engines';
import { mmff94 } from '@tordial/forcefield';
import { type Coordinates, radians, TordialError, wrapDegrees } from '@tordial/geometry';
import {
  drive,
  driveAsync,
  drivenRotor,
  modelHessian,
  type ProfileDocument,
  type ProfilePoint,
  type ProfileStationaryPoint,
  perKcal,
  profileCurve,
  relaxationAt,
  rounded,
} from '@tordial/scan';
import { VERSION } from './version.js';

export interface EngineProfileOptions {
  /** Energies at the profile's own geometries instead of a relaxation at each angle. */
  readonly singlePoints?: boolean;
  /** Evaluations that one relaxation may take; 60. */
  readonly maxEvaluations?: number;
  readonly onProgress?: (progress: { readonly done: number; readonly total: number }) => void;
  readonly signal?: AbortSignal;
}

/** Largest gradient component that counts as converged, kcal/mol/angstrom (4e-5 hartree/bohr). */
const ENGINE_TOLERANCE = 0.05;

/** What the engine says of one geometry at an angle; energies in kcal/mol, torque in kcal/mol/radian. */
interface EnginePoint {
  readonly angle: number;
  readonly energy: number;
  readonly torque: number;
  readonly converged: boolean;
  readonly residual: number | null;
  readonly coordinates: Coordinates;
}

/**
 * The profile of an engine, started from the geometries of `profile`. Relaxations hold the angle exactly, use the same minimiser as the force field and its model
 * Hessian as preconditioner. The torques of single points are slopes of the curve through the energies. Points that are mirror images of
 * each other are computed once.
 *
 * Rejects as the engine's methods do; `scan/energy` for an energy that is no number.
 */
export async function engineProfile(
  profile: ProfileDocument,
  engine: Engine,
  config: EngineConfig,
  { singlePoints = false, maxEvaluations = 60, onProgress, signal }: EngineProfileOptions = {},
): Promise<ProfileDocument> {
  const molecule = moleculeOfDocument(profile.molecule);
  const { torsion } = profile.rotor;
  const rotor = drivenRotor(molecule, torsion);
  // the noise of a self-consistent field's gradient lies above what a force field is converged to
  const tolerance = Math.max(profile.settings.tolerance, ENGINE_TOLERANCE);

  const single = async (angle: number, coordinates: Coordinates): Promise<EnginePoint> => {
    const energy = await engine.energy(coordinates);
    return { angle, energy: checked(energy, angle), torque: 0, converged: true, residual: null, coordinates };
  };
  const relaxed = async (angle: number, start: Coordinates): Promise<EnginePoint> => {
    // a preconditioner of its own: relaxations run side by side
    const relaxation = relaxationAt(rotor, modelHessian(molecule, torsion), radians(angle), start, { tolerance, maxEvaluations });
    const { energy, torque, converged, gradientMax, coordinates } = await driveAsync(relaxation, engine, signal);
    return { angle, energy: checked(energy, angle), torque, converged, residual: gradientMax, coordinates };
  };
  const at = singlePoints ? single : relaxed;

  let done = 0;
  const geometries = profile.points.map(({ coordinates }) => Float64Array.from(coordinates));
  const opposite = geometries.map((x, n) => geometries.findIndex((y, m) => m < n && areMirrorImages(x, y)));
  const total = opposite.filter((m) => m < 0).length;
  const asked = geometries.map((x, n) => {
    if (opposite[n] >= 0) return null;
    return at(profile.points[n].angle, x).then((point) => {
      onProgress?.({ done: ++done, total });
      return point;
    });
  });
  const own = await Promise.all(asked);
  const points = own.map((point, n): EnginePoint => {
    const source = point ?? own[opposite[n]];
    if (!source) throw new TordialError('scan/energy', `there is no energy at ${profile.points[n].angle} degrees`);
    return point ?? { ...source, angle: profile.points[n].angle, torque: -source.torque, coordinates: mirrored(source.coordinates) };
  });
  const joined = withSlopes(points, profile, singlePoints);

  // wells and barriers of the curve, at the geometry the force field has there or relaxed from the nearest point
  const field = mmff94(molecule, { variant: /^MMFF94(?!s)/.test(profile.provenance.potential) ? 'MMFF94' : 'MMFF94s' });
  const stationaryPoints = await Promise.all(
    (isWholeTurn(profile) ? profileCurve(joined).extrema : []).map(async ({ kind, angle, energy }) => {
      const near = points.reduce((best, point) => (away(point.angle, angle) < away(best.angle, angle) ? point : best));
      const start = singlePoints
        ? drive(relaxationAt(rotor, modelHessian(molecule, torsion), radians(angle), near.coordinates, { tolerance }), field).coordinates
        : near.coordinates;
      const found = await at(angle, start);
      return { kind, ...found, energy: kind === 'crossing' ? energy : found.energy };
    }),
  );

  const factor = perKcal(profile.unit);
  const lowest = Math.min(...joined.map(({ energy }) => energy), ...stationaryPoints.map(({ energy }) => energy));
  const common = (point: EnginePoint) => ({
    angle: rounded(point.angle),
    energy: rounded(point.energy * factor),
    relativeEnergy: rounded((point.energy - lowest) * factor),
    torque: rounded(point.torque * factor),
    converged: point.converged,
    coordinates: Array.from(point.coordinates, rounded),
  });
  const open = joined.filter(({ converged }) => !converged);
  const { molecule: described, settings, unit } = profile;
  return {
    schema: profile.schema,
    molecule: described,
    unit,
    settings: { ...settings, tolerance },
    rotor: { ...profile.rotor, parameters: [] },
    points: joined.map(
      (point): ProfilePoint => ({
        ...common(point),
        residual: point.residual === null ? null : rounded(point.residual),
        breakAfter: point.breakAfter,
        beyond: null,
        before: null,
      }),
    ),
    stationaryPoints: stationaryPoints.map((point): ProfileStationaryPoint => ({ ...common(point), kind: point.kind })),
    notes: [
      ...profile.notes.filter(({ code }) => !code.startsWith('scan/')),
      ...open.map(({ angle, residual }) => ({
        code: 'scan/not-converged',
        message: `the point at ${angle} degrees did not converge: largest gradient component ${residual?.toPrecision(2)} kcal/mol/angstrom`,
      })),
      {
        code: singlePoints ? 'engine/single-points' : 'engine/one-branch',
        message: singlePoints
          ? `energies of the engine at geometries relaxed with ${profile.provenance.potential}; torques are slopes of the curve through them`
          : `each angle was relaxed with the engine from the geometry of ${profile.provenance.potential}; other conformers were not searched with the engine`,
      },
    ],
    provenance: {
      program: 'tordial',
      version: VERSION,
      potential: `${config.method}${config.basis ? `/${config.basis}` : ''}`,
      engine: { command: config.command, method: config.method, basis: config.basis ?? null, keywords: config.keywords ?? {} },
      geometries: profile.provenance.potential,
    },
  };
}

function checked(energy: number, angle: number): number {
  if (Number.isFinite(energy)) return energy;
  throw new TordialError('scan/energy', `the engine gives no finite energy at ${angle} degrees`);
}

function away(p: number, q: number): number {
  return Math.abs(wrapDegrees(p - q));
}

/** In the rotor's frame, in which documents hold geometries, the mirror image has y turned round. */
function mirrored(x: Coordinates): Coordinates {
  return x.map((value, k) => (k % 3 === 1 ? -value : value));
}

function areMirrorImages(x: Coordinates, y: Coordinates): boolean {
  return (
    x.every((value, k) => Math.abs(value - (k % 3 === 1 ? -y[k] : y[k])) < 2e-6) && x.some((value, k) => Math.abs(value - y[k]) > 1e-3)
  );
}

function isWholeTurn({ points }: ProfileDocument): boolean {
  return points.every(({ angle }, n) => ((((points[(n + 1) % points.length].angle - angle) % 360) + 360) % 360 || 360) < 180);
}

/** Points with the breaks of the profile; those of single points get the slope of the polynomial through their neighbours on the branch. */
function withSlopes(points: readonly EnginePoint[], profile: ProfileDocument, singlePoints: boolean) {
  const count = points.length;
  const whole = isWholeTurn(profile);
  const breaks = points.map((_, n) => profile.points[n].breakAfter);
  return points.map((point, n) => {
    const joined = { ...point, breakAfter: breaks[n], beyond: null, before: null };
    if (!singlePoints) return joined;
    const around = [n];
    for (const direction of [1, -1])
      for (let step = 1; step <= 2 && around.length < Math.min(5, count); step++) {
        const at = n + direction * step;
        if (!whole && (at < 0 || at >= count)) break;
        const last = direction === 1 ? at - 1 : at;
        if (breaks[(last + count) % count]) break;
        around.push((at + count) % count);
      }
    const x = around.map((m) => radians(wrapDegrees(points[m].angle - point.angle)));
    return {
      ...joined,
      torque: slopeAtFirst(
        x,
        around.map((m) => points[m].energy),
      ),
    };
  });
}

/** Slope at x[0] of the polynomial through the points (Lagrange's form). */
function slopeAtFirst(x: readonly number[], y: readonly number[]): number {
  let slope = 0;
  for (let j = 1; j < x.length; j++) {
    let weight = 1 / (x[0] - x[j]);
    slope += y[0] * weight;
    weight = 1 / (x[j] - x[0]);
    for (let k = 1; k < x.length; k++) if (k !== j) weight *= (x[0] - x[k]) / (x[j] - x[k]);
    slope += y[j] * weight;
  }
  return slope;
}
