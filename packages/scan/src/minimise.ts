/**
 * Minimisation by limited-memory BFGS with a preconditioner, on geometries that may be bound to a constraint.
 *
 * A constraint is kept exactly: after each step `retract` brings the geometry back onto it, and the function that is minimised is the energy
 * of the geometry so brought back. Its gradient follows from the chain rule (`reduce`), so nothing else here knows of constraints.
 *
 * Sources: J. Nocedal, Math. Comput. 35, 773 (1980); the approximate Wolfe condition where rounding hides the decrease:
 * W. W. Hager and H. Zhang, SIAM J. Optim. 16, 170 (2005).
 */
import { type Coordinates, type Molecule, TordialError } from '@tordial/geometry';
import { drive } from './drive.js';
import { modelHessian } from './model-hessian.js';
import type { Calculation, Potential } from './potential.js';
import type { Preconditioner } from './preconditioner.js';
import { forget, remember, type SecantMemory, searchDirection, secantMemory } from './secant-memory.js';

/** A set of geometries that the minimiser may not leave. */
export interface Constraint {
  /** Moves x back onto the constraint, in place. */
  retract(x: Coordinates): void;
  /**
   * Turns dE/dx at x (on the constraint) into the gradient of E(retract(x)), in place, and returns the largest component of the part of
   * dE/dx that is tangent to the constraint.
   */
  reduce(x: Coordinates, gradient: Float64Array): number;
}

export interface MinimiseOptions {
  /** Converged when no component of the gradient (tangent to the constraint, if there is one) exceeds this, kcal/mol/angstrom; 1e-3. */
  readonly tolerance?: number;
  /** Evaluations after which it gives up; 1000. */
  readonly maxEvaluations?: number;
  /** The farthest that an atom may go in one step, angstrom; 0.3. */
  readonly maxStep?: number;
  readonly constraint?: Constraint;
  /** What earlier minimisations of the same molecule nearby have learnt; extended in place. */
  readonly memory?: SecantMemory;
}

export interface Relaxed {
  /** Angstrom. */
  readonly coordinates: Coordinates;
  /** kcal/mol. */
  readonly energy: number;
  /** dE/dx at the result, not reduced by any constraint, kcal/mol/angstrom. */
  readonly gradient: Float64Array;
  /** Largest component of the gradient (tangent to the constraint), kcal/mol/angstrom. */
  readonly gradientMax: number;
  readonly converged: boolean;
  /** Energies and gradients asked for. */
  readonly evaluations: number;
}

/** Pairs of steps and gradient changes that a minimisation keeps. */
export const MEMORY = 8;

/** Fraction of the decrease that the slope promises which a step must bring (Armijo). */
const SUFFICIENT = 1e-4;
/** Energies that differ by less than this, relative to their size, are equal but for rounding. */
const ROUNDING = 1e-11;

/**
 * Minimises the energy from `start` (left as it is).
 * A minimisation that cannot go on returns its best geometry with `converged` false.
 * Throws `scan/energy` when the energy or gradient at the start is not finite.
 */
export function* minimise(start: Coordinates, preconditioner: Preconditioner, options: MinimiseOptions = {}): Calculation<Relaxed> {
  const { tolerance = 1e-3, maxEvaluations = 1000, maxStep = 0.3, constraint } = options;
  const length = start.length;
  const memory = options.memory ?? secantMemory(length, MEMORY);
  const x = start.slice();
  const raw = new Float64Array(length);
  const { reduced: gradient, trialReduced, direction, change, question } = memory.work;

  constraint?.retract(x);
  question.x.set(x);
  let energy = yield question;
  let evaluations = 1;
  raw.set(question.gradient);
  gradient.set(raw);
  let residual = constraint ? constraint.reduce(x, gradient) : largest(gradient);
  if (!Number.isFinite(energy) || !Number.isFinite(residual))
    throw new TordialError(
      'scan/energy',
      'the potential gives no finite energy and gradient for the geometry that a relaxation starts from',
    );
  if (residual > tolerance) preconditioner.follow?.(x);
  let radius = maxStep;

  while (residual > tolerance && evaluations < maxEvaluations) {
    searchDirection(memory, preconditioner, gradient, direction, change);
    let slope = dot(gradient, direction);
    if (!(slope < 0)) {
      forget(memory);
      searchDirection(memory, preconditioner, gradient, direction, change);
      slope = dot(gradient, direction);
      if (!(slope < 0)) break;
    }
    const reach = farthest(direction);
    let scale = reach > radius ? radius / reach : 1;
    const limited = scale < 1;

    let accepted = false;
    let tries = 0;
    for (; tries < 12 && evaluations < maxEvaluations; tries++) {
      stepAlong(x, scale, direction, question.x);
      constraint?.retract(question.x);
      const trial = yield question;
      evaluations++;
      trialReduced.set(question.gradient);
      const trialResidual = constraint ? constraint.reduce(question.x, trialReduced) : largest(trialReduced);
      if (!Number.isFinite(trial) || !Number.isFinite(trialResidual)) {
        scale *= 0.1;
        continue;
      }
      const trialSlope = dot(trialReduced, direction);
      const decrease = trial - energy;
      const hidden = Math.abs(decrease) <= ROUNDING * (1 + Math.abs(energy)) && trialSlope <= (2 * SUFFICIENT - 1) * slope;
      if (decrease <= SUFFICIENT * scale * slope || hidden || (trialResidual <= tolerance && decrease <= 1e-9)) {
        // direction becomes the step that was really made, `change` what it did to the gradient
        difference(question.x, x, direction);
        difference(trialReduced, gradient, change);
        remember(memory, direction, change);
        x.set(question.x);
        raw.set(question.gradient);
        gradient.set(trialReduced);
        energy = trial;
        residual = trialResidual;
        accepted = true;
        break;
      }
      scale *= shorter(decrease, scale * slope, scale * trialSlope);
    }
    if (!accepted) {
      // nothing shorter helps: either what is remembered misleads, or rounding is reached
      if (memory.count === 0) break;
      forget(memory);
      radius = maxStep;
      continue;
    }
    if (tries > 0) radius = Math.max(0.02, Math.min(radius, scale * reach));
    else if (limited) radius = Math.min(2 * radius, 2 * maxStep);
    // pairs from before the model had to change belong to another part of the surface
    if (preconditioner.follow?.(x)) forget(memory);
  }
  return { coordinates: x, energy, gradient: raw, gradientMax: residual, converged: residual <= tolerance, evaluations };
}

/** By how much to shorten a step: the minimum of the cubic through both ends' energies and slopes, kept within a tenth and a half. */
function shorter(change: number, slope: number, trialSlope: number): number {
  const a = slope + trialSlope - 2 * change;
  const b = 3 * change - 2 * slope - trialSlope;
  const root = Math.sqrt(Math.max(0, b * b - 3 * a * slope));
  const best = Math.abs(a) > 1e-14 * Math.abs(b) ? (root - b) / (3 * a) : -slope / (2 * b);
  return Number.isFinite(best) ? Math.min(Math.max(best, 0.1), 0.5) : 0.25;
}

/** Writes x + scale d into `out`. */
function stepAlong(x: Float64Array, scale: number, d: Float64Array, out: Float64Array): void {
  for (let k = 0; k < x.length; k++) out[k] = x[k] + scale * d[k];
}

/** Writes u - v into `out`. */
function difference(u: Float64Array, v: Float64Array, out: Float64Array): void {
  for (let k = 0; k < u.length; k++) out[k] = u[k] - v[k];
}

function dot(u: Float64Array, v: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < u.length; k++) sum += u[k] * v[k];
  return sum;
}

/** Largest component by size; NaN if there is one. */
export function largest(v: Float64Array): number {
  let most = 0;
  for (let k = 0; k < v.length; k++) {
    const size = Math.abs(v[k]);
    if (!(size <= most)) most = size;
  }
  return most;
}

/** Longest displacement of an atom. */
function farthest(step: Float64Array): number {
  let most = 0;
  for (let at = 0; at < step.length; at += 3) {
    const square = step[at] * step[at] + step[at + 1] * step[at + 1] + step[at + 2] * step[at + 2];
    if (square > most) most = square;
  }
  return Math.sqrt(most);
}

/** Throws `potential/atoms` when coordinates do not fit the molecule or the potential. */
export function checkSizes(molecule: Molecule, potential: { readonly atomCount: number }, x: Coordinates): void {
  if (potential.atomCount !== molecule.atomCount || x.length !== 3 * molecule.atomCount)
    throw new TordialError(
      'potential/atoms',
      `molecule, potential and coordinates must agree: ${molecule.atomCount}, ${potential.atomCount} and ${x.length / 3} atoms`,
    );
}

/** Relaxes a geometry freely. Throws as `minimise` does, and `potential/atoms` when sizes differ. */
export function relax(
  molecule: Molecule,
  potential: Potential,
  x: Coordinates,
  options: Omit<MinimiseOptions, 'constraint' | 'memory'> = {},
): Relaxed {
  checkSizes(molecule, potential, x);
  return drive(minimise(x, modelHessian(molecule), options), potential);
}
