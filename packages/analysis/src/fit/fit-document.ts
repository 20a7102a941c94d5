/** The result of a torsion fit as a plain JSON document; the JSON Schema stands in docs/schemas/fit-1.json. */
import type { Note } from '@tordial/geometry';
import type { DocumentMolecule, EnergyUnit } from '@tordial/scan';
import type { OrderError } from './cross-validation.js';
import type { CurveErrors } from './curve-errors.js';
import type { FitWeights } from './fit-points.js';
import type { FittedTerm, Restraint } from './fit-series.js';
import type { SeriesForms } from './series-forms.js';

export const FIT_SCHEMA = 'tordial/fit/1';

type Torsion = readonly [number, number, number, number];

/** One series: what it is, and which torsions have it. `torsions` and `terms` are what `mmff94` takes as `torsionOverrides` for the first molecule. */
export interface DocumentSeries {
  /** Torsions of the first molecule of the document, atom indices. */
  readonly torsions: readonly Torsion[];
  /** Amplitudes in kcal/mol whatever the document's unit, phases in degrees. */
  readonly terms: readonly FittedTerm[];
  /** MMFF94 atom types and torsion class that the torsions share, for other molecules; null where the fit knew no force field. */
  readonly types: Torsion | null;
  readonly class: number | null;
  /** The force field's terms before the fit, kcal/mol. */
  readonly before: readonly { readonly n: number; readonly v: number; readonly phase: number }[];
  readonly smarts: {
    readonly patterns: readonly { readonly smarts: string; readonly matches: number; readonly fitted: number }[];
    readonly statement: string;
  };
  readonly forms: readonly SeriesForms[];
}

export interface DocumentFitPoint {
  readonly angle: number;
  /** Energies relative to the lowest reference point; before and after are shifted to the reference's mean. */
  readonly reference: number;
  readonly before: number;
  readonly after: number;
  readonly weight: number;
}

/** One molecule that took part. */
export interface DocumentFitSet {
  readonly molecule: DocumentMolecule;
  readonly torsion: Torsion;
  readonly reference: string;
  /** Torsions that have each series, in this molecule's indices. */
  readonly torsions: readonly (readonly Torsion[])[];
  readonly points: readonly DocumentFitPoint[];
  readonly before: CurveErrors;
  readonly after: CurveErrors;
}

export interface FitDocument {
  readonly schema: typeof FIT_SCHEMA;
  /** Unit of the points and errors of `sets` and `quality`. */
  readonly unit: EnergyUnit;
  /** Force field that the series stand in: 'MMFF94s', say. */
  readonly forceField: 'MMFF94' | 'MMFF94s';
  readonly series: readonly DocumentSeries[];
  readonly sets: readonly DocumentFitSet[];
  readonly quality: {
    readonly rmsdBefore: number;
    readonly rmsdAfter: number;
    readonly largestAfter: number;
    readonly residualStandardDeviation: number | null;
    readonly points: number;
    readonly independentPoints: number;
    readonly parameters: number;
    readonly degreesOfFreedom: number;
    readonly crossValidation: { readonly folds: number; readonly errors: readonly OrderError[] } | null;
    readonly correlations: { readonly labels: readonly string[]; readonly rows: readonly (readonly number[])[] } | null;
    readonly selfConsistency: { readonly iterations: number; readonly change: number; readonly converged: boolean } | null;
  };
  readonly settings: {
    readonly target: 'profile' | 'difference';
    readonly geometries: 'given' | 'relaxed';
    readonly scope: 'rotor' | 'type' | 'axis';
    readonly order: number;
    readonly phases: 'fixed' | 'free';
    readonly weights: FitWeights;
    readonly restraint: Restraint & { readonly toward: 'zero' | 'existing' };
    readonly [name: string]: unknown;
  };
  readonly notes: readonly Note[];
  readonly provenance: { readonly program: string; readonly version: string; readonly [name: string]: unknown };
}
