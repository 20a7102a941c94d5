/**
 * Fits torsion series to points: sum over the torsions of each series of 0.5 V_n (1 + cos(n phi - gamma_n)), n = 1 ... order, plus an offset for
 * each set of points, to reference - base.
 *
 * With the phases fixed at 0 (odd n) and 180 degrees (even n) the problem is linear. With free phases it is solved in V_n cos gamma_n and
 * V_n sin gamma_n, where it is linear as well, and from there in V_n and gamma_n by Levenberg and Marquardt, which gives their standard
 * errors and takes restraints on the amplitudes.
 */
import { type Note, TordialError } from '@tordial/geometry';
import { type CountedPoint, countedPoints, type FitSet, type FitWeights } from './fit-points.js';
import { levenbergMarquardt } from './levenberg-marquardt.js';
import { type LinearSolution, solveLinear } from './linear-least-squares.js';
import { requireOrder, type SeriesTerm, usualPhase } from './series-term.js';

export interface Restraint {
  /** `ridge` adds strength * (V - V0)^2 for each term, `lasso` strength * |V - V0|, to the weighted sum of squared residuals (kcal/mol). */
  readonly kind: 'none' | 'ridge' | 'lasso';
  readonly strength: number;
}

export interface FitSeriesOptions {
  /** Highest periodicity, 0 to 6; 0 fits the offsets alone. */
  readonly order: number;
  readonly phases: 'fixed' | 'free';
  readonly weights: FitWeights;
  readonly restraint: Restraint;
  /** For each series the terms that restraints and undetermined terms go to; zero where there are none. */
  readonly toward?: readonly (readonly SeriesTerm[])[];
}

export interface FittedTerm extends SeriesTerm {
  /** Of V, kcal/mol; null where the points leave nothing to judge it by. */
  readonly standardError: number | null;
  /** Of the phase, degrees; null for a fixed one. */
  readonly phaseStandardError: number | null;
  /** False for a term that the points say nothing about by itself. */
  readonly determined: boolean;
}

export interface SeriesFit {
  /** For each series its terms, n = 1 ... order. */
  readonly series: readonly (readonly FittedTerm[])[];
  /** For each set: reference = base + series + offset, kcal/mol. */
  readonly offsets: readonly number[];
  /** Correlations of the terms: labels, and a row a label; null without degrees of freedom. */
  readonly correlations: { readonly labels: readonly string[]; readonly rows: readonly (readonly number[])[] } | null;
  /** Points, those that tell something of their own, and parameters that they determine (offsets included). */
  readonly points: number;
  readonly independentPoints: number;
  readonly parameters: number;
  readonly degreesOfFreedom: number;
  /** Weighted standard deviation of the residuals, kcal/mol; null without degrees of freedom. */
  readonly residualStandardDeviation: number | null;
  readonly notes: readonly Note[];
}

/** A step of 1 kcal/mol that changes the energies by less than this (kcal/mol, root-mean-square) is not determined by them. */
const LEAST_EFFECT = 0.01;
/** Correlation above which two terms are said to stand in for each other. */
const CORRELATED = 0.95;
/** Amplitude (kcal/mol) below which a free phase has no meaning. */
const FLAT = 1e-4;

/**
 * Fits all series to all sets at once. Throws as `countedPoints` does, `fit/order`, `fit/restraint` for a strength below 0, and `fit/points` when there are fewer
 * independent points than terms and offsets.
 */
export function fitSeries(sets: readonly FitSet[], options: FitSeriesOptions): SeriesFit {
  return fitCounted(countedPoints(sets, options.weights, options.phases), sets.length, options);
}

/** The same for points whose weights are known already. */
export function fitCounted(points: readonly CountedPoint[], setCount: number, options: FitSeriesOptions): SeriesFit {
  const { order, phases, restraint } = options;
  requireOrder(order);
  if (!(restraint.strength >= 0 && Number.isFinite(restraint.strength)))
    throw new TordialError('fit/restraint', `the strength of a restraint must be a number from 0 up, not ${restraint.strength}`);
  const groups = points[0].torsions.length;
  const independentPoints = new Set(points.map(({ twins }) => twins)).size;
  const wanted = groups * order * (phases === 'free' ? 2 : 1) + setCount;
  if (independentPoints < wanted)
    throw new TordialError(
      'fit/points',
      `${independentPoints} independent points cannot determine ${wanted} parameters (${wanted - setCount} of the terms, ${setCount} of the zero of energy); give more points or a lower order`,
    );
  return phases === 'fixed'
    ? fixedPhases(points, setCount, groups, independentPoints, options)
    : freePhases(points, setCount, groups, independentPoints, options);
}

/** Rows of coefficients: for each series and n the sum over its torsions of 0.5 cos n phi (with its usual sign), and of 0.5 sin n phi for free phases. */
function designRow(point: CountedPoint, order: number, phases: 'fixed' | 'free'): number[] {
  const row: number[] = [];
  for (const angles of point.torsions)
    for (let n = 1; n <= order; n++) {
      const cosine = angles.reduce((sum, phi) => sum + Math.cos(n * phi), 0) / 2;
      if (phases === 'fixed') row.push(usualPhase(n) === 0 ? cosine : -cosine);
      else row.push(cosine, angles.reduce((sum, phi) => sum + Math.sin(n * phi), 0) / 2);
    }
  return row;
}

function targetTerm(options: FitSeriesOptions, group: number, n: number): SeriesTerm {
  return options.toward?.[group]?.find((term) => term.n === n) ?? { n, v: 0, phase: usualPhase(n) };
}

function fixedPhases(
  points: readonly CountedPoint[],
  setCount: number,
  groups: number,
  independent: number,
  options: FitSeriesOptions,
): SeriesFit {
  const { order, restraint } = options;
  const places = termPlaces(groups, order);
  const target = places.map(({ group, n }) => {
    const { v, phase } = targetTerm(options, group, n);
    return v * Math.cos(((phase - usualPhase(n)) * Math.PI) / 180);
  });
  const solution = solveLinear({
    ...observations(points, order, 'fixed'),
    target,
    restraint,
    groups: places.map((_, k) => [k]),
    leastEffect: LEAST_EFFECT,
  });
  const quality = residualQuality(points, solution, order, 'fixed', setCount, independent);
  const errors = standardErrors(solution.unitCovariance, quality.variance);
  const terms = places.map(({ n }, k) => ({
    n,
    v: solution.coefficients[k] + 0,
    phase: usualPhase(n),
    standardError: solution.determined[k] ? (errors?.[k] ?? null) : null,
    phaseStandardError: null,
    determined: solution.determined[k],
  }));
  const labels = places.map(({ group, n }) => label(groups, group, `V${n}`));
  const covariance = quality.variance === null ? null : solution.unitCovariance;
  return assembled(points, terms, groups, order, solution.offsets, quality, labels, covariance, independent);
}

function freePhases(
  points: readonly CountedPoint[],
  setCount: number,
  groups: number,
  independent: number,
  options: FitSeriesOptions,
): SeriesFit {
  const { order, restraint } = options;
  const places = termPlaces(groups, order);
  const linearTarget = places.flatMap(({ group, n }) => {
    const { v, phase } = targetTerm(options, group, n);
    return [v * Math.cos((phase * Math.PI) / 180), v * Math.sin((phase * Math.PI) / 180)];
  });
  const linear = observations(points, order, 'free');
  const solve = () =>
    solveLinear({
      ...linear,
      target: linearTarget,
      restraint,
      groups: places.map((_, k) => [2 * k, 2 * k + 1]),
      leastEffect: LEAST_EFFECT,
    });
  const both = ({ determined }: LinearSolution, k: number): boolean => determined[2 * k] && determined[2 * k + 1];
  let solution = solve();
  const held = places.map((_, k) => k).filter((k) => !both(solution, k));
  if (held.length === places.length && places.length > 0) {
    // half a turn of a symmetric curve, say: amplitudes are all that can be fitted
    const fit = fixedPhases(points, setCount, groups, independent, options);
    return { ...fit, notes: [...fit.notes, phasesHeld(places.map(({ group, n }) => label(groups, group, `${n}`)))] };
  }
  if (held.length > 0) {
    for (const row of linear.design) for (const k of held) row[2 * k + 1] = 0;
    for (const k of held) linearTarget[2 * k + 1] = 0;
    solution = solve();
  }
  const start = places.map(({ n }, k) => amplitudeAndPhase(solution.coefficients[2 * k], solution.coefficients[2 * k + 1], n));
  const determined = places.map((_, k) => (held.includes(k) ? solution.determined[2 * k] : both(solution, k)));
  // a phase of nothing, and a term that the points do not tell apart, stay as the linear solution left them
  const moving = places.map((_, k) => k).filter((k) => both(solution, k) && Math.abs(start[k].v) > FLAT);
  if (moving.length === 0 || restraint.kind === 'lasso') {
    const quality = residualQuality(points, solution, order, 'free', setCount, independent);
    const terms = places.map(({ n }, k) => ({ n, ...start[k], standardError: null, phaseStandardError: null, determined: determined[k] }));
    return assembled(points, terms, groups, order, solution.offsets, quality, [], null, independent);
  }

  const still = solution.coefficients.map((value, k) => (moving.includes(k >> 1) ? 0 : value));
  const observed = linear.observed.map((value, i) => value - linear.design[i].reduce((sum, x, k) => sum + x * still[k], 0));
  const ridge = restraint.kind === 'ridge' ? restraint.strength : 0;
  const pulls = ridge > 0 ? moving.map((k) => signedTarget(targetTerm(options, places[k].group, places[k].n))) : [];
  // amplitudes beside the moving terms that the points determine too
  const beside = Math.max(0, solution.rank - 2 * moving.length);
  const fit = levenbergMarquardt({
    observed: [...observed, ...pulls],
    weights: [...linear.weights, ...pulls.map(() => ridge)],
    restraints: pulls.length,
    independent: independent - beside,
    start: [...moving.flatMap((k) => [start[k].v, (start[k].phase * Math.PI) / 180]), ...solution.offsets],
    model: (parameters, values) => {
      for (let i = 0; i < observed.length; i++) {
        let value = parameters[2 * moving.length + points[i].set];
        moving.forEach((k, m) => {
          const [v, phase] = [parameters[2 * m], parameters[2 * m + 1]];
          value += v * (Math.cos(phase) * linear.design[i][2 * k] + Math.sin(phase) * linear.design[i][2 * k + 1]);
        });
        values[i] = value;
      }
      pulls.forEach((_, m) => {
        values[observed.length + m] = parameters[2 * m];
      });
    },
  });
  const offsets = Array.from(fit.parameters.subarray(2 * moving.length));
  const terms = places.map(({ n }, k) => {
    const m = moving.indexOf(k);
    if (m < 0) return { n, ...start[k], standardError: null, phaseStandardError: null, determined: determined[k] };
    const v = fit.parameters[2 * m];
    const phase = (fit.parameters[2 * m + 1] * 180) / Math.PI;
    const errors = fit.standardErrors;
    return {
      n,
      ...nearUsual(v, phase, n),
      standardError: errors?.[2 * m] ?? null,
      phaseStandardError: errors && (errors[2 * m + 1] * 180) / Math.PI,
      determined: true,
    };
  });
  const quality = {
    degreesOfFreedom: fit.degreesOfFreedom,
    variance: fit.covariance && fit.residualSumOfSquares / fit.degreesOfFreedom,
    parameters: fit.parameters.length + beside,
  };
  const labels = moving.flatMap((k) => [
    label(groups, places[k].group, `V${places[k].n}`),
    label(groups, places[k].group, `phase ${places[k].n}`),
  ]);
  const covariance = fit.covariance?.slice(0, labels.length).map((row) => row.slice(0, labels.length)) ?? null;
  const result = assembled(points, terms, groups, order, offsets, quality, labels, covariance, independent);
  if (held.length === 0) return result;
  const names = held.map((k) => label(groups, places[k].group, `${places[k].n}`));
  return { ...result, notes: [...result.notes, phasesHeld(names)] };
}

function phasesHeld(names: readonly string[]): Note {
  return {
    code: 'fit/phases-held',
    message: `the points do not determine the phases of the terms ${names.join(', ')} (half a turn does not, nor a symmetric rotor); they are held at 0 and 180 degrees`,
  };
}

function termPlaces(groups: number, order: number): { group: number; n: number }[] {
  return Array.from({ length: groups * order }, (_, k) => ({ group: Math.floor(k / order), n: (k % order) + 1 }));
}

function observations(points: readonly CountedPoint[], order: number, phases: 'fixed' | 'free') {
  return {
    design: points.map((point) => designRow(point, order, phases)),
    observed: points.map(({ reference, base }) => reference - base),
    weights: points.map(({ weight }) => weight),
    sets: points.map(({ set }) => set),
  };
}

/** V and gamma of V cos gamma and V sin gamma, gamma within 90 degrees of the usual phase, so that V keeps its usual sign. */
function amplitudeAndPhase(p: number, q: number, n: number): { v: number; phase: number } {
  return nearUsual(Math.hypot(p, q), (Math.atan2(q, p) * 180) / Math.PI, n);
}

function nearUsual(v: number, phase: number, n: number): { v: number; phase: number } {
  const usual = usualPhase(n);
  const away = phase - usual - 360 * Math.round((phase - usual) / 360);
  if (Math.abs(away) <= 90) return { v: v + 0, phase: usual + away };
  return { v: -v + 0, phase: usual + away - 180 * Math.sign(away) };
}

/** The amplitude that a term has when its phase is brought near the usual one. */
function signedTarget({ n, v, phase }: SeriesTerm): number {
  return nearUsual(v, phase, n).v;
}

interface Quality {
  readonly degreesOfFreedom: number;
  /** Of the residuals; null without degrees of freedom. */
  readonly variance: number | null;
  readonly parameters: number;
}

function residualQuality(
  points: readonly CountedPoint[],
  solution: LinearSolution,
  order: number,
  phases: 'fixed' | 'free',
  setCount: number,
  independent: number,
): Quality {
  const sum = points.reduce((total, point) => {
    const row = designRow(point, order, phases);
    const residual =
      point.reference - point.base - solution.offsets[point.set] - row.reduce((s, x, k) => s + x * solution.coefficients[k], 0);
    return total + point.weight * residual * residual;
  }, 0);
  const parameters = solution.rank + setCount;
  const degreesOfFreedom = independent - parameters;
  return { degreesOfFreedom, variance: degreesOfFreedom > 0 ? sum / degreesOfFreedom : null, parameters };
}

function standardErrors(unitCovariance: readonly (readonly number[])[], variance: number | null): number[] | null {
  return variance === null ? null : unitCovariance.map((row, k) => Math.sqrt(row[k] * variance));
}

function label(groups: number, group: number, name: string): string {
  return groups > 1 ? `series ${group + 1} ${name}` : name;
}

function assembled(
  points: readonly CountedPoint[],
  terms: readonly FittedTerm[],
  groups: number,
  order: number,
  offsets: readonly number[],
  { degreesOfFreedom, variance, parameters }: Quality,
  labels: readonly string[],
  covariance: readonly (readonly number[])[] | null,
  independentPoints: number,
): SeriesFit {
  const notes: Note[] = [];
  const rows = covariance?.map((row, i) =>
    row.map((value, j) => {
      const scale = Math.sqrt(covariance[i][i] * covariance[j][j]);
      return i === j ? 1 : scale > 0 ? value / scale : 0;
    }),
  );
  const open = terms.map((term, k) => ({ term, group: Math.floor(k / Math.max(order, 1)) })).filter(({ term }) => !term.determined);
  if (open.length > 0)
    notes.push({
      code: 'fit/not-determined',
      message: `the points do not determine ${open.map(({ term, group }) => label(groups, group, `V${term.n}`)).join(', ')} by themselves (their torsions cancel, or act alike); what the points leave open stays where the restraint's target is`,
    });
  if (rows)
    for (let i = 0; i < rows.length; i++)
      for (let j = 0; j < i; j++)
        if (Math.abs(rows[i][j]) > CORRELATED)
          notes.push({
            code: 'fit/correlated',
            message: `${labels[j]} and ${labels[i]} stand in for each other (correlation ${rows[i][j].toFixed(3)}); their sum effect is known better than either`,
          });
  if (degreesOfFreedom <= 0)
    notes.push({
      code: 'fit/exact',
      message: `${independentPoints} independent points and ${parameters} parameters: the fit passes through every point, and nothing tells how good its terms are`,
    });
  return {
    series: Array.from({ length: groups }, (_, g) => terms.slice(g * order, (g + 1) * order)),
    offsets,
    correlations: rows ? { labels, rows } : null,
    points: points.length,
    independentPoints,
    parameters,
    degreesOfFreedom,
    residualStandardDeviation: variance === null ? null : Math.sqrt(variance),
    notes,
  };
}
