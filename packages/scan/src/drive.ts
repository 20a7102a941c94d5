import { TordialError } from '@tordial/geometry';
import type { Abortable, AsyncPotential, Calculation, Potential } from './potential.js';

/** Runs a calculation to its end on a potential in this thread. */
export function drive<T>(calculation: Calculation<T>, potential: Potential): T {
  let step = calculation.next(0);
  while (!step.done) step = calculation.next(potential.evaluate(step.value.x, step.value.gradient));
  return step.value;
}

/** Runs a calculation on a potential that answers later; stops with the signal's reason when that is aborted. Throws `potential/gradient` when an answer lacks its gradient. */
export async function driveAsync<T>(calculation: Calculation<T>, potential: AsyncPotential, signal?: Abortable): Promise<T> {
  let step = calculation.next(0);
  while (!step.done) {
    signal?.throwIfAborted();
    const { x, gradient } = step.value;
    const answer = await potential.evaluate(x);
    if (!answer.gradient)
      throw new TordialError('potential/gradient', 'the potential gave an energy without a gradient, which a relaxation needs');
    gradient.set(answer.gradient);
    step = calculation.next(answer.energy);
  }
  return step.value;
}
