/**
 * What a scan needs of an energy: a force field, an engine outside the process or a user's own object satisfies it by its shape.
 *
 * Optimisers and scans are written once, as generators that yield a geometry, are told its energy, and find its gradient in the
 * buffer they own. `drive` runs one on a potential in this thread, `driveAsync` on one that answers later.
 */
import type { Coordinates } from '@tordial/geometry';

export interface Potential {
  readonly atomCount: number;
  /** Energy in kcal/mol; writes dE/dx (kcal/mol/angstrom, 3 values an atom) into `gradient` when it is given. */
  evaluate(x: Coordinates, gradient?: Float64Array): number;
}

export interface AsyncPotential {
  readonly atomCount: number;
  /** Energy in kcal/mol and dE/dx in kcal/mol/angstrom. */
  evaluate(x: Coordinates): Promise<{ energy: number; gradient?: Float64Array }>;
}

/** What a calculation asks for: the energy at `x`, and dE/dx written into `gradient`. Both buffers belong to the calculation. */
export interface Question {
  readonly x: Coordinates;
  readonly gradient: Float64Array;
}

/** A calculation that asks for energies and returns a result of type T. */
export type Calculation<T> = Generator<Question, T, number>;

/** The part of an AbortSignal that a calculation looks at. */
export interface Abortable {
  readonly aborted: boolean;
  throwIfAborted(): void;
}
