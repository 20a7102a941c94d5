/**
 * The stationary points of a profile, proved: wells relaxed without constraint to minima, barriers refined to first-order saddles, crossings of branches
 * replaced by the saddles on either side of them; the order of each counted on its Hessian, and the path down from each saddle followed to the
 * minima it joins. What turns out to be something else is said to be that.
 */

import { atomicMass, isotopeMass, type Molecule, wrapDegrees } from '@tordial/geometry';
import { drivenRotor } from '../driven-rotor.js';
import { modelHessian } from '../model-hessian.js';
import type { Calculation } from '../potential.js';
import {
  angleOf,
  type Candidate,
  type Candidates,
  LEFT,
  MOST_EVALUATIONS,
  MOST_TRIES,
  minimumNear,
  type Proof,
  type ProofOptions,
  type ProvedPoint,
  type ProvedPoints,
  plain,
  SAME_ANGLE,
  say,
  type Verdict,
} from './proof-task.js';
import { provedBarrier, provedCrossing } from './proved-saddle.js';
import { sameMinimum } from './same-minimum.js';

/**
 * Proves the stationary points of a profile as a calculation, for any potential. `molecule` with `profile.torsion` must be those that were scanned.
 * Throws as `drivenRotor` and `stationaryPoint` do.
 */
export function* proof(molecule: Molecule, profile: Candidates, options: ProofOptions = {}): Calculation<ProvedPoints> {
  const { stationaryPoints } = profile;
  const work: Proof = {
    molecule,
    rotor: drivenRotor(molecule, profile.torsion),
    masses: Float64Array.from(molecule.atomicNumbers, (element, i) =>
      molecule.isotopes[i] > 0 ? isotopeMass(element, molecule.isotopes[i]) : atomicMass(element),
    ),
    model: modelHessian(molecule),
    tolerance: options.tolerance ?? 1e-4,
    displacement: options.displacement,
    same: sameMinimum(molecule),
    notes: [],
    tries: 0,
    limit: 0,
    arc: { from: 0, width: 360 },
    evaluations: 0,
  };
  const points: ProvedPoint[] = [];
  let done = 0;
  // wells first: the paths down from the saddles are compared with them
  const wells: ProvedPoint[] = [];
  for (const [of, candidate] of stationaryPoints.entries()) {
    if (candidate.kind !== 'well') continue;
    const well: ProvedPoint = yield* provedWell(work, candidate, of, wells);
    wells.push(well);
    points[of] = well;
    options.onProgress?.(++done, stationaryPoints.length);
  }
  for (const [of, candidate] of stationaryPoints.entries()) {
    if (candidate.kind === 'well') continue;
    work.tries = MOST_TRIES;
    work.limit = work.evaluations + MOST_EVALUATIONS;
    const beside = wellsBeside(stationaryPoints, of).flatMap((index) => wells.filter((well) => well.of === index));
    if (beside.length > 0) work.arc = arcBetween(beside[0].angle, beside[1].angle);
    points[of] =
      candidate.kind === 'barrier'
        ? yield* provedBarrier(work, candidate, of, wells, beside)
        : yield* provedCrossing(work, profile, of, wells, beside);
    options.onProgress?.(++done, stationaryPoints.length);
  }
  return { points, notes: work.notes, evaluations: work.evaluations };
}

/** The wells before and after a barrier, by index; none where there is no well. */
function wellsBeside(points: readonly Candidate[], of: number): readonly number[] {
  const count = points.length;
  return [-1, 1].flatMap((direction) => {
    for (let n = 1; n <= count; n++) {
      const at = (of + n * direction + n * count) % count;
      if (points[at].kind === 'well') return [at];
    }
    return [];
  });
}

/** The arc from one angle up to another, degrees; the whole turn from a well to itself. */
function arcBetween(from: number, to: number): Proof['arc'] {
  const width = (((to - from) % 360) + 360) % 360;
  return { from, width: width < 1e-3 ? 360 : width };
}

function* provedWell(work: Proof, { angle, coordinates }: Candidate, of: number, known: readonly ProvedPoint[]): Calculation<ProvedPoint> {
  const found = yield* minimumNear(work, coordinates);
  const relaxedAngle = angleOf(work, found.coordinates);
  const same = known.filter((well) => work.same(well, found));
  const merged = same.some((well) => Math.abs(wrapDegrees(well.angle - relaxedAngle)) < SAME_ANGLE);
  const left = Math.abs(wrapDegrees(relaxedAngle - angle)) > LEFT;
  const verdict: Verdict = !found.converged ? 'not found' : found.order > 0 ? 'higher order' : merged || left ? 'merged' : 'minimum';
  if (verdict !== 'minimum')
    say(
      work,
      'stationary/well',
      `the well at ${angle.toFixed(1)} degrees is no minimum of its own: ${
        verdict === 'merged'
          ? `relaxed without constraint it goes to ${relaxedAngle.toFixed(1)} degrees`
          : verdict === 'not found'
            ? 'its relaxation did not converge'
            : `${found.order} eigenvalues of its Hessian stay negative`
      }`,
    );
  return {
    ...plain(work, found, of, 'well', coordinates),
    verdict,
    overlap: null,
    motion: null,
    ends: null,
    inverts: [],
    links: 0,
    sameAs: same.length > 0 ? (same[0].sameAs ?? same[0].of) : of,
  };
}
